"""The probability to find a true difference, procedure by procedure, by the distributions of the tests themselves."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from math import ceil, floor, hypot, inf, isfinite, pi, sqrt
from typing import Any

import numpy as np
from scipy import special
from scipy.optimize import brentq

from meanlab.planning.scatter import ratio_panels, shifted_t_upper
from meanlab.procedures.decision import tail
from meanlab.procedures.distributions import fair_critical, normal_critical, normal_upper, t_critical
from meanlab.procedures.mean_tests import NONE_FURTHER, Further

MOST_READINGS = 10_000
RANK_EFFICIENCY = 3 / pi
COUNTING = ("signed_rank", "sign")
KINDS = {"signed_rank": "approximate", "guarded_t": "upper bound"}


@dataclass(frozen=True)
class Design:
    """A question in planning: everything but n and the true difference.

    s            standard deviation of one unit, in the unit of the difference
    alternative  "two-sided", "greater" or "less"
    procedure    "z", "t", "guarded_t" (planned as t), "signed_rank" or "sign"
    sigma_df     degrees of freedom of a known σ (infinite: exactly known)
    further      uncertainty of the target and the laboratory's own; only z and t take them in
    """

    s: float
    alternative: str = "two-sided"
    significance: float = 0.05
    procedure: str = "t"
    sigma_df: float = inf
    further: Further = NONE_FURTHER

    @property
    def tail(self) -> float:
        """Probability of each rejecting tail."""
        return tail(self.alternative, self.significance)

    @property
    def fewest(self) -> int:
        """The smallest n the procedure can be run with."""
        return {"t": 2, "guarded_t": 3}.get(self.procedure, 1)

    @property
    def u(self) -> float:
        """Combined standard uncertainty beside the scatter, 0 for procedures that cannot take it in."""
        return 0.0 if self.procedure in COUNTING else self.further.u

    def df(self, n: int) -> float:
        """Return the degrees of freedom of the scatter with n units."""
        return self.sigma_df if self.procedure == "z" else n - 1.0

    def kind(self) -> str:
        """Return "exact", "approximate" or "upper bound"."""
        return KINDS.get(self.procedure, "exact")

    def with_s(self, s: float) -> "Design":
        """Return the same design with another standard deviation."""
        return replace(self, s=s)


def detection_power(n: int, difference: float, design: Design) -> float:
    """Return the probability that the procedure rejects with n units at this true difference (true − target)."""
    return power_at(n, design)(difference)


def power_at(n: int, design: Design) -> Callable[[float], float]:
    """Return the power with n units as a function of the true difference; 0 where the procedure cannot be run."""
    if n < design.fewest:
        return lambda difference: 0.0
    if design.procedure == "sign":
        return _sign_power(n, design)
    if design.procedure == "signed_rank":
        sides = 2 if design.alternative == "two-sided" else 1
        if n < 2 or sides * 0.5**n >= design.significance:
            return lambda difference: 0.0
        return _t_power(n, design, RANK_EFFICIENCY)
    if design.u == 0:
        return _t_power(n, design, 1.0)
    return _combined_power(n, design)


def _by_side(alternative: str, upper: Callable[[float, bool], float]) -> Callable[[float], float]:
    """Return the power from that of the upper tail; ``upper(difference, True)`` is the tail that counts most."""
    if alternative == "greater":
        return lambda difference: upper(difference, True)
    if alternative == "less":
        return lambda difference: upper(-difference, True)
    return lambda difference: min(1.0, upper(abs(difference), True) + upper(-abs(difference), False))


def _t_power(n: int, design: Design, efficiency: float) -> Callable[[float], float]:
    """Non-central t (Owen 1965), shift δ√n/s; with exactly known σ the normal distribution."""
    df = design.df(n)
    critical = float(t_critical(design.tail, df))
    per_unit = sqrt(n * efficiency) / design.s

    def upper(difference: float, main: bool) -> float:
        return shifted_t_upper(critical, df, difference * per_unit, main)

    return _by_side(design.alternative, upper)


def _combined_power(n: int, design: Design) -> Callable[[float], float]:
    """∫ over s of P(N(δ, σ²/n + u²) > t(ν(s))·√(s²/n + u²)), ν(s) by Welch–Satterthwaite as in the test."""
    scatter, df = design.s / sqrt(n), design.df(n)
    total = hypot(scatter, design.u)
    if not isfinite(df) and not isfinite(design.further.target_df):
        critical = float(normal_critical(design.tail))
        return _by_side(design.alternative, lambda difference, main: float(normal_upper(critical - difference / total)))
    if not isfinite(df):
        r, weights = np.ones(1), np.ones(1)
    else:
        steepest = float(t_critical(design.tail, df)) * scatter / total
        r, weights = ratio_panels(df, steps=steepest)
    bounds = critical_distance(r, scatter, df, design.further, design.tail) / total
    return _by_side(
        design.alternative, lambda difference, main: float(weights @ normal_upper(bounds - difference / total))
    )


def critical_distance(r: Any, scatter: float, df: float, further: Further, each_tail: float) -> Any:
    """Return t(ν)·√((r·scatter)² + u²), the distance from the target that rejects, for every ratio r = s/σ."""
    largest = max(scatter, further.u)
    seen, target, own = (r * scatter / largest) ** 2, (further.target_u / largest) ** 2, (further.own_u / largest) ** 2
    total = seen + target + own
    spread = seen**2 / df + target**2 / further.target_df
    with np.errstate(divide="ignore"):
        effective = np.where(spread > 0, total**2 / np.where(spread > 0, spread, 1.0), inf)
    return t_critical(each_tail, effective) * np.sqrt(total) * largest


def _sign_power(n: int, design: Design) -> Callable[[float], float]:
    """Exact binomial with P(x > μ₀) = Φ(δ/σ)."""
    most = fair_critical(design.tail, n)
    if most < 0:
        return lambda difference: 0.0

    def upper(difference: float, main: bool) -> float:
        return float(special.bdtr(most, n, float(normal_upper(difference / design.s))))

    return _by_side(design.alternative, upper)


def direction(alternative: str) -> float:
    """Return −1 for "less", else +1: the sign of a difference to the side that is asked."""
    return -1.0 if alternative == "less" else 1.0


def smallest_detectable(n: int, power: float, design: Design) -> float | None:
    """Return the smallest true difference (a magnitude) found with this power; None where none of any size is."""
    found, side = power_at(n, design), direction(design.alternative)
    start = found(0.0)
    if start >= power:
        return 0.0
    scale = hypot(design.s / sqrt(n), design.u) if n else design.s
    df = design.df(n) if n > 1 or design.procedure == "z" else inf
    high = scale * float(t_critical(design.tail, df) + 1 + normal_critical(1 - power))
    for _ in range(60):
        if found(side * high) >= power:
            break
        high *= 2
    else:
        return None
    root = brentq(lambda size: found(side * size * scale) - power, 0.0, high / scale, xtol=1e-13, rtol=1e-12)
    return float(root) * scale


def out_of_reach(power: float, design: Design) -> float:
    """Return the smallest true difference that any number of units could show with this power: 0 without u."""
    if design.u == 0:
        return 0.0
    certain = replace(design, procedure="z", s=design.u, sigma_df=design.further.target_df, further=NONE_FURTHER)
    return smallest_detectable(1, power, certain) or 0.0


def readings_needed(difference: float, power: float, design: Design, most: int = MOST_READINGS) -> int | None:
    """Return the smallest n ≥ 2 that finds a true difference with this power; None where none up to ``most`` does."""
    if difference == 0 or difference * direction(design.alternative) < 0 < (design.alternative != "two-sided"):
        return None
    size = direction(design.alternative) * abs(difference)
    if abs(difference) <= out_of_reach(power, design):
        return None

    def enough(n: int) -> bool:
        return detection_power(n, size, design) >= power

    if design.procedure == "sign":
        return next((n for n in range(2, most + 1) if enough(n)), None)
    return first_enough(enough, _guess(size, power, design, most), most)


def _guess(difference: float, power: float, design: Design, most: int) -> int:
    """Return about how many units are needed, by the normal distribution."""
    needed = float(normal_critical(design.tail) + normal_critical(1 - power)) * design.s / abs(difference)
    squares = needed**2 if needed < 1e6 else 1e12
    return max(2, min(most, floor(squares)))


def first_enough(enough: Callable[[int], bool], guess: int, most: int) -> int | None:
    """Return the smallest n from 2 to ``most`` that is enough, where more is never less; None where none is."""
    low, high, step = 1, guess, 2
    if enough(high):
        while high > 2 and enough(max(2, high - step)):
            high, step = max(2, high - step), 2 * step
        low = max(1, high - step)
    else:
        while not enough(high):
            if high >= most:
                return None
            low, high, step = high, min(most, high + step), 2 * step
    while high - low > 1:
        middle = ceil((low + high) / 2)
        low, high = (low, middle) if enough(middle) else (middle, high)
        if low == 1 and high == 2:
            break
    return high
