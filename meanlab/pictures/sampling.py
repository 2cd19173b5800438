"""The sampling distribution: what the statistic does if the true value is the target, what rejects, what was seen."""

from collections.abc import Iterator
from dataclasses import dataclass
from itertools import pairwise
from math import isclose

import numpy as np

from meanlab.core.results import Test
from meanlab.pictures.axis import Scale, below
from meanlab.pictures.drawing import Align, Drawing, Fill, Mark, Point, Stroke, Words, line, together
from meanlab.pictures.measure import Box
from meanlab.pictures.null_law import CURVE_POINTS, NullLaw, Region, drawn_statistic, null_law
from meanlab.pictures.places import Obstacles, around, kept_inside
from meanlab.procedures.decision import tail
from meanlab.wording.numbers import df_text, level_text, rank_number, significant, statistic_number, statistic_text

WIDTH, HEIGHT = 620.0, 186.0
SIDE = 8.0
STRIP = 20.0
ROOM_BELOW = 38.0
FAR = 3.0
BEYOND_OBSERVED = 0.06
BAR_SHARE = 0.88
CURVED = ("z", "t", "guarded_t")


@dataclass(frozen=True)
class _Frame:
    """The pixels of one drawing: the scale of the statistic, the base line, and the height of one unit of density."""

    scale: Scale
    base: float
    height_of: float
    width: float

    def point(self, value: float, height: float) -> Point:
        return self.scale.px(value), self.base - height * self.height_of


def sampling_distribution(
    test: Test, sign: str = ".", noun: str = "target", width: float = WIDTH, height: float = HEIGHT
) -> Drawing:
    """Return the drawing of the null distribution of a test with its rejection region and the observed statistic.

    ``sign`` is the decimal sign, ``noun`` the word for what the true value is held against ("target", "limit").
    """
    law = null_law(test)
    observed = drawn_statistic(test, law)
    low, high, far = _window(law, observed)
    base = height - ROOM_BELOW
    scale = Scale(low, high, SIDE, width - SIDE)
    frame = _Frame(scale, base, (base - STRIP - 4) / _peak(law), width)
    obstacles = Obstacles(Box(0, 0, width, base - 2))
    shape = _bars(law, frame, obstacles) if law.bars else _curve(law, frame, obstacles)
    seen = _observed(test, observed, far, frame, obstacles, sign)
    words = _region_words(test, law, frame, obstacles, sign)
    axis = below(scale, base, _title(test, noun, sign), sign, width=width)
    parts = (shape, axis, seen, Drawing(width, height, words=words))
    return together(width, height, parts, alt_of(test, law, noun, sign))


def area_words(test: Test, law: NullLaw, region: Region, sign: str = ".") -> str:
    """Return the probability of a rejection region in words: "2.5 % beyond 2.20", "1.1 % at ≥ 8"."""
    nominal = tail(test.alternative, test.significance)
    if isclose(region.area, nominal, rel_tol=1e-9):
        percent = level_text(nominal, sign)
    else:
        percent = f"{significant(100 * region.area, 2, sign)} %"
    about = "about " if law.approximate else ""
    if test.procedure in CURVED:
        return f"{about}{percent} beyond {statistic_number(region.bound, sign)}"
    return f"{about}{percent} at {'≥' if region.upper else '≤'} {rank_number(region.bound, sign)}"


def alt_of(test: Test, law: NullLaw, noun: str, sign: str) -> str:
    """Return the drawing in a sentence."""
    regions = " and ".join(area_words(test, law, region, sign) for region in law.regions)
    rejecting = f"rejection region {regions}" if regions else "no outcome can reject"
    where = "inside" if test.reject else "outside"
    return (
        f"Sampling distribution, {_title(test, noun, sign)}: {rejecting}; "
        f"the observed {statistic_text(test, sign)} lies {where} the rejection region."
    )


def _title(test: Test, noun: str, sign: str) -> str:
    condition = f"if the true {test.parameter} were the {noun}"
    if test.procedure == "sign":
        return f"number above the {noun}, of {test.n_used}, {condition}"
    if test.procedure == "signed_rank":
        return f"W⁺, sum of the ranks above the {noun}, {condition}"
    if test.df is None:
        return f"z {condition}"
    name = {"guarded_t": "guarded t", "z": "z with uncertain σ"}.get(test.procedure, "t")
    degrees = "1 degree" if test.df == 1 else f"{df_text(test.df, sign)} degrees"
    return f"{name}, {degrees} of freedom, {condition}"


def _window(law: NullLaw, observed: float) -> tuple[float, float, int]:
    """Return both ends of the axis, and −1, 0 or 1 where the statistic is too far out to be drawn in its place."""
    low, high = law.window()
    half = (high - low) / 2
    if abs(observed - law.centre) > FAR * half:
        return low, high, 1 if observed > law.centre else -1
    room = BEYOND_OBSERVED * (max(high, observed) - min(low, observed))
    return min(low, observed - room), max(high, observed + room), 0


def _peak(law: NullLaw) -> float:
    if law.bars:
        return max(bar.height for bar in law.bars)
    return float(law.density(np.array([law.centre]))[0])


def _values(law: NullLaw, low: float, high: float) -> np.ndarray:
    """Return where the curve is computed: evenly over the axis, and closely around its middle."""
    near = law.centre + law.spread * np.linspace(-4, 4, 81)
    values = np.concatenate((np.linspace(low, high, CURVE_POINTS), near))
    return np.unique(values[(values >= low) & (values <= high)])


def _curve(law: NullLaw, frame: _Frame, obstacles: Obstacles) -> Drawing:
    scale = frame.scale
    values = _values(law, scale.low, scale.high)
    curve = tuple(frame.point(float(x), float(y)) for x, y in zip(values, law.density(values), strict=True))
    obstacles.boxes += [
        Box(x1, min(y1, y2), x2, frame.base) for (x1, y1), (x2, y2) in pairwise(curve) if min(y1, y2) < frame.base - 1
    ]
    fills = []
    for region in law.regions:
        start, end = max(region.low, scale.low), min(region.high, scale.high)
        inside = values[(values > start) & (values < end)]
        xs = np.concatenate(([start], inside, [end]))
        top = [frame.point(float(x), float(y)) for x, y in zip(xs, law.density(xs), strict=True)]
        fills.append(Fill(((top[0][0], frame.base), *top, (top[-1][0], frame.base))))
    tops = [float(law.density(np.array([region.bound]))[0]) for region in law.regions]
    bounds = tuple(
        line(*frame.point(region.bound, 0.0), *frame.point(region.bound, top))
        for region, top in zip(law.regions, tops, strict=True)
    )
    return Drawing(frame.width, frame.base, (Stroke(curve, width=1.8), *bounds), tuple(fills))


def _bars(law: NullLaw, frame: _Frame, obstacles: Obstacles) -> Drawing:
    strokes, fills = [], []
    for bar in law.bars:
        if bar.high <= frame.scale.low or bar.low >= frame.scale.high:
            continue
        gap = (bar.high - bar.low) * (1 - BAR_SHARE) / 2
        (left, top), (right, _) = frame.point(bar.low + gap, bar.height), frame.point(bar.high - gap, 0.0)
        left, right = max(left, SIDE), min(right, frame.width - SIDE)
        outline = ((left, frame.base), (left, top), (right, top), (right, frame.base))
        strokes.append(Stroke(outline, width=1.0))
        obstacles.boxes.append(Box(left, top, right, frame.base))
        if bar.rejects:
            fills.append(Fill(outline))
    return Drawing(frame.width, frame.base, tuple(strokes), tuple(fills))


def _observed(test: Test, observed: float, far: int, frame: _Frame, obstacles: Obstacles, sign: str) -> Drawing:
    text = statistic_text(test, sign)
    middle = STRIP / 2
    if far:
        edge = frame.width - SIDE if far > 0 else SIDE
        inner = edge - far * 30
        words = Words(inner - far * 6, middle, f"{text}, beyond this axis", "right" if far > 0 else "left", bold=True)
        arrow = line(inner, middle, edge - far * 6, middle, "dash", 1.8)
        obstacles.boxes += [words.box, Box(min(inner, edge), 0, max(inner, edge), STRIP)]
        head = Mark(edge - far * 4, middle, "right" if far > 0 else "left", 9, text)
        return Drawing(frame.width, frame.base, (arrow,), (), (head,), (words,))
    x = frame.scale.px(observed)
    upright = line(x, STRIP - 1, x, frame.base, "dash", 1.8)
    obstacles.paths.append(upright.points)
    words = kept_inside(Words(x, middle, text, bold=True), frame.width)
    obstacles.boxes.append(words.box)
    return Drawing(frame.width, frame.base, (upright,), words=(words,))


def _region_words(test: Test, law: NullLaw, frame: _Frame, obstacles: Obstacles, sign: str) -> tuple[Words, ...]:
    heights = [frame.base - 14 - 6 * step for step in range(int((frame.base - STRIP - 18) / 6))]
    if not law.regions:
        text = f"no outcome can reject at {level_text(test.significance, sign)}"
        found = obstacles.place(around(text, [0.0, frame.width], heights[::-1]))
        return (found,) if found else ()
    placed = []
    for region in law.regions:
        candidates = _beside(area_words(test, law, region, sign), region, frame, obstacles, heights)
        found = obstacles.place(candidates)
        if found is not None:
            placed.append(found)
    return tuple(placed)


def _beside(text: str, region: Region, frame: _Frame, obstacles: Obstacles, heights: list[float]) -> Iterator[Words]:
    """Return places for the words of a region: outside its bound first, then nearer to the middle."""
    bound = min(max(frame.scale.px(region.bound), 0.0), frame.width)
    outwards: Align = "left" if region.upper else "right"
    inwards: Align = "right" if region.upper else "left"
    edge = frame.width if region.upper else 0.0
    step = 1.0 if region.upper else -1.0
    for y in heights:
        yield Words(bound + 4 * step, y, text, outwards)
        yield Words((bound + edge) / 2, y, text)
        yield Words(edge, y, text, inwards)
    uprights = [path[0][0] for path in obstacles.paths if path[0][0] == path[-1][0]]
    for y in heights:
        for x in uprights:
            yield Words(x + 5, y, text, "left")
            yield Words(x - 5, y, text, "right")
        yield Words(bound, y, text)
        for part in range(1, 6):
            yield Words(bound - 20 * part * step, y, text, outwards)
    middle = frame.width / 2
    for y in (*heights, STRIP / 2):
        for part in range(41):
            yield Words(edge + (middle - edge) * part / 40, y, text, inwards)
            yield Words(edge + (middle - edge) * part / 40, y, text, outwards)
