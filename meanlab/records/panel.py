"""The result panel on paper: the texts, the table and the pictures of the page's panel, half a page of a report."""

from dataclasses import replace

from meanlab.core.results import Analysis
from meanlab.pictures import readings_picture, sampling_distribution
from meanlab.pictures.drawing import Drawing, Stroke, Words, line, together
from meanlab.pictures.for_paper import png, svg
from meanlab.pictures.measure import wrapped
from meanlab.wording import PanelTexts, panel_texts
from meanlab.wording.names import short_noun

WIDTH, HEIGHT = 990.0, 490.0
SIDE, TOP, BOTTOM = 18.0, 14.0, 12.0
TITLE, SENTENCE, CELL, FOOT = 18.0, 15.0, 12.0, 11.0
TITLE_LINE, SENTENCE_LINE, CELL_LINE, FOOT_LINE = 25.0, 22.0, 15.0, 15.0
CELL_ROOM = 10.0
TABLE, LABELS, GAP = 318.0, 132.0, 22.0
LEAST_PICTURES = 290.0
READINGS_SHARE = 0.42
MOST_VERDICT = 0.45


def panel_png(analysis: Analysis) -> bytes:
    """Return the result panel as PNG, 200 dots an inch; the same bytes each time."""
    return png(panel(analysis))


def panel_svg(analysis: Analysis) -> str:
    """Return the result panel as SVG; the same text each time."""
    return svg(panel(analysis))


def panel(analysis: Analysis, texts: PanelTexts | None = None) -> Drawing:
    """Return the panel as one drawing, 990 pixels wide and at least 490 high; longer texts make it higher."""
    texts = texts or panel_texts(analysis)
    inner = WIDTH - 2 * SIDE
    head = _head(texts, inner)
    sentence = _lines(texts.sentence, inner, SENTENCE, SENTENCE_LINE)
    foot = _lines(f"{_foot(texts)} {texts.origin}".strip(), inner, FOOT, FOOT_LINE, grey=True)
    fixed = TOP + head.height + 4 + sentence.height + 8 + 8 + foot.height + BOTTOM
    table = _table(texts)
    middle = max(HEIGHT - fixed, table.height, LEAST_PICTURES)
    pictures = _pictures(analysis, inner - TABLE - GAP, middle)
    down = TOP
    parts = []
    for part, room in ((head, 4.0), (sentence, 8.0)):
        parts.append(part.moved(SIDE, down))
        down += part.height + room
    parts += [table.moved(SIDE, down), pictures.moved(SIDE + TABLE + GAP, down)]
    down += middle + 8
    parts.append(foot.moved(SIDE, down))
    height = down + foot.height + BOTTOM
    frame = Stroke(((0.5, 0.5), (WIDTH - 0.5, 0.5), (WIDTH - 0.5, height - 0.5), (0.5, height - 0.5), (0.5, 0.0)))
    alt = f"{texts.title}: {texts.verdict_word}. {texts.sentence}"
    return together(WIDTH, height, (Drawing(WIDTH, height, (frame,)), *parts), alt)


def _head(texts: PanelTexts, inner: float) -> Drawing:
    verdict = wrapped(texts.verdict_word, inner * MOST_VERDICT, TITLE, bold=True)
    words = [
        Words(inner, TITLE_LINE * (place + 0.5), text, "right", TITLE, bold=True) for place, text in enumerate(verdict)
    ]
    taken = max(one.box.right - one.box.left for one in words)
    title = wrapped(texts.title, inner - taken - 24, TITLE, bold=True)
    words += [
        Words(0.0, TITLE_LINE * (place + 0.5), text, "left", TITLE, bold=True) for place, text in enumerate(title)
    ]
    return Drawing(inner, TITLE_LINE * max(len(verdict), len(title)), words=tuple(words))


def _lines(text: str, width: float, size: float, pitch: float, grey: bool = False) -> Drawing:
    lines = wrapped(text, width, size)
    words = tuple(Words(0.0, pitch * (place + 0.5), one, "left", size, grey=grey) for place, one in enumerate(lines))
    return Drawing(width, pitch * len(lines), words=words)


def _foot(texts: PanelTexts) -> str:
    return " ".join(part for part in (texts.why, texts.caution) if part)


def _table(texts: PanelTexts) -> Drawing:
    """Return the table; a text that is too wide for its cell goes on below."""
    words, strokes, down = [], [], 0.0
    for place, (label, text) in enumerate(texts.rows):
        cells = wrapped(label, LABELS - 8, CELL), wrapped(text, TABLE - LABELS, CELL)
        height = CELL_LINE * max(map(len, cells)) + CELL_ROOM
        for x, cell, grey in ((0.0, cells[0], True), (LABELS, cells[1], False)):
            words += [
                Words(x, down + CELL_ROOM / 2 + CELL_LINE * (line_of + 0.5), one, "left", CELL, grey=grey)
                for line_of, one in enumerate(cell)
            ]
        down += height
        if place + 1 < len(texts.rows):
            strokes.append(replace(line(0.0, down, TABLE, down, width=0.8), faint=True))
    return Drawing(TABLE, down, tuple(strokes), words=tuple(words))


def _pictures(analysis: Analysis, width: float, height: float) -> Drawing:
    """Return both pictures under each other; readings alone where nothing was tested."""
    sign, noun = analysis.readings.decimal_sign, short_noun(analysis.question.target_kind)
    if analysis.test is None:
        return readings_picture(analysis, width, min(height, 200.0))
    lower = round(height * READINGS_SHARE)
    upper = height - lower - 6
    above = sampling_distribution(analysis.test, sign, noun, width, upper)
    return together(width, height, (above, readings_picture(analysis, width, lower).moved(0, upper + 6)))
