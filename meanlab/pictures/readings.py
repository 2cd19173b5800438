"""The readings on one scale in their unit, with mean, interval and target."""

from dataclasses import dataclass
from math import isfinite

from meanlab.core.results import Analysis
from meanlab.pictures.axis import Scale, below
from meanlab.pictures.drawing import WORDS, Align, Dash, Drawing, Mark, Stroke, Words, line, together
from meanlab.pictures.entries import Entries, Entry, entries_of
from meanlab.pictures.interval import BOUNDS, interval_bar
from meanlab.pictures.measure import Box, shortened
from meanlab.pictures.places import Obstacles
from meanlab.wording.digits import estimate_of
from meanlab.wording.names import counted, short_noun
from meanlab.wording.numbers import level_text
from meanlab.wording.phrases import parameter_of
from meanlab.wording.shown import shown

WIDTH, HEIGHT = 620.0, 132.0
SIDE = 12.0
ROOM_BELOW = 38.0
INTERVAL_ROW = 16.0
FIRST_ROW = 34.0
ROW = 15.0
FAR = 8.0
MOST_ROWS_OF_PREPARATIONS = 5


@dataclass(frozen=True)
class Frame:
    """What one picture of readings stands in: scale, base line, width, decimal sign, and the noun for the target."""

    scale: Scale
    base: float
    width: float
    sign: str
    noun: str


def readings_picture(analysis: Analysis, width: float = WIDTH, height: float = HEIGHT) -> Drawing:
    """Return the drawing of the readings with mean, interval and target on an axis in their unit."""
    entries = entries_of(analysis)
    low, high = span_of(analysis, entries)
    base = height - ROOM_BELOW
    noun = short_noun(analysis.question.target_kind)
    frame = Frame(Scale(low, high, SIDE, width - SIDE), base, width, entries.sign, noun)
    obstacles = Obstacles(Box(0, 0, width, base - 1))
    uprights = _uprights(analysis, frame)
    obstacles.paths += [stroke.points for stroke, _ in uprights]
    parts = [
        below(frame.scale, base, title_of(analysis, entries, width), entries.sign, width=width),
        _interval(analysis, frame, obstacles),
        *_rows(analysis, entries, frame, obstacles),
        _named(uprights, frame, obstacles),
        _far_target(analysis, frame, obstacles),
    ]
    return together(width, height, parts, alt_of(analysis))


def alt_of(analysis: Analysis) -> str:
    """Return the drawing in a sentence."""
    numbers, summary = shown(analysis), analysis.summary
    noun = short_noun(analysis.question.target_kind)
    parts = [counted(summary.n_readings, "reading")]
    parts += [f"{summary.left_out} left out"] if summary.left_out else []
    parts += [f"{parameter_of(analysis)} {numbers.estimate}"] if numbers.estimate else []
    noun_of = BOUNDS.get(analysis.question.alternative, "interval")
    parts += [f"{numbers.interval_level} {noun_of} {numbers.interval}"] if numbers.interval else []
    return f"Readings on their scale: {', '.join(parts)}; {noun} {numbers.target}."


def title_of(analysis: Analysis, entries: Entries, width: float) -> str:
    """Return the title of the axis: the unit and what stands above it."""
    test = analysis.test
    nested = analysis.readings.preparations is not None
    drawn = len(entries.kept)
    what = "readings" if drawn == entries.count else f"readings ({drawn} of {entries.count}, evenly by size)"
    if nested:
        what = "injections (ticks) and preparation means"
    unit = shortened(entries.unit, width / 3, 12)
    what += f", {unit}" if unit else ""
    if test is not None:
        level = level_text(test.interval.level, entries.sign)
        what += f"; above: {parameter_of(analysis)} with {level} {BOUNDS.get(test.alternative, 'interval')}"
    elif analysis.summary.mean is not None:
        what += "; above: mean"
    return what


def span_of(analysis: Analysis, entries: Entries) -> tuple[float, float]:
    """Return both ends of the axis: all readings, the interval, and the target unless it is far away."""
    values = [entry.value for entry in entries.kept]
    values += [group.limit for group in entries.at_limit if group.limit is not None and not group.left_out]
    if analysis.test is not None:
        interval = analysis.test.interval
        values += [end for end in (interval.low, interval.high, analysis.test.estimate) if end is not None]
    target = float(analysis.question.exact_target)
    low, high = (min(values), max(values)) if values else (target, target)
    step = analysis.summary.resolution or 0.0
    span = max(high - low, 4 * step) or abs(high) * 0.01 or 1.0
    limit = analysis.question.number("equivalence_limit") or 0.0
    further = [target, target - limit, target + limit, *(entry.value for entry in entries.left_out)]
    near = [value for value in further if low - FAR * span <= value <= high + FAR * span]
    low, high = min([low, *near]), max([high, *near])
    room = 0.05 * max(high - low, span)
    return _finite(low - room), _finite(high + room)


def _finite(value: float) -> float:
    return value if isfinite(value) else (1.7e308 if value > 0 else -1.7e308)


def _interval(analysis: Analysis, frame: Frame, obstacles: Obstacles) -> Drawing:
    """Return the interval with its estimate, above the readings."""
    test, estimate, scale, y = analysis.test, estimate_of(analysis), frame.scale, INTERVAL_ROW
    low, high = (None, None) if test is None else (test.interval.low, test.interval.high)
    bar = interval_bar(low, high, scale, y)
    for stroke in bar.strokes[:1]:
        (left, _), (right, _) = stroke.points
        obstacles.boxes.append(Box(left - 5, y - 7, right + 5, y + 7))
    if estimate is None:
        return bar
    x = scale.px(estimate)
    obstacles.boxes.append(Box(x - 6, y - 7, x + 6, y + 7))
    dot = Mark(x, y, "dot", 9, f"{parameter_of(analysis)} {shown(analysis).estimate}")
    return together(frame.width, frame.base, (bar, Drawing(frame.width, frame.base, marks=(dot,))))


def _uprights(analysis: Analysis, frame: Frame) -> list[tuple[Stroke, str]]:
    """Return the lines at the target and at target ± E (one-sided: the end that counts) that lie on the axis."""
    question, scale = analysis.question, frame.scale
    target, limit = float(question.exact_target), question.number("equivalence_limit")
    lines: list[tuple[float, Dash, float, str]] = [(target, "dot", 1.8, _target_words(analysis, frame))]
    if limit is not None and question.alternative != "greater":
        lines.append((target - limit, "dashdot", 1.0, f"{frame.noun} − E"))
    if limit is not None and question.alternative != "less":
        lines.append((target + limit, "dashdot", 1.0, f"{frame.noun} + E"))
    return [
        (line(scale.px(value), 2, scale.px(value), frame.base, dash, width), text)
        for value, dash, width, text in lines
        if scale.holds(value)
    ]


def _target_words(analysis: Analysis, frame: Frame) -> str:
    return f"{frame.noun} {shortened(analysis.question.target_as_typed, 160, WORDS)}"


def _named(uprights: list[tuple[Stroke, str]], frame: Frame, obstacles: Obstacles) -> Drawing:
    """Return the upright lines with their words left or right of them, where nothing else stands."""
    words = []
    for stroke, text in uprights:
        x = stroke.points[0][0]
        sides: tuple[tuple[float, Align], ...] = ((x - 5, "right"), (x + 5, "left"))
        found = obstacles.place(Words(at, y, text, side) for y in heights(frame.base) for at, side in sides)
        words += [found] if found else []
    return Drawing(frame.width, frame.base, tuple(stroke for stroke, _ in uprights), words=tuple(words))


def _far_target(analysis: Analysis, frame: Frame, obstacles: Obstacles) -> Drawing:
    """Return an arrow towards a target that lies too far away for the axis."""
    target, scale = float(analysis.question.exact_target), frame.scale
    if scale.holds(target):
        return Drawing(frame.width, frame.base)
    text, above = f"{_target_words(analysis, frame)}, beyond this axis", target > scale.high
    edge, back = (scale.end, -1) if above else (scale.start, 1)
    inner = edge + 26 * back
    found = obstacles.place(Words(inner + 5 * back, y, text, "right" if above else "left") for y in heights(frame.base))
    y = found.y if found else 6.0
    arrow = line(inner, y, edge + 5 * back, y, "dot", 1.8)
    head = Mark(edge + 4 * back, y, "right" if above else "left", 8, text)
    return Drawing(frame.width, frame.base, (arrow,), marks=(head,), words=(found,) if found else ())


def heights(base: float) -> list[float]:
    """Return the heights at which a label may stand, the upper ones first."""
    return [8.0 + 4 * step for step in range(int((base - 16) / 4))]


def _rows(analysis: Analysis, entries: Entries, frame: Frame, obstacles: Obstacles) -> list[Drawing]:
    """Return the rows under the interval: entries at a limit, readings or preparations, readings left out."""
    top, bottom = FIRST_ROW, frame.base - 3
    drawn = []
    if entries.at_limit:
        drawn.append(_at_limits(entries, frame, obstacles, top + ROW / 2))
        top += ROW
    if entries.left_out:
        bottom -= ROW
        drawn.append(_left_out(entries, frame, obstacles, bottom + ROW / 2))
    if analysis.readings.preparations is None:
        marks = _stacked(entries, frame.scale, top, bottom)
    else:
        marks = _nested(analysis, entries, frame.scale, top, bottom)
    for mark in marks:
        half = mark.size / 2 if mark.shape == "tick" else 4
        obstacles.boxes.append(Box(mark.x - 2, mark.y - half, mark.x + 2, mark.y + half))
    return [*drawn, Drawing(frame.width, frame.base, marks=marks)]


def _stacked(entries: Entries, scale: Scale, top: float, bottom: float) -> tuple[Mark, ...]:
    """Return a tick for each reading; equal ones stand on each other."""
    heaps: dict[int, list[Entry]] = {}
    for entry in entries.kept:
        heaps.setdefault(round(scale.px(entry.value)), []).append(entry)
    tallest = max(map(len, heaps.values()), default=1)
    pitch = min(18.0, (bottom - top) / tallest)
    return tuple(
        Mark(scale.px(entry.value), bottom - pitch * (level + 0.5), "tick", pitch * 0.8, entries.said(entry))
        for heap in heaps.values()
        for level, entry in enumerate(heap)
    )


def _nested(analysis: Analysis, entries: Entries, scale: Scale, top: float, bottom: float) -> tuple[Mark, ...]:
    """Return a row for each of a few preparations, or two rows for many: means above, injections below."""
    lines = analysis.summary.preparations
    few = len(lines) <= MOST_ROWS_OF_PREPARATIONS
    pitch = (bottom - top) / len(lines) if few else (bottom - top) / 2
    row = {one.label: top + pitch * ((place if few else 0) + 0.5) for place, one in enumerate(lines)}
    marks = [
        Mark(scale.px(entry.value), row[entry.preparation] + (0 if few else pitch), "tick", min(9, pitch * 0.8),
             entries.said(entry))
        for entry in entries.kept
    ]  # fmt: skip
    marks += [
        Mark(scale.px(one.mean), row[one.label], "diamond", min(7, pitch * 0.7), f"mean of preparation {one.label}")
        for one in lines
        if one.mean is not None
    ]
    return tuple(marks)


def _left_out(entries: Entries, frame: Frame, obstacles: Obstacles, y: float) -> Drawing:
    scale, marks = frame.scale, []
    for entry in entries.left_out:
        says = f"{entries.said(entry)}, left out"
        if scale.holds(entry.value):
            marks.append(Mark(scale.px(entry.value), y, "cross", 9, says))
        else:
            above = entry.value > scale.high
            marks.append(Mark(scale.end - 3 if above else scale.start + 3, y, "right" if above else "left", 8, says))
    for mark in marks:
        obstacles.boxes.append(Box(mark.x - 5, y - 5, mark.x + 5, y + 5))
    xs = sorted(mark.x for mark in marks)
    found = obstacles.place((Words(xs[0] - 10, y, "left out", "right"), Words(xs[-1] + 10, y, "left out", "left")))
    return Drawing(frame.width, frame.base, marks=tuple(marks), words=(found,) if found else ())


def _at_limits(entries: Entries, frame: Frame, obstacles: Obstacles, y: float) -> Drawing:
    marks, strokes, words = [], [], []
    for group in entries.at_limit:
        below_it = group.kind == "below"
        at = group.limit if group.limit is not None else (frame.scale.low if below_it else frame.scale.high)
        x = min(max(frame.scale.px(at), frame.scale.start), frame.scale.end)
        tip = max(x - 16, 4.0) if below_it else min(x + 16, frame.width - 4)
        strokes += [line(x, y, tip, y), line(x, y - 5, x, y + 5)]
        marks.append(Mark(tip, y, "left" if below_it else "right", 8, group.words))
        obstacles.boxes.append(Box(min(x, tip) - 5, y - 6, max(x, tip) + 5, y + 6))
        sides = (Words(max(x, tip) + 10, y, group.words, "left"), Words(min(x, tip) - 10, y, group.words, "right"))
        found = obstacles.place(sides if below_it else sides[::-1])
        words += [found] if found else []
    return Drawing(frame.width, frame.base, tuple(strokes), marks=tuple(marks), words=tuple(words))
