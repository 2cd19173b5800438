"""How many decimal places a result is shown with: those of the expanded uncertainty of the reported difference."""

from decimal import Decimal
from math import isfinite

from meanlab.core.results import Analysis, Interval
from meanlab.wording.numbers import places_apart, places_for

MOST_SIGNIFICANT = 15
WITHOUT_UNCERTAINTY = 6
COUNTING = ("signed_rank", "sign")


def estimate_of(analysis: Analysis) -> float | None:
    """Return the value the sentence reports: the test's estimate, without a test the mean."""
    if analysis.test is not None:
        return analysis.test.estimate
    return analysis.summary.mean


def half_width(analysis: Analysis) -> float | None:
    """Return the uncertainty that sets the digits, None where there is none above 0.

    The expanded uncertainty of the difference; for counting procedures half the width of the interval (one-sided: the
    distance of its end from the estimate).
    """
    test, budget = analysis.test, analysis.uncertainty
    if test is None or test.procedure not in COUNTING:
        if budget is not None and _usable(budget.expanded):
            return budget.expanded
        if test is None:
            return None
    width = _half(test.interval, test.estimate)
    return width if width is not None and _usable(width) else None


def places_of(analysis: Analysis) -> int:
    """Return the decimal places of the estimate, the difference and the interval of an analysis.

    Two significant digits of the uncertainty; without one, the places of the readings. Where the test rejects, the
    shown estimate stays on its side of the target.
    """
    estimate, width = estimate_of(analysis), half_width(analysis)
    size = _size(analysis, estimate)
    if width is not None:
        places = min(places_for(width), finest_places_for(size))
    else:
        places = _places_of_readings(analysis, size)
    if analysis.test is not None and analysis.test.reject:
        places = places_apart(estimate, analysis.question.exact_target, places)
    return places


def percent_places(percent: float, analysis: Analysis) -> int:
    """Return the decimal places of the relative difference, by the same uncertainty in % of the target."""
    width, target = half_width(analysis), abs(float(analysis.question.exact_target))
    relative = 100 * (width / target) if width is not None and target else 0.0
    if _usable(relative):
        return min(places_for(relative), finest_places_for(percent))
    return places_for(abs(percent)) if percent else 0


def interval_places(interval: Interval, marks: tuple[Decimal, ...], places: int) -> int:
    """Return the places, more than asked where rounding would move an end onto or across one of the marks."""
    for end in (interval.low, interval.high):
        for mark in marks:
            places = places_apart(end, mark, places)
    return places


def finest_places_for(value: float) -> int:
    """Return the places beyond which a double of this size has no digits to show.

    >>> finest_places_for(5.02), finest_places_for(1e300)
    (14, -286)
    """
    if value == 0 or not isfinite(value):
        return 320
    return MOST_SIGNIFICANT - 1 - Decimal(float(value)).adjusted()


def _places_of_readings(analysis: Analysis, size: float) -> int:
    summary = analysis.summary
    if summary.decimals is None or summary.n_readings > summary.n:
        return places_for(size, WITHOUT_UNCERTAINTY) if size else 0
    return summary.decimals


def _size(analysis: Analysis, estimate: float | None) -> float:
    known = [estimate, float(analysis.question.exact_target)]
    if analysis.test is not None:
        known += [analysis.test.interval.low, analysis.test.interval.high]
    return max((abs(value) for value in known if value is not None and isfinite(value)), default=0.0)


def _half(interval: Interval, estimate: float | None) -> float | None:
    if interval.low is not None and interval.high is not None:
        return interval.high / 2 - interval.low / 2
    end = interval.low if interval.low is not None else interval.high
    return None if end is None or estimate is None else abs(estimate - end)


def _usable(width: float) -> bool:
    return isfinite(width) and width > 0
