"""Curves of planning: power or half-width against the number of readings, and the risk to miss a true difference."""

from math import log10

import numpy as np

from meanlab.core.results import Analysis, Plan
from meanlab.pictures.axis import Scale, below, upright, widest
from meanlab.pictures.drawing import Drawing, Mark, Stroke, Words, line, together
from meanlab.pictures.places import kept_inside
from meanlab.planning import operating_characteristic
from meanlab.wording.names import short_noun, unit_of
from meanlab.wording.numbers import level_text, significant, unit_text

WIDTH, HEIGHT = 560.0, 250.0
TOP, SIDE, ROOM_BELOW = 46.0, 14.0, 40.0
INTERVAL_KIND = "an interval of ± half-width"
MOST_EVEN = 100


def course_picture(plan: Plan, kind: str, unit: str, sign: str, width: float = WIDTH, height: float = HEIGHT) -> Drawing:
    """Return the course of power (in %) or half-width (in the unit) with the number of readings, the chosen one marked.

    ``kind`` is the kind of plan as the page names it. Beyond 100 readings the axis has equal steps for equal ratios.
    """
    interval = kind == INTERVAL_KIND
    points = [(n, value if interval else 100 * value) for n, value in plan.curve]
    values = [value for _, value in points]
    base = height - ROOM_BELOW
    top = max(values) if interval else 100.0
    heights = Scale(0.0, 1.05 * top, base, TOP)
    left = widest(heights, sign) + 4
    ratio = points[-1][0] > MOST_EVEN
    places = np.log10([n for n, _ in points]) if ratio else np.array([n for n, _ in points])
    scale = Scale(float(places[0]), float(places[-1]), left, width - SIDE)
    curve = tuple((scale.px(float(x)), heights.px(y)) for x, (_, y) in zip(places, points, strict=True))
    title = f"half-width of the interval{', ' + unit if unit else ''}" if interval else "probability to show it, %"
    axis = _ratio_axis(scale, base, sign, width) if ratio else below(scale, base, "readings", sign, width=width)
    chosen = _chosen(plan, interval, unit, scale, heights, ratio, sign, width)
    parts = (upright(heights, left, title, sign, width - SIDE), axis, Drawing(width, height, (Stroke(curve, width=1.8),)))
    return together(width, height, (*parts, chosen), _alt(plan, interval))


def operating_characteristic_picture(
    analysis: Analysis, width: float = WIDTH, height: float = HEIGHT
) -> Drawing | None:
    """Return the risk to miss a true difference (in %) against that difference; None where nothing was tested."""
    test, s = analysis.test, analysis.power.planning_s
    if test is None or not s:
        return None
    differences, missed = operating_characteristic(test.n, s, analysis.question, test.procedure)
    sign, unit, noun = analysis.readings.decimal_sign, unit_of(analysis), short_noun(analysis.question.target_kind)
    base = height - ROOM_BELOW
    heights = Scale(0.0, 100.0, base, TOP)
    left = widest(heights, sign) + 4
    scale = Scale(float(differences[0]), float(differences[-1]), left, width - SIDE)
    curve = tuple((scale.px(float(d)), heights.px(100 * float(m))) for d, m in zip(differences, missed, strict=True))
    title = f"true difference from the {noun}" + (f", {unit}" if unit else "")
    matters = analysis.power.difference_that_matters
    marked = [] if matters is None else [side * matters for side in (-1, 1) if scale.holds(side * matters)]
    parts = (
        upright(heights, left, f"risk to miss it with {test.n} readings, %", sign, width - SIDE),
        below(scale, base, title, sign, width=width),
        Drawing(width, height, (Stroke(curve, width=1.8), *(line(scale.px(d), TOP, scale.px(d), base, "dash") for d in marked)),
                words=_matters(marked, scale, width)),
    )  # fmt: skip
    return together(width, height, parts, f"Operating characteristic: risk to miss a true difference with n = {test.n}.")


def _matters(marked: list[float], scale: Scale, width: float) -> tuple[Words, ...]:
    if not marked:
        return ()
    x = scale.px(marked[-1])
    return (kept_inside(Words(x, TOP - 28, "difference that matters"), width),)


def _chosen(
    plan: Plan, interval: bool, unit: str, x: Scale, y: Scale, ratio: bool, sign: str, width: float
) -> Drawing:
    """Return the number of readings that will do: a dashed line to its point, named above."""
    if plan.readings is None or plan.achieved is None:
        return Drawing(width, y.start)
    value = plan.achieved if interval else 100 * plan.achieved
    at, up = x.px(log10(plan.readings) if ratio else float(plan.readings)), y.px(value)
    reached = f"± {unit_text(significant(value, 3, sign), unit)}" if interval else level_text(round(plan.achieved, 3), sign)
    text = f"{plan.readings} readings: {reached}"
    words = kept_inside(Words(at, TOP - 10, text, bold=True), width)
    strokes = (line(at, TOP - 2, at, y.start, "dash", 1.4),)
    return Drawing(width, y.start, strokes, marks=(Mark(at, up, "dot", 8, text),), words=(words,))


def _ratio_axis(scale: Scale, base: float, sign: str, width: float) -> Drawing:
    """Return an axis of counts with equal steps for equal ratios: 2, 5, 10, 20, 50, …"""
    counts = [times * 10**power for power in range(5) for times in (1, 2, 5)]
    shown = [n for n in counts if scale.holds(log10(n))]
    strokes = [line(scale.start, base, scale.end, base, width=1.0)]
    words = [Words((scale.start + scale.end) / 2, base + 30, "readings (equal steps for equal ratios)")]
    for n in shown:
        x = scale.px(log10(n))
        strokes.append(line(x, base, x, base + 4, width=1.0))
        words.append(kept_inside(Words(x, base + 13, str(n)), width))
    return Drawing(width, base + 38, tuple(strokes), words=tuple(words))


def _alt(plan: Plan, interval: bool) -> str:
    what = "Half-width of the interval" if interval else "Probability to show it"
    chosen = f"; {plan.readings} readings will do" if plan.readings is not None else ""
    return f"{what} against the number of readings{chosen}."
