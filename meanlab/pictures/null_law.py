"""What the statistic would do if the true value were the target: a curve or bars, and the regions that reject.

Curve and regions come from the distributions that give p and critical values, so that picture and test cannot disagree.
"""

from dataclasses import dataclass
from math import comb, inf, nextafter, sqrt

import numpy as np

from meanlab.core.results import Test
from meanlab.procedures.distributions import EXACT_COUNT, normal_upper, t_density, t_upper
from meanlab.procedures.signed_rank import null_distribution

MOST_BARS = 120
CURVE_POINTS = 201
HALF_LEAST = 3.6
BEYOND_CRITICAL = 1.35


@dataclass(frozen=True)
class Region:
    """Values of the statistic that reject, from ``low`` to ``high`` (infinite ends included), and their probability.

    ``bound`` is the critical value: the end that faces the other values.
    """

    low: float
    high: float
    area: float
    bound: float

    @property
    def upper(self) -> bool:
        """Whether it is the upper region."""
        return self.high == inf

    def holds(self, value: float) -> bool:
        """Tell whether a value of the statistic lies in the region."""
        return self.low <= value <= self.high


@dataclass(frozen=True)
class Bar:
    """Values from ``low`` to ``high`` with their probability; ``rejects`` where they lie in a region."""

    low: float
    high: float
    probability: float
    rejects: bool

    @property
    def height(self) -> float:
        """Probability for each unit of the statistic."""
        return self.probability / (self.high - self.low)


@dataclass(frozen=True)
class NullLaw:
    """The distribution of a statistic under the null hypothesis.

    centre, spread  its middle and standard deviation (t: scale 1)
    support         smallest and largest possible value (infinite for t and z)
    regions         what rejects, lower region first
    bars            exact probabilities of a counting statistic; empty for a continuous one
    df              degrees of freedom of the curve, None for a normal one
    approximate     True where the regions are those of an approximation
    """

    centre: float
    spread: float
    support: tuple[float, float]
    regions: tuple[Region, ...]
    bars: tuple[Bar, ...] = ()
    df: float | None = None
    approximate: bool = False

    def density(self, values: np.ndarray) -> np.ndarray:
        """Return the density of a continuous law at values of the statistic."""
        scaled = (values - self.centre) / self.spread
        return np.asarray(t_density(scaled, inf if self.df is None else self.df)) / self.spread

    def window(self) -> tuple[float, float]:
        """Return the part of the axis on which the law and its critical values can be seen."""
        reach = max((abs(region.bound - self.centre) for region in self.regions), default=0.0)
        half = max(HALF_LEAST * self.spread, BEYOND_CRITICAL * reach)
        low, high = max(self.centre - half, self.support[0]), min(self.centre + half, self.support[1])
        margin = (self.bars[0].high - self.bars[0].low) / 2 if self.bars else 0.0
        return low - margin, high + margin


def null_law(test: Test) -> NullLaw:
    """Return the law of the statistic of a test if the true value were the target."""
    if test.procedure == "sign":
        return _sign(test)
    if test.procedure == "signed_rank":
        return _signed_rank(test) if test.null_ranks or not test.approximate else _large_signed_rank(test)
    df = inf if test.df is None else test.df
    lower, upper = test.critical
    regions = []
    if lower is not None:
        regions.append(Region(-inf, lower, float(t_upper(-lower, df)), lower))
    if upper is not None:
        regions.append(Region(upper, inf, float(t_upper(upper, df)), upper))
    return NullLaw(0.0, 1.0, (-inf, inf), tuple(regions), df=test.df)


def drawn_statistic(test: Test, law: NullLaw) -> float:
    """Return where the observed statistic is drawn: its value, kept on the side of the critical value that p decided.

    Only a statistic that equals a critical value to the last digits is moved, by one such digit.
    """
    value = test.statistic
    region = next((one for one in law.regions if one.holds(value)), None)
    if test.reject and region is None and law.regions:
        nearest = min(law.regions, key=lambda one: abs(one.bound - value))
        return nearest.bound
    if not test.reject and region is not None and not law.bars:
        return nextafter(region.bound, -inf if region.upper else inf)
    return value


def _sign(test: Test) -> NullLaw:
    n = test.n_used
    if n > EXACT_COUNT:
        return _normal(n / 2, sqrt(n) / 2, (0.0, float(n)), test, 1.0)
    chances = np.array([comb(n, k) / 2**n for k in range(n + 1)])
    return _counting(np.arange(n + 1.0), chances, n / 2, sqrt(n) / 2 or 0.5, test)


def _signed_rank(test: Test) -> NullLaw:
    chances = null_distribution(test.null_ranks)
    steps = np.arange(len(chances)) / 2
    possible = chances > 0
    spread = sqrt(test.null_variance or 0.0) or 0.5
    return _counting(steps[possible], chances[possible], float(steps[-1]) / 2, spread, test)


def _large_signed_rank(test: Test) -> NullLaw:
    zeros = test.n - test.n_used
    total = (test.n * (test.n + 1) - zeros * (zeros + 1)) / 2
    return _normal(total / 2, sqrt(test.null_variance or 1.0), (0.0, total), test, 1.0)


def _normal(centre: float, spread: float, support: tuple[float, float], test: Test, step: float) -> NullLaw:
    """Return the normal curve for a count with many values; areas with half a step as continuity correction."""
    lower, upper = test.critical
    regions = []
    if lower is not None:
        regions.append(Region(-inf, lower, float(normal_upper((centre - lower - step / 2) / spread)), lower))
    if upper is not None:
        regions.append(Region(upper, inf, float(normal_upper((upper - step / 2 - centre) / spread)), upper))
    return NullLaw(centre, spread, support, tuple(regions), approximate=True)


def _counting(values: np.ndarray, chances: np.ndarray, centre: float, spread: float, test: Test) -> NullLaw:
    lower, upper = test.critical
    below = np.zeros(len(values), bool) if lower is None else values <= lower
    above = np.zeros(len(values), bool) if upper is None else values >= upper
    regions = []
    if lower is not None and below.any():
        regions.append(Region(-inf, lower, float(chances[below].sum()), lower))
    if upper is not None and above.any():
        regions.append(Region(upper, inf, float(chances[above].sum()), upper))
    bars = _bars(values, chances, below, above)
    return NullLaw(centre, spread, (float(values[0]), float(values[-1])), tuple(regions), bars)


def _bars(values: np.ndarray, chances: np.ndarray, below: np.ndarray, above: np.ndarray) -> tuple[Bar, ...]:
    """Return a bar for each value; where there are too many, bars of several values that never cross a bound."""
    step = float(np.min(np.diff(values))) if len(values) > 1 else 1.0
    each = max(1, -(-len(values) // MOST_BARS))
    zones = [np.flatnonzero(below)[::-1], np.flatnonzero(~below & ~above), np.flatnonzero(above)]
    bars = []
    for zone, rejects in zip(zones, (True, False, True), strict=True):
        for start in range(0, len(zone), each):
            part = np.sort(zone[start : start + each])
            low, high = float(values[part[0]]) - step / 2, float(values[part[-1]]) + step / 2
            bars.append(Bar(low, high, float(chances[part].sum()), rejects))
    return tuple(sorted(bars, key=lambda bar: bar.low))
