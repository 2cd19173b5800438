"""Normal model fitted to readings with below- or above-limit entries, by maximum likelihood; shown beside, never used.

In γ = μ/σ and θ = 1/σ the logarithm of the likelihood is concave (Olsen 1978), so that Newton's steps find its one top:
ℓ = k ln θ − ½ Σ(θxᵢ − γ)² + Σ ln Φ(±(θlⱼ − γ)), + for "below lⱼ", − for "above lⱼ"; k readings are known.
"""

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from math import inf, log, pi, sqrt

import numpy as np
from scipy import special
from scipy.optimize import brentq

from meanlab.core.numbers import common_exponent, quotient, scaled
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import CensoredFit, Interval

FEWEST = 10
MOST_STEPS = 200
CLOSE = 1e-15
QUADRATIC = 1e-5
ROUNDING = 1e-13
FARTHEST_TARGET = 10**100
FAR_BELOW = -1e3
WIDEST_LIMITS = 10**12


@dataclass(frozen=True)
class Entries:
    """Known readings, and limits with the side the entry lies on: +1 below the limit, −1 above it."""

    known: np.ndarray
    limits: np.ndarray
    sides: np.ndarray


def censored_fit_of(readings: ReadingSet, question: Question) -> CensoredFit | None:
    """Return the normal model fitted by maximum likelihood, with the profile-likelihood interval of the mean.

    None with fewer than 10 entries, fewer than half of them known, known ones all equal, or an entry without a limit:
    the estimate would be almost all model. None too with a limit so far off that beside it the readings are one point.
    The p-value is that of the likelihood ratio, χ² on 1 degree of freedom.
    Source: Cohen 1959, 1961; Tobin 1958.
    """
    limits = [entry.limit for entry in readings.censored if entry.limit is not None]
    n, known = len(readings.values) + len(readings.censored), len(readings.values)
    if n < FEWEST or 2 * known < n or len(limits) < n - known or len(set(readings.values)) < 2:
        return None
    exponent = common_exponent([*readings.values, *limits, question.exact_target], "Readings, target and limits")
    whole = [scaled(value, exponent) for value in (*readings.values, *limits)]
    origin = whole[0]
    widest = max(abs(value - origin) for value in whole)
    if widest > WIDEST_LIMITS * max(abs(value - origin) for value in whole[:known]):
        return None
    x = np.array([(value - origin) / widest for value in whole])
    sides = np.array([1.0 if entry.kind == "below" else -1.0 for entry in readings.censored])
    entries = Entries(x[:known], x[known:], sides)
    away = scaled(question.exact_target, exponent) - origin
    target = (
        away / widest
        if abs(away) < FARTHEST_TARGET * widest
        else float(FARTHEST_TARGET if away > 0 else -FARTHEST_TARGET)
    )
    mean, s, top = fit(entries)
    low, high = profile_interval(entries, mean, s, top, question.alpha)

    def value(scaled_value: float, start: int = origin) -> float:
        exact = start + Fraction(scaled_value) * widest
        return quotient(exact.numerator, exact.denominator, exponent)

    level = 1 - question.alpha
    return CensoredFit(
        mean=value(mean),
        s=value(s, 0),
        interval=Interval(value(low), value(high), level, level),
        p_value=likelihood_ratio_p(entries, target, top),
        n=n,
        censored=n - known,
    )


def fit(entries: Entries) -> tuple[float, float, float]:
    """Return mean, s (divisor n) and the logarithm of the likelihood at its top."""
    everything = np.concatenate((entries.known, entries.limits))
    theta = 1 / float(everything.std())
    place = np.array([float(everything.mean()) * theta, theta])
    height, size = _log_likelihood(entries, place), inf
    for _ in range(MOST_STEPS):
        step = _newton_step(entries, *map(float, place))
        before, size = size, _size(step, place)
        if size < QUADRATIC and size > before / 2:  # what is left is rounding
            break
        slack = ROUNDING * max(1.0, abs(height))
        while _log_likelihood(entries, place + step) < height - slack:
            step = step / 2
        place = place + step
        height = _log_likelihood(entries, place)
    return float(place[0] / place[1]), float(1 / place[1]), height


def _size(step: np.ndarray, place: np.ndarray) -> float:
    """Return how large a step in (γ, θ) is, relative to where it starts."""
    return max(abs(float(step[0])) / (abs(float(place[0])) + 1), abs(float(step[1])) / float(place[1]))


def _newton_step(entries: Entries, gamma: float, theta: float) -> np.ndarray:
    """Return the step in (γ, θ) to the top of the local parabola."""
    x, limits, k = entries.known, entries.limits, len(entries.known)
    z = theta * x - gamma
    mills, bend = _mills(entries.sides * (theta * limits - gamma))
    slope = np.array(
        [z.sum() - entries.sides @ mills, k / theta - x @ z + (entries.sides * limits) @ mills],
    )
    across = x.sum() + limits @ bend
    curvature = np.array([[k + bend.sum(), -across], [-across, k / theta**2 + x @ x + (limits * limits) @ bend]])
    return np.linalg.solve(curvature, slope)


def _mills(w: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return m = φ(w)/Φ(w) and −m′ = m(w + m), far below 0 by its series 1 − 1/w²."""
    far = w < FAR_BELOW
    with np.errstate(over="ignore"):
        mills = sqrt(2 / pi) / special.erfcx(-w / sqrt(2))
    return mills, np.where(far, 1 - 1 / np.where(far, w, 1.0) ** 2, mills * (w + mills))


def _log_likelihood(entries: Entries, place: np.ndarray) -> float:
    """Return ℓ at (γ, θ), minus infinity where θ is not above 0."""
    gamma, theta = map(float, place)
    if theta <= 0:
        return -inf
    z = theta * entries.known - gamma
    hidden = special.log_ndtr(entries.sides * (theta * entries.limits - gamma))
    return len(z) * log(theta) - float(z @ z) / 2 + float(hidden.sum())


def profile(entries: Entries, mean: float) -> float:
    """Return the logarithm of the likelihood at its top over s for a given mean."""
    away, limits = entries.known - mean, entries.sides * (entries.limits - mean)
    k, squares = len(away), float(away @ away)
    theta = sqrt(k / squares)
    for _ in range(MOST_STEPS):
        mills, bend = _mills(theta * limits)
        slope = k / theta - theta * squares + float(limits @ mills)
        step = slope / (k / theta**2 + squares + float((limits * limits) @ bend))
        while theta + step <= 0:
            step /= 2
        theta += step
        if abs(step) <= CLOSE * theta:
            break
    return k * log(theta) - theta * theta * squares / 2 + float(special.log_ndtr(theta * limits).sum())


def profile_interval(entries: Entries, mean: float, s: float, top: float, alpha: float) -> tuple[float, float]:
    """Return the means whose profile lies less than χ²(1 − α; 1)/2 below the top."""
    depth = float(special.chdtri(1, alpha)) / 2

    def beyond(value: float) -> float:
        return top - profile(entries, value) - depth

    return _end(beyond, mean, -s), _end(beyond, mean, s)


def _end(beyond: Callable[[float], float], mean: float, step: float) -> float:
    inside, outside = mean, mean + step
    while beyond(outside) < 0:
        step *= 2
        inside, outside = outside, outside + step
    return float(brentq(beyond, inside, outside, xtol=1e-15, rtol=1e-14))


def likelihood_ratio_p(entries: Entries, target: float, top: float) -> float:
    """Return P(χ²(1) > 2(ℓ(top) − ℓ(target))), two-sided."""
    return float(special.chdtrc(1, max(0.0, 2 * (top - profile(entries, target)))))
