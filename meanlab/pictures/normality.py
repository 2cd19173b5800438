"""The normal probability plot: each reading against where it would be expected in a normal sample, with a band."""

import numpy as np

from meanlab.checks.normality import FEWEST, ProbabilityPlot, probability_plot
from meanlab.core.results import Analysis
from meanlab.pictures.axis import Scale, below, upright, widest
from meanlab.pictures.drawing import Drawing, Fill, Mark, Stroke, Words, together
from meanlab.pictures.entries import MOST_DRAWN
from meanlab.wording.names import unit_of
from meanlab.wording.numbers import level_text, number_text, unit_text

WIDTH, HEIGHT = 500.0, 330.0
TOP, SIDE, ROOM_BELOW = 44.0, 10.0, 40.0


def normality_picture(analysis: Analysis, width: float = WIDTH, height: float = HEIGHT) -> Drawing | None:
    """Return the normal probability plot of the independent units; None below 3 units or without scatter.

    The band is pointwise: each ordered unit of a normal sample with this mean and s lies in it with 95 %.
    """
    values = units_of(analysis)
    if len(values) < FEWEST or min(values) == max(values):
        return None
    origin = values[0]
    plot = probability_plot(np.array([value - origin for value in values]))
    chosen = _chosen(len(values))
    sign, unit = analysis.readings.decimal_sign, unit_of(analysis)
    base = height - ROOM_BELOW
    low = min(plot.low[0], plot.readings[0]) + origin
    high = max(plot.high[-1], plot.readings[-1]) + origin
    room = 0.04 * (high - low)
    deviations = Scale(float(plot.quantiles[0]) - 0.35, float(plot.quantiles[-1]) + 0.35, base, TOP)
    left = widest(deviations, sign) + 4
    scale = Scale(low - room, high + room, left, width - SIDE)
    title = "place expected in a normal sample, in standard deviations"
    axis = below(scale, base, f"{unit}: ordered readings" if unit else "ordered readings", sign, width=width)
    parts = (_band(plot, scale, deviations, origin, chosen), axis, upright(deviations, left, title, sign, width - SIDE))
    points = _points(plot, scale, deviations, origin, chosen, sign, unit)
    return together(width, height, (*parts, points, _key(plot, width, sign)), _alt(plot))


def units_of(analysis: Analysis) -> tuple[float, ...]:
    """Return the values of the independent units; empty where any is known only to lie below or above a limit."""
    kept = analysis.readings.kept()
    if kept.censored:
        return ()
    if analysis.readings.preparations is not None:
        return tuple(one.mean for one in analysis.summary.preparations if one.mean is not None)
    return tuple(float(value) for value in kept.values)


def outside(plot: ProbabilityPlot) -> int:
    """Return how many points lie outside the band."""
    return int(np.sum((plot.readings < plot.low) | (plot.readings > plot.high)))


def _chosen(n: int) -> list[int]:
    """Return which ordered points are drawn: all, or the outer ones and evenly many between them."""
    if n <= MOST_DRAWN:
        return list(range(n))
    outer = 20
    inner = np.linspace(outer, n - 1 - outer, MOST_DRAWN - 2 * outer).round().astype(int)
    return sorted({*range(outer), *map(int, inner), *range(n - outer, n)})


def _band(plot: ProbabilityPlot, x: Scale, y: Scale, origin: float, chosen: list[int]) -> Drawing:
    low = tuple((x.px(float(plot.low[i]) + origin), y.px(float(plot.quantiles[i]))) for i in chosen)
    high = tuple((x.px(float(plot.high[i]) + origin), y.px(float(plot.quantiles[i]))) for i in chosen)
    ends = (chosen[0], chosen[-1])
    line = tuple((x.px(float(plot.line[i]) + origin), y.px(float(plot.quantiles[i]))) for i in ends)
    band = Fill((*low, *reversed(high)), hatched=False)
    edges = (Stroke(low, "dash", 1.0), Stroke(high, "dash", 1.0), Stroke(line, width=1.2))
    return Drawing(x.end, y.start, edges, (band,))


def _points(
    plot: ProbabilityPlot, x: Scale, y: Scale, origin: float, chosen: list[int], sign: str, unit: str
) -> Drawing:
    marks = tuple(
        Mark(x.px(float(plot.readings[i]) + origin), y.px(float(plot.quantiles[i])), "circle", 7,
             unit_text(number_text(float(f"{plot.readings[i] + origin:.12g}"), sign), unit))
        for i in chosen
    )  # fmt: skip
    return Drawing(x.end, y.start, marks=marks)


def _key(plot: ProbabilityPlot, width: float, sign: str) -> Drawing:
    band = f"grey: {level_text(plot.level, sign)} band for each point by itself"
    text = f"{band}; {outside(plot)} of {len(plot.line)} outside"
    return Drawing(width, TOP, words=(Words(0.0, 10.0, text, "left"),))


def _alt(plot: ProbabilityPlot) -> str:
    return (
        f"Normal probability plot of {len(plot.line)} units with a pointwise {level_text(plot.level)} band: "
        f"{outside(plot)} outside it."
    )
