"""The sign test: how many units lie above the target, against a fair coin; with below- and above-limit units too."""

from dataclasses import dataclass
from math import inf
from typing import Any

import numpy as np

from meanlab.core.results import Interval, Test
from meanlab.procedures.decision import p_value, rejecting_sides, tail
from meanlab.procedures.distributions import fair_critical, fair_lower
from meanlab.procedures.sample import Spans


@dataclass(frozen=True)
class Counts:
    """Units surely below, surely above, exactly at the target, and undecided ones."""

    below: int
    above: int
    tied: int
    undecided: int

    def worst(self, alternative: str, with_ties: bool = False) -> tuple[int, int]:
        """Return (below, above) with the largest p over all places of the undecided units (and of those tied).

        One-sided: all of them on the side that speaks against the alternative; two-sided: as even as they can be made.
        To leave one out never gives the largest p, nor the smallest.
        """
        free = self.undecided + (self.tied if with_ties else 0)
        even = min(max((self.below + free - self.above) // 2, 0), free)
        moved = {"greater": 0, "less": free}.get(alternative, even)
        return self.below + free - moved, self.above + moved

    def best(self, alternative: str) -> tuple[int, int]:
        """Return (below, above) with the smallest p over all places of the undecided units."""
        up = alternative == "greater" or (alternative == "two-sided" and self.above >= self.below)
        moved = self.undecided if up else 0
        return self.below + self.undecided - moved, self.above + moved


def count_sides(units: Spans) -> Counts:
    """Count the units below, above and at the target.

    "<L" is below when L ≤ target, ">U" above when U ≥ target; other censored units are undecided.
    """
    if units.plain:
        lower, higher = (int(np.count_nonzero(side)) for side in (units.lows < units.target, units.lows > units.target))
        return Counts(lower, higher, units.n - lower - higher, 0)
    known = units.lows == units.highs
    below = np.where(known, units.lows < units.target, units.highs <= units.target).astype(bool)
    above = np.where(known, units.lows > units.target, units.lows >= units.target).astype(bool)
    tied = int(np.sum(known & (units.lows == units.target)))
    lower, higher = int(below.sum()), int(above.sum())
    return Counts(lower, higher, tied, units.n - lower - higher - tied)


def tails(below: int, above: int) -> tuple[float, float]:
    """Return exact P(B ≥ above) and P(B ≤ above) for B binomial(below + above, ½).

    >>> tails(1, 9)
    (0.0107421875, 0.9990234375)
    """
    n = below + above
    return fair_lower(below, n), fair_lower(above, n)


def sign_test(units: Spans, alternative: str, alpha: float) -> Test:
    """Return the sign test of the median, exact binomial, units equal to the target left out.

    Undecided units are tried on every side: rejected only if the largest p < α; not rejected only if the smallest
    p ≥ α; else ``decided`` is False. p is the largest. A rejection that some way of counting the units equal to the
    target would undo is not ``decided`` either.
    Source: Dixon & Mood 1946; the interval is [x(c), x(n+1−c)], Conover 1999, over all units.
    """
    counts = count_sides(units)
    chosen = counts.worst(alternative)
    smallest, largest = _p(alternative, *counts.best(alternative)), _p(alternative, *chosen)
    reject = largest < alpha
    against = _p(alternative, *counts.worst(alternative, with_ties=True)) if counts.tied else None
    rests_on_ties = reject and against is not None and against >= alpha
    n_used = sum(chosen)
    extreme = (n_used, 0) if alternative == "less" else (0, n_used)
    p_greater, p_less = tails(*chosen)
    middle = middle_units(units)
    low, high, attained = interval_ends(units, alternative, alpha)
    return Test(
        procedure="sign",
        parameter="median",
        alternative=alternative,
        significance=alpha,
        n=units.n,
        n_used=n_used,
        statistic=float(chosen[1]),
        df=None,
        p_value=largest,
        p_greater=p_greater,
        p_less=p_less,
        critical=critical_counts(n_used, alternative, alpha),
        reject=reject,
        estimate=units.value(*middle),
        standard_error=None,
        interval=Interval(units.value(low), units.value(high), 1 - alpha, attained),
        offsets=(
            units.value(*middle, origin=units.target),
            units.value(low, origin=units.target),
            units.value(high, origin=units.target),
        ),
        smallest_p=_p(alternative, *extreme),
        p_range=(smallest, largest) if counts.undecided else None,
        p_ties_against=against,
        decided=(reject or smallest >= alpha) and not rests_on_ties,
        notes=_remark(counts.tied, rests_on_ties),
    )


def _remark(tied: int, rests_on_ties: bool) -> tuple[str, ...]:
    if not tied:
        return ()
    equal = "1 reading" if tied == 1 else f"{tied} readings"
    if rests_on_ties:
        return (f"The rejection rests on leaving out {equal} equal to the target.",)
    return (f"{equal} equal to the target left out of the count.",)


def _p(alternative: str, below: int, above: int) -> float:
    return float(p_value(alternative, *tails(below, above)))


def critical_counts(n: int, alternative: str, alpha: float) -> tuple[float | None, float | None]:
    """Return the largest lower and smallest upper count above that reject; None where there is none."""
    j = fair_critical(tail(alternative, alpha), n)
    below, above = rejecting_sides(alternative)
    return (float(j) if below and j >= 0 else None), (float(n - j) if above and j >= 0 else None)


def middle_units(units: Spans) -> tuple[Any, Any]:
    """Return the one or two middle units; (infinity, infinity) where the median falls on a censored one."""
    lows, highs = units.rising
    first, second = (units.n - 1) // 2, units.n // 2
    if lows[first] != highs[first] or lows[second] != highs[second]:
        return inf, inf
    return lows[first], lows[second]


def interval_ends(units: Spans, alternative: str, alpha: float) -> tuple[Any, Any, float]:
    """Return the ends x(c) and x(n+1−c) of the median's interval, infinite where there is none, and its exact level.

    c − 1 is the largest j with P(B ≤ j) < α/2 (one-sided: α); over censored units the ends are those of the hull.
    """
    j = fair_critical(tail(alternative, alpha), units.n)
    if j < 0:
        return -inf, inf, 1.0
    lows, highs = units.rising
    low, high = lows[j], highs[units.n - 1 - j]
    outside = fair_lower(j, units.n) * (2 if alternative == "two-sided" else 1)
    return (-inf if alternative == "less" else low), (inf if alternative == "greater" else high), 1 - outside
