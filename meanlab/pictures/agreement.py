"""The interval of the difference held against ± E, or against the limit."""

from meanlab.core.results import Analysis
from meanlab.pictures.axis import Scale, below
from meanlab.pictures.drawing import Drawing, Words, line, together
from meanlab.pictures.interval import interval_bar
from meanlab.pictures.places import kept_inside
from meanlab.wording.names import short_noun, unit_of
from meanlab.wording.numbers import level_text

WIDTH, HEIGHT = 640.0, 150.0
SIDE, ROOM_BELOW, TOP = 14.0, 38.0, 22.0
NAMES = 172.0

Bar = tuple[str, float | None, float | None]


def agreement_picture(analysis: Analysis, width: float = WIDTH, height: float = HEIGHT) -> Drawing | None:
    """Return the intervals of the difference from the target with 0 and the limits; None where none was examined."""
    found, test = analysis.equivalence, analysis.test
    if found is None or test is None:
        return None
    sign = analysis.readings.decimal_sign
    bars = _bars(analysis)
    limits = _limits(analysis)
    values = [0.0, *limits, *(end for _, *ends in bars for end in ends if end is not None)]
    low, high = min(values), max(values)
    room = 0.08 * (high - low) or abs(high) or 1.0
    base = height - ROOM_BELOW
    scale = Scale(low - room, high + room, NAMES, width - SIDE)
    pitch = (base - TOP) / len(bars)
    rows = [_row(bar, scale, TOP + pitch * (place + 0.5), width) for place, bar in enumerate(bars)]
    noun, unit = short_noun(analysis.question.target_kind), unit_of(analysis)
    title = f"difference from the {noun}" + (f", {unit}" if unit else "")
    axis = below(scale, base, title, sign, width=width)
    return together(width, height, (axis, *rows, _uprights(limits, noun, scale, base, width)), _alt(analysis, limits))


def _bars(analysis: Analysis) -> list[Bar]:
    found, test, sign = analysis.equivalence, analysis.test, analysis.readings.decimal_sign
    assert found is not None
    assert test is not None
    target = float(analysis.question.exact_target)
    ends = [None if end is None else end - target for end in (found.low, found.high)]
    one_sided = analysis.question.alternative != "two-sided"
    kind = "bound" if one_sided else "interval"
    return [
        (f"{level_text(found.level, sign)} {kind} (agreement)", ends[0], ends[1]),
        (f"{level_text(test.interval.level, sign)} {kind} (test)", test.offsets[1], test.offsets[2]),
    ]


def _limits(analysis: Analysis) -> list[float]:
    """Return −E and E; for a one-sided question the one that counts."""
    assert analysis.equivalence is not None
    limit, alternative = analysis.equivalence.limit, analysis.question.alternative
    if not limit:
        return []
    return [end for end, other in ((-limit, "greater"), (limit, "less")) if alternative != other]


def _row(bar: Bar, scale: Scale, y: float, width: float) -> Drawing:
    name, low, high = bar
    text = f"{name}: none" if low is None and high is None else name
    named = Drawing(width, y, words=(Words(4, y, text, "left"),))
    return together(width, y, (interval_bar(low, high, scale, y, 7.0), named))


def _uprights(limits: list[float], noun: str, scale: Scale, base: float, width: float) -> Drawing:
    """Return the line at 0 and the lines at the limits, their names above them, moved apart where they would touch."""
    lines = [(0.0, "dot", noun), *((end, "dash", "+ E" if end > 0 else "− E") for end in limits)]
    words: list[Words] = []
    for value, _, text in sorted(lines):
        label = kept_inside(Words(scale.px(value), 10, text), width)
        if words and label.box.left < words[-1].box.right + 8:
            label = Words(words[-1].box.right + 8, 10, text, "left")
        words.append(label)
    strokes = tuple(
        line(scale.px(value), 20, scale.px(value), base, "dot" if dash == "dot" else "dash", 1.6)
        for value, dash, _ in lines
    )
    return Drawing(width, base, strokes, words=tuple(words))


def _alt(analysis: Analysis, limits: list[float]) -> str:
    assert analysis.equivalence is not None
    against = "the limits − E and + E" if len(limits) == 2 else "the limit"
    state = "inside" if analysis.equivalence.within else "not wholly inside"
    return f"The interval of the difference from the target lies {state} {against}."
