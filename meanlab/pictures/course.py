"""The course of a plan: power or half-width of the interval against the number of readings, the chosen one marked."""

from dataclasses import dataclass
from math import log10

from meanlab.core.results import Plan
from meanlab.pictures.axis import Scale, below, upright, widest
from meanlab.pictures.drawing import Drawing, Mark, Stroke, Words, line, together
from meanlab.pictures.places import kept_inside
from meanlab.wording.numbers import level_text, significant, unit_text

WIDTH, HEIGHT = 560.0, 250.0
TOP, SIDE, ROOM_BELOW = 46.0, 14.0, 40.0
CHOSEN, TITLE = 10.0, 30.0
INTERVAL_KIND = "an interval of ± half-width"
MOST_EVEN = 100


@dataclass(frozen=True)
class _Sheet:
    """What one course stands on: both scales, and whether counts have equal steps for equal ratios."""

    counts: Scale
    heights: Scale
    ratio: bool
    width: float
    sign: str

    def across(self, readings: float) -> float:
        return self.counts.px(log10(readings) if self.ratio else readings)


def course_picture(
    plan: Plan, kind: str, unit: str, sign: str, width: float = WIDTH, height: float = HEIGHT
) -> Drawing | None:
    """Return the course of power (in %) or half-width (in the unit) against the number of readings; None without one.

    ``kind`` is the kind of plan as the page names it. Beyond 100 readings the axis has equal steps for equal ratios.
    """
    if len(plan.curve) < 2:
        return None
    interval = kind == INTERVAL_KIND
    base = height - ROOM_BELOW
    heights = Scale(0.0, max(value for _, value in plan.curve) if interval else 105.0, base, TOP)
    left = widest(heights, sign) + 4
    ends = plan.curve[0][0], plan.curve[-1][0]
    ratio = ends[1] > MOST_EVEN
    low, high = (log10(ends[0]), log10(ends[1])) if ratio else ends
    sheet = _Sheet(Scale(low, high, left, width - SIDE), heights, ratio, width, sign)
    factor = 1.0 if interval else 100.0
    curve = tuple((sheet.across(n), heights.px(factor * value)) for n, value in plan.curve)
    title = f"half-width of the interval{', ' + unit if unit else ''}" if interval else "probability to show it, %"
    axis = _ratio_axis(sheet, base) if ratio else below(sheet.counts, base, "readings", sign, width=width)
    drawn = Drawing(width, height, (Stroke(curve, width=1.8),))
    parts = (upright(heights, left, title, sign, width - SIDE, TITLE), axis, drawn)
    return together(width, height, (*parts, _chosen(plan, interval, unit, sheet)), _alt(plan, interval))


def _chosen(plan: Plan, interval: bool, unit: str, sheet: _Sheet) -> Drawing:
    """Return the number of readings that will do: a dashed line to its point, named above."""
    base, width, sign = sheet.heights.start, sheet.width, sheet.sign
    if plan.readings is None or plan.achieved is None:
        return Drawing(width, base)
    if interval:
        reached, value = f"± {unit_text(significant(plan.achieved, 3, sign), unit)}", plan.achieved
    else:
        reached, value = level_text(round(plan.achieved, 3), sign), 100 * plan.achieved
    x, y, text = sheet.across(plan.readings), sheet.heights.px(value), f"{plan.readings} readings: {reached}"
    words = kept_inside(Words(x, TOP - CHOSEN, text, bold=True), width)
    upright_line = line(x, TOP - 2, x, base, "dash")
    return Drawing(width, base, (upright_line,), marks=(Mark(x, y, "dot", 8, text),), words=(words,))


def _ratio_axis(sheet: _Sheet, base: float) -> Drawing:
    """Return an axis of counts with equal steps for equal ratios: 2, 5, 10, 20, 50, …"""
    scale = sheet.counts
    counts = [times * 10**power for power in range(5) for times in (1, 2, 5)]
    strokes = [line(scale.start, base, scale.end, base, width=1.0)]
    words = [Words((scale.start + scale.end) / 2, base + 30, "readings (equal steps for equal ratios)")]
    for n in counts:
        if scale.holds(log10(n)):
            x = sheet.across(n)
            strokes.append(line(x, base, x, base + 4, width=1.0))
            words.append(kept_inside(Words(x, base + 13, str(n)), sheet.width))
    return Drawing(sheet.width, base + 38, tuple(strokes), words=tuple(words))


def _alt(plan: Plan, interval: bool) -> str:
    what = "Half-width of the interval" if interval else "Probability to show it"
    chosen = f"; {plan.readings} readings will do" if plan.readings is not None else ""
    return f"{what} against the number of readings{chosen}."
