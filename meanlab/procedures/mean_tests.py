"""z, Student's t and guarded t: what they share is a statistic on the scale of the standard uncertainty.

The critical values (lower, upper) on that scale give the interval [x̄ − upper·u, x̄ − lower·u], so that the target lies
outside it exactly where p < α. The figures are computed for one sample (floats) and for many at once (arrays, samples
along the first axis) by the same functions.
"""

from dataclasses import dataclass
from functools import reduce
from math import hypot, inf, isfinite, sqrt
from typing import Any, Protocol

import numpy as np

from meanlab.core.results import Component, Interval, Test
from meanlab.procedures.decision import one_sided, p_value, rejecting_sides, tail
from meanlab.procedures.distributions import t_critical, t_upper
from meanlab.procedures.sample import Sample


@dataclass(frozen=True)
class Further:
    """Standard uncertainties beside the scatter: of the target (with its df), and the laboratory's own."""

    target_u: float = 0.0
    target_df: float = inf
    own_u: float = 0.0

    @property
    def u(self) -> float:
        """Combined standard uncertainty of both."""
        return hypot(self.target_u, self.own_u)


NONE_FURTHER = Further()


class Moments(Protocol):
    """What the tests of the mean look at: numbers of one sample, or arrays of shape (samples,) for many."""

    @property
    def n(self) -> int:
        """How many independent units in each sample."""

    @property
    def mean(self) -> Any:
        """x̄."""

    @property
    def difference(self) -> Any:
        """x̄ − μ₀."""

    @property
    def standard_error(self) -> Any:
        """s/√n."""

    @property
    def ratio(self) -> Any:
        """(x̄ − μ₀)/(s/√n)."""

    @property
    def skewness(self) -> Any:
        """g₁."""


@dataclass(frozen=True)
class Figures:
    """What a test of the mean comes to: numbers for one sample, arrays of shape (samples,) for many.

    u is the standard uncertainty of the difference, lower and upper are critical values on its scale, df infinite for
    the normal distribution, skew_term a = g₁/(3√n) of the guarded t.
    """

    statistic: Any
    u: Any
    df: Any
    p_greater: Any
    p_less: Any
    lower: Any
    upper: Any
    skew_term: Any = None

    def ends(self, centre: Any, alternative: str) -> tuple[Any, Any]:
        """Return the ends of the interval around the mean or the difference; None for one that there is not."""
        with np.errstate(over="ignore"):
            return one_sided(alternative, centre - self.upper * self.u, centre - self.lower * self.u)


def effective_df(components: list[tuple[Any, float]]) -> Any:
    """Return the effective degrees of freedom ν = (Σu²)²/Σ(u⁴/ν) of components (u, ν); infinite where every ν is.

    Each u is a number, or an array of one shape.

    Source: Welch–Satterthwaite, JCGM 100:2008 G.4.1.

    >>> round(float(effective_df([(5.8, 24), (3.9, 5), (6.7, 8)])), 3)
    25.447
    """
    largest = reduce(np.maximum, (u for u, _ in components))
    squares = [(u / largest) * (u / largest) for u, _ in components]
    spread = sum(square * square / df for square, (_, df) in zip(squares, components, strict=True))
    total = sum(squares)
    with np.errstate(divide="ignore", over="ignore"):
        return np.where(spread > 0, total * total / spread, inf)[()]


def components_of(scatter_u: float, scatter_df: float, further: Further, scatter: str = "scatter") -> list[Component]:
    """Return the components of the uncertainty of the difference with their shares of u²; 0 is left away."""
    parts = [(scatter, scatter_u, scatter_df), ("target", further.target_u, further.target_df)]
    parts.append(("laboratory's own", further.own_u, inf))
    largest = max(u for _, u, _ in parts)
    total = sum((u / largest) ** 2 for _, u, _ in parts)
    return [
        Component(name, u, df if isfinite(df) else None, (u / largest) ** 2 / total) for name, u, df in parts if u > 0
    ]


def t_tails(statistic: Any, df: Any) -> tuple[Any, Any]:
    """Return (p for "greater", p for "less") of t statistics, any shape."""
    return t_upper(statistic, df), t_upper(-np.asarray(statistic), df)


def guard(statistic: Any, a: Any) -> Any:
    """Return g(T) = T + aT² + a²T³/3 + a/2 with a = g₁/(3√n), Hall's (1992, from memory) cubic correction.

    >>> float(guard(2.0, 0.0))
    2.0
    """
    T = np.clip(statistic, -1e100, 1e100)
    return T * (1 + a * T * (1 + a * T / 3)) + a / 2


def unguard(value: Any, a: Any) -> Any:
    """Return T with g(T) = value: T = 3y/(c² + c + 1), y = value − a/2, c the real cube root of 1 + 3ay.

    Far out, where c² may overflow and nothing cancels, the same is (c − 1)/a.
    """
    y = np.clip(value - a / 2, -1e150, 1e150)
    c = np.cbrt(1 + 3 * a * y)
    far = np.abs(a * y) > 1
    return np.where(far, (c - 1) / np.where(far, a, 1.0), 3 * y / (c * c + c + 1))


def guarded_tails(ratio: Any, a: Any, df: Any) -> tuple[Any, Any]:
    """Return both one-sided p-values of the guarded t: per tail the larger of those of T and g(T)."""
    corrected = guard(ratio, a)
    return t_upper(np.minimum(ratio, corrected), df), t_upper(-np.maximum(ratio, corrected), df)


def guarded_critical(a: Any, df: Any, each_tail: float) -> tuple[Any, Any]:
    """Return the lower and upper critical value of the guarded t on the scale of T."""
    q = t_critical(each_tail, df)
    return np.minimum(-q, unguard(-q, a)), np.maximum(q, unguard(q, a))


def z_figures(
    units: Moments, sigma: float, sigma_df: float, alternative: str, alpha: float, further: Further
) -> Figures:
    """Return the figures of the z test, z = (x̄ − μ₀)/√(σ²/n + u₀² + u_B²); see `known_sigma`."""
    scatter_u = sigma / sqrt(units.n)
    u = hypot(scatter_u, further.u)
    df = effective_df([(scatter_u, sigma_df), (further.target_u, further.target_df), (further.own_u, inf)])
    with np.errstate(over="ignore"):
        return _by_t(units.difference / u, u, df, alternative, alpha)


def t_figures(units: Moments, alternative: str, alpha: float, further: Further = NONE_FURTHER) -> Figures:
    """Return the figures of Student's t, t = (x̄ − μ₀)/√(s²/n + u₀² + u_B²); see `students_t`."""
    if further.u == 0:
        return _by_t(units.ratio, units.standard_error, units.n - 1, alternative, alpha)
    scatter_u = units.standard_error
    u = np.hypot(scatter_u, further.u)
    parts = [(scatter_u, units.n - 1.0), (further.target_u, further.target_df), (further.own_u, inf)]
    with np.errstate(over="ignore"):
        return _by_t(units.difference / u, u, effective_df(parts), alternative, alpha)


def guarded_figures(units: Moments, alternative: str, alpha: float) -> Figures:
    """Return the figures of the guarded t; see `guarded_t`."""
    a, df = units.skewness / (3 * sqrt(units.n)), units.n - 1
    tails = guarded_tails(units.ratio, a, df)
    critical = guarded_critical(a, df, tail(alternative, alpha))
    return Figures(units.ratio, units.standard_error, df, *tails, *critical, a)


def _by_t(statistic: Any, u: Any, df: Any, alternative: str, alpha: float) -> Figures:
    q = t_critical(tail(alternative, alpha), df)
    return Figures(statistic, u, df, *t_tails(statistic, df), -q, q)


def known_sigma(
    sample: Sample, sigma: float, sigma_df: float, alternative: str, alpha: float, further: Further
) -> Test:
    """Return the z test of the mean with known σ of one unit.

    z = (x̄ − μ₀)/√(σ²/n + u₀² + u_B²), standard normal; with degrees of freedom of σ or u₀ given, t(ν) by
    Welch–Satterthwaite. Never with s in place of σ.
    """
    return _test("z", sample, z_figures(sample, sigma, sigma_df, alternative, alpha, further), alternative, alpha)


def students_t(sample: Sample, alternative: str, alpha: float, further: Further = NONE_FURTHER) -> Test:
    """Return Student's t test of the mean, t = (x̄ − μ₀)/√(s²/n + u₀² + u_B²); needs n ≥ 2 and s > 0.

    df = n − 1, or with further components the effective degrees of freedom (Welch–Satterthwaite, GUM G.4).
    Source: Student 1908; JCGM 100:2008.
    """
    return _test("t", sample, t_figures(sample, alternative, alpha, further), alternative, alpha)


def guarded_t(sample: Sample, alternative: str, alpha: float) -> Test:
    """Return the guarded t test of the mean: t and its correction for skewness, per tail the more cautious of both.

    Use it where readings are skewed; it needs n ≥ 3 and s > 0, and takes no further uncertainty in.
    Source: Hall 1992 (from memory) for the cubic; the rule and its behaviour in DEVELOPERS.md.
    """
    return _test("guarded_t", sample, guarded_figures(sample, alternative, alpha), alternative, alpha)


def _test(name: str, sample: Sample, found: Figures, alternative: str, alpha: float) -> Test:
    """Return the test of one sample."""
    p_greater, p_less = float(found.p_greater), float(found.p_less)
    p = float(p_value(alternative, p_greater, p_less))
    below, above = rejecting_sides(alternative)
    low, high = map(_or_none, found.ends(sample.mean, alternative))
    below_target, above_target = map(_or_none, found.ends(sample.difference, alternative))
    return Test(
        procedure=name,
        parameter="mean",
        alternative=alternative,
        significance=alpha,
        n=sample.n,
        n_used=sample.n,
        statistic=float(found.statistic),
        df=_degrees(found.df),
        p_value=p,
        p_greater=p_greater,
        p_less=p_less,
        critical=(float(found.lower) if below else None, float(found.upper) if above else None),
        reject=p < alpha,
        estimate=sample.mean,
        standard_error=float(found.u),
        interval=Interval(low, high, 1 - alpha, 1 - alpha),
        offsets=(sample.difference, below_target, above_target),
        smallest_p=0.0,
        skew_term=None if found.skew_term is None else float(found.skew_term),
    )


def _or_none(end: Any) -> float | None:
    return None if end is None else float(end)


def _degrees(df: Any) -> float | None:
    """A whole number of degrees of freedom stays one; infinite ones are none."""
    if isinstance(df, int):
        return df
    return float(df) if isfinite(df) else None
