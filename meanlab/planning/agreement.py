"""The probability to show agreement within a limit: two one-sided tests, integrated over s."""

from math import hypot, sqrt

import numpy as np

from meanlab.planning.detection import critical_distance
from meanlab.planning.scatter import ratio_panels
from meanlab.procedures.distributions import normal_critical, normal_upper, t_critical
from meanlab.procedures.mean_tests import Further


def agreement_power(n: int, limit: float, s: float, true: float, significance: float, target_u: float = 0.0) -> float:
    """Return the probability that n units show agreement within ± limit at this true difference.

    ∫ over s of P(|N(Δ, σ²/n + u²)| < E − t(ν(s))·√(s²/n + u²)). Source: Owen 1965; Schuirmann 1987.
    """
    if n < 2:
        return 0.0
    scatter, df, further = s / sqrt(n), n - 1.0, Further(target_u)
    total = hypot(scatter, target_u)
    steepest = float(t_critical(significance, df)) * scatter / total
    edge = (limit - abs(true)) / (steepest * total)
    last = _last_ratio(limit, scatter, df, further, significance)
    r, weights = ratio_panels(df, edge, 1 / steepest, steps=min(steepest, 40.0), upto=last)
    room = limit - critical_distance(r, scatter, df, further, significance)
    return float(weights @ _between(-(room + true) / total, (room - true) / total, room > 0))


def _last_ratio(limit: float, scatter: float, df: float, further: Further, significance: float) -> float:
    """Return the ratio s/σ from which on nothing can agree, because the interval is wider than the limits."""
    if further.u == 0:
        return limit / (float(t_critical(significance, df)) * scatter)
    low, high = 0.0, 1.0

    def reaches(r: float) -> bool:
        return bool(critical_distance(np.array([r]), scatter, df, further, significance)[0] >= limit)

    if reaches(0.0):
        return 0.0
    while not reaches(high) and high < 1e6:
        low, high = high, 2 * high
    for _ in range(60):
        middle = (low + high) / 2
        low, high = (low, middle) if reaches(middle) else (middle, high)
    return high


def _between(low: np.ndarray, high: np.ndarray, there: np.ndarray) -> np.ndarray:
    """Return P(low < Z < high), 0 where there is no room."""
    lower, upper = np.where(high > 0, -high, low), np.where(high > 0, -low, high)
    return np.where(there, np.clip(normal_upper(lower) - normal_upper(upper), 0.0, None), 0.0)


def highest_agreement(limit: float, true: float, significance: float, target_u: float) -> float:
    """Return the power that no number of readings exceeds: 1 without uncertainty of the target."""
    if target_u == 0:
        return 1.0 if abs(true) < limit else 0.0
    room = limit / target_u - float(normal_critical(significance))
    shift = abs(true) / target_u
    return max(0.0, float(normal_upper(-room + shift) - normal_upper(room + shift)))

