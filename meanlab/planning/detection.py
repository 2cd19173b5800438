"""The probability to find a true difference, procedure by procedure, by the distributions of the tests themselves."""

from collections.abc import Callable
from dataclasses import dataclass, replace
from math import hypot, inf, isfinite, pi, sqrt
from typing import Any

import numpy as np
from scipy import special

from meanlab.planning.scatter import ratio_panels, shifted_t_upper
from meanlab.procedures.decision import tail
from meanlab.procedures.distributions import fair_critical, normal_critical, normal_upper, t_critical
from meanlab.procedures.mean_tests import NONE_FURTHER, Further

RANK_EFFICIENCY = 3 / pi
COUNTING = ("signed_rank", "sign")
TAKES_FURTHER = ("z", "t")
KINDS = {"signed_rank": "approximate", "guarded_t": "upper bound"}
FEWEST = {"t": 2, "guarded_t": 3}


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
    def u(self) -> float:
        """Combined standard uncertainty beside the scatter, 0 for procedures that cannot take it in."""
        return self.further.u if self.procedure in TAKES_FURTHER else 0.0

    @property
    def kind(self) -> str:
        """What the power is: "exact", "approximate" or "upper bound"."""
        return KINDS.get(self.procedure, "exact")

    @property
    def side(self) -> float:
        """−1 for "less", else +1: the sign of a true difference to the side that is asked."""
        return -1.0 if self.alternative == "less" else 1.0

    def df(self, n: int) -> float:
        """Return the degrees of freedom of the scatter with n units."""
        return self.sigma_df if self.procedure == "z" else n - 1.0

    def with_s(self, s: float) -> "Design":
        """Return the same design with another standard deviation."""
        return replace(self, s=s)


def detection_power(n: int, difference: float, design: Design) -> float:
    """Return the probability that the procedure rejects with n units at this true difference (true − target).

    >>> round(detection_power(10, 1.0, Design(1.0)), 4)
    0.8031
    """
    return power_at(n, design)(difference)


def power_at(n: int, design: Design) -> Callable[[float], float]:
    """Return the power with n units as a function of the true difference.

    z and t: the non-central t distribution (known σ: normal); with further uncertainty u the integral over s of
    P(|N(δ, σ²/n + u²)| > t(ν(s))·√(s²/n + u²)). Signed rank: as t with n·3/π readings, approximate. Sign: exact
    binomial with P(x > μ₀) = Φ(δ/σ). It is 0 where the procedure cannot be run or cannot reject.
    Source: Owen 1965; Hodges & Lehmann 1956 (3/π); JCGM 100:2008 G.4 for ν(s).
    """
    if n < FEWEST.get(design.procedure, 1):
        return _never
    if design.procedure == "sign":
        return _sign_power(n, design)
    if design.procedure == "signed_rank":
        sides = 2 if design.alternative == "two-sided" else 1
        return _t_power(n, design, RANK_EFFICIENCY) if sides * 0.5**n < design.significance else _never
    if design.u == 0:
        return _t_power(n, design, 1.0)
    return combined_power(design.s / sqrt(n), design.df(n), design)


def _never(difference: float) -> float:
    return 0.0


def _by_side(alternative: str, upper: Callable[[float, bool], float]) -> Callable[[float], float]:
    """Return the power from that of the upper tail; ``upper(difference, True)`` is the tail that counts most."""
    if alternative == "greater":
        return lambda difference: min(1.0, upper(difference, True))
    if alternative == "less":
        return lambda difference: min(1.0, upper(-difference, True))
    return lambda difference: min(1.0, upper(abs(difference), True) + upper(-abs(difference), False))


def _t_power(n: int, design: Design, efficiency: float) -> Callable[[float], float]:
    """Return the power by the non-central t with shift δ√n/s; with exactly known σ by the normal distribution."""
    df = design.df(n)
    critical = float(t_critical(design.tail, df))
    root = sqrt(n * efficiency)

    def upper(difference: float, main: bool) -> float:
        return shifted_t_upper(critical, df, difference / design.s * root, main)

    return _by_side(design.alternative, upper)


def combined_power(scatter: float, df: float, design: Design) -> Callable[[float], float]:
    """Return the power where u > 0 stands beside the scatter σ/√n of the mean; endless readings have scatter 0."""
    total = hypot(scatter, design.u)
    r, weights = np.ones(1), np.ones(1)
    if scatter > 0 and isfinite(df):
        steepest = float(t_critical(design.tail, df)) * scatter / total
        r, weights = ratio_panels(df, steps=steepest)
    bounds = critical_distance(r, scatter, df, design.further, design.tail) / total

    def upper(difference: float, main: bool) -> float:
        return float(weights @ normal_upper(bounds - difference / total))

    return _by_side(design.alternative, upper)


def critical_distance(r: Any, scatter: float, df: float, further: Further, each_tail: float) -> Any:
    """Return t(ν)·√((r·scatter)² + u²), the distance from the target that rejects, for every ratio r = s/σ."""
    if further.u == 0:
        return t_critical(each_tail, df) * np.asarray(r) * scatter
    largest = max(scatter, further.u)
    target, own = ((part / largest) ** 2 for part in (further.target_u, further.own_u))
    seen = (np.asarray(r) * scatter / largest) ** 2
    total = seen + target + own
    spread = seen**2 / df + target**2 / further.target_df
    with np.errstate(divide="ignore", over="ignore", invalid="ignore"):
        effective = np.where(spread > 0, total**2 / spread, inf)
        return t_critical(each_tail, effective) * np.sqrt(total) * largest


def _sign_power(n: int, design: Design) -> Callable[[float], float]:
    most = fair_critical(design.tail, n)
    if most < 0:
        return _never

    def upper(difference: float, main: bool) -> float:
        return float(special.bdtr(most, n, float(normal_upper(difference / design.s))))

    return _by_side(design.alternative, upper)


def largest_power(difference: float, design: Design) -> float:
    """Return the power that no number of readings exceeds: 1 without further uncertainty."""
    if design.u == 0:
        return 1.0
    return combined_power(0.0, inf, design)(difference)


def scale_of(n: int, design: Design) -> float:
    """Return the standard uncertainty of the difference with n units, the natural unit of a true difference."""
    return hypot(design.s / sqrt(n), design.u)


def usual_shift(power: float, design: Design) -> float:
    """Return how many standard uncertainties a true difference needs by the normal distribution."""
    return float(normal_critical(design.tail) + normal_critical(1 - power))
