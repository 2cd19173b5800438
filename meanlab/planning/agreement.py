"""The probability to show agreement within a limit: two one-sided tests, integrated over s."""

from math import hypot, inf, sqrt

import numpy as np
from scipy.optimize import brentq

from meanlab.planning.detection import critical_distance
from meanlab.planning.scatter import ratio_panels
from meanlab.procedures.distributions import normal_critical, normal_upper, t_critical
from meanlab.procedures.mean_tests import Further

HIGHEST_RATIO = 50.0
STEEPEST = 40.0
NO_SCATTER = 1e-9
FARTHEST = 1e12


def agreement_power(n: int, limit: float, s: float, true: float, significance: float, target_u: float = 0.0) -> float:
    """Return the probability that n units show agreement within ± limit at this true difference.

    ∫ over s of P(|N(Δ, σ²/n + u²)| < E − t(ν(s))·√(s²/n + u²)), tail α each. Source: Owen 1965; Schuirmann 1987.

    >>> round(agreement_power(10, 1.0, 1.0, 0.0, 0.05), 4)
    0.7952
    """
    if n < 2:
        return 0.0
    total = hypot(s / sqrt(n), target_u)  # everything below is in this unit
    scatter, further, df = s / sqrt(n) / total, Further(target_u / total), n - 1.0
    near, far, edge = (
        max(-FARTHEST, min(FARTHEST, distance / total)) for distance in (limit - abs(true), limit + abs(true), limit)
    )
    r, weights = np.ones(1), np.ones(1)
    if scatter > NO_SCATTER:
        steepest = float(t_critical(significance, df)) * scatter
        last = _last_ratio(edge, scatter, df, further, significance)
        r, weights = ratio_panels(df, near / steepest, 1 / steepest, steps=min(steepest, STEEPEST), upto=last)
    taken = critical_distance(r, scatter, df, further, significance)
    return min(1.0, float(weights @ np.where(taken < edge, _between(taken - far, near - taken), 0.0)))


def _last_ratio(edge: float, scatter: float, df: float, further: Further, significance: float) -> float:
    """Return the ratio s/σ from which on nothing can agree, because the interval is wider than the limits."""
    if further.u < NO_SCATTER:
        return edge / (float(t_critical(significance, df)) * scatter)

    def beyond(r: float) -> float:
        return float(critical_distance(r, scatter, df, further, significance)) - edge

    if beyond(0.0) >= 0:
        return 0.0
    return float(brentq(beyond, 0.0, HIGHEST_RATIO, xtol=1e-14)) if beyond(HIGHEST_RATIO) > 0 else inf


def _between(low: np.ndarray, high: np.ndarray) -> np.ndarray:
    """Return P(low < Z < high), both tails taken on the side where they are small, so that nothing cancels."""
    right = low + high > 0
    lower, upper = np.where(right, low, -high), np.where(right, high, -low)
    return np.clip(normal_upper(lower) - normal_upper(upper), 0.0, None)


def highest_agreement(limit: float, true: float, significance: float, target_u: float) -> float:
    """Return the power that no number of readings exceeds: 1 for |true| < limit without uncertainty of the target."""
    if target_u == 0:
        return float(abs(true) < limit)
    room = limit / target_u - float(normal_critical(significance))
    shift = abs(true) / target_u
    return max(0.0, float(normal_upper(shift - room) - normal_upper(shift + room))) if room > 0 else 0.0
