"""Normality: Shapiro–Wilk, D'Agostino's skewness test, Anderson–Darling, and the points of the probability plot.

Samples lie along the first axis: x has shape (samples, n), and every function returns one figure a sample.
"""

from dataclasses import dataclass
from math import log, pi, sqrt

import numpy as np
from scipy import special

from meanlab.procedures.distributions import normal_upper

FEWEST, MOST = 3, 5000
FEWEST_FOR_SKEWNESS = 8
SMALLEST_P = 1e-99
THREE_LOWEST = 0.75
FEW_FOR_SHORT_FIT = 11
MOST_IN_FULL = 2000

# Royston 1995, AS R94: coefficients by rising power
_LARGEST = (0.0, 0.221157, -0.147981, -2.07119, 4.434685, -2.706056)
_SECOND = (0.0, 0.042981, -0.293762, -1.752461, 5.682633, -3.582633)
_SHIFT = (-2.273, 0.459)
_FEW_MEAN = (0.544, -0.39978, 0.025054, -6.714e-4)
_FEW_SPREAD = (1.3822, -0.77857, 0.062767, -0.0020322)
_MANY_MEAN = (-1.5861, -0.31082, -0.083751, 0.0038915)
_MANY_SPREAD = (-0.4803, -0.082676, 0.0030302)


def _polynomial(coefficients: tuple[float, ...], x: float) -> float:
    total = 0.0
    for coefficient in reversed(coefficients):
        total = total * x + coefficient
    return total


def shapiro_wilk(x: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return W and p of the Shapiro–Wilk test for samples of shape (samples, n), 3 ≤ n ≤ 5,000, none constant.

    W = (Σ aᵢ x₍ᵢ₎)²/Σ(xᵢ − x̄)² with Royston's coefficients aᵢ; p is itself an approximation (exact for n = 3).
    Raises ValueError for another n. Source: Royston 1995, Applied Statistics 44:547, AS R94.

    >>> W, p = shapiro_wilk(np.array([[148.0, 154, 158, 160, 161, 162, 166, 170, 182, 195, 236]]))
    >>> round(float(W[0]), 6), round(float(p[0]), 6)
    (0.788815, 0.006704)
    """
    x = np.asarray(x, dtype=float)
    n = x.shape[1]
    if not FEWEST <= n <= MOST:
        raise ValueError(f"Shapiro–Wilk is computed for {FEWEST} to {MOST:,} readings, not for {n}.")
    weights = shapiro_wilk_weights(n)
    centred = np.sort(x, axis=1) - x.mean(axis=1, keepdims=True)
    length = np.sqrt(np.einsum("ij,ij->i", centred, centred))
    along = np.einsum("ij,j->i", centred / length[:, np.newaxis], weights)  # alike for one sample and many
    lost = np.clip((1 - along) * (1 + along), 0.0, None)
    return 1 - lost, _shapiro_wilk_p(lost, n)


def shapiro_wilk_weights(n: int) -> np.ndarray:
    """Return the n coefficients aᵢ of W, of length 1, rising and antisymmetric (Royston 1995)."""
    if n == FEWEST:
        return np.array([-sqrt(0.5), 0.0, sqrt(0.5)])
    half = n // 2
    m = -special.ndtri((np.arange(1, half + 1) - 0.375) / (n + 0.25))
    total = 2 * float(m @ m)
    u = 1 / sqrt(n)
    upper = np.empty(half)
    upper[0] = _polynomial(_LARGEST, u) + m[0] / sqrt(total)
    if n > 5:
        upper[1] = _polynomial(_SECOND, u) + m[1] / sqrt(total)
        fitted = 2
    else:
        fitted = 1
    rest = total - 2 * float(m[:fitted] @ m[:fitted])
    room = 1 - 2 * float(upper[:fitted] @ upper[:fitted])
    upper[fitted:] = m[fitted:] / sqrt(rest / room)
    weights = np.zeros(n)
    weights[:half], weights[n - half :] = -upper, upper[::-1]
    return weights


def _shapiro_wilk_p(lost: np.ndarray, n: int) -> np.ndarray:
    """Return p for 1 − W, any shape."""
    with np.errstate(divide="ignore"):
        y = np.log(lost)
    if n == FEWEST:
        root = np.sqrt(np.clip(1 - lost, THREE_LOWEST, 1.0))
        return np.clip(6 / pi * (np.arcsin(root) - np.arcsin(sqrt(THREE_LOWEST))), 0.0, 1.0)
    if n > FEW_FOR_SHORT_FIT:
        mean, spread = (_polynomial(fit, log(n)) for fit in (_MANY_MEAN, _MANY_SPREAD))
        return normal_upper((y - mean) / np.exp(spread))
    shift = _polynomial(_SHIFT, n)
    mean, spread = (_polynomial(fit, n) for fit in (_FEW_MEAN, _FEW_SPREAD))
    beyond = y >= shift
    with np.errstate(divide="ignore", invalid="ignore"):
        p = normal_upper((-np.log(np.where(beyond, 1.0, shift - y)) - mean) / np.exp(spread))
    return np.where(beyond, SMALLEST_P, p)


def skewness_test(x: np.ndarray) -> np.ndarray:
    """Return the two-sided p of D'Agostino's skewness test for samples of shape (samples, n), n ≥ 8, none constant.

    Source: D'Agostino 1970, Biometrika 57:679.

    >>> float(skewness_test(np.array([[-3.0, -2, -1, -0.5, 0.5, 1, 2, 3]]))[0])
    1.0
    """
    x = np.asarray(x, dtype=float)
    n = x.shape[1]
    if n < FEWEST_FOR_SKEWNESS:
        raise ValueError(f"The skewness test needs at least {FEWEST_FOR_SKEWNESS} readings, not {n}.")
    y = skewness(x) * sqrt((n + 1) * (n + 3) / (6.0 * (n - 2)))
    tails = 3.0 * (n * n + 27 * n - 70) * (n + 1) * (n + 3) / ((n - 2.0) * (n + 5) * (n + 7) * (n + 9))
    w2 = -1 + sqrt(2 * (tails - 1))
    delta, alpha = 1 / sqrt(0.5 * log(w2)), sqrt(2 / (w2 - 1))
    return 2 * normal_upper(delta * np.arcsinh(np.abs(y) / alpha))


def skewness(x: np.ndarray) -> np.ndarray:
    """Return g₁ = m₃/m₂^1.5 (divisor n) for samples of shape (samples, n)."""
    centred = x - x.mean(axis=1, keepdims=True)
    squares = centred * centred
    return (squares * centred).mean(axis=1) / squares.mean(axis=1) ** 1.5


def skewness_error(n: int) -> float:
    """Return the standard error of g₁ for normal readings, √(6(n − 2)/((n + 1)(n + 3))) (Fisher 1930)."""
    return sqrt(6 * (n - 2) / ((n + 1) * (n + 3)))


def anderson_darling(x: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return A*² and p of the Anderson–Darling test, mean and s estimated, for samples of shape (samples, n).

    A² = −n − Σ (2i − 1)(ln Φ(z₍ᵢ₎) + ln(1 − Φ(z₍ₙ₊₁₋ᵢ₎)))/n, A*² = A²(1 + 0.75/n + 2.25/n²).
    Source: D'Agostino & Stephens 1986, table 4.9 (from memory).
    """
    n = x.shape[1]
    z = (np.sort(x, axis=1) - x.mean(axis=1, keepdims=True)) / x.std(axis=1, ddof=1, keepdims=True)
    odd = 2 * np.arange(1, n + 1) - 1
    plain = -n - ((special.log_ndtr(z) + special.log_ndtr(-z[:, ::-1])) @ odd) / n
    adjusted = plain * (1 + 0.75 / n + 2.25 / n**2)
    return adjusted, anderson_darling_p(adjusted)


def anderson_darling_p(a: np.ndarray) -> np.ndarray:
    """Return p of A*², any shape, by Stephens's formula in four ranges (D'Agostino & Stephens 1986, table 4.9)."""
    capped = np.minimum(a, 150.0)
    return np.select(
        [a >= 0.6, a >= 0.34, a >= 0.2],
        [
            np.exp(1.2937 - 5.709 * capped + 0.0186 * capped**2),
            np.exp(0.9177 - 4.279 * a - 1.38 * a**2),
            1 - np.exp(-8.318 + 42.796 * a - 59.938 * a**2),
        ],
        1 - np.exp(-13.436 + 101.14 * a - 223.73 * a**2),
    )


@dataclass(frozen=True)
class ProbabilityPlot:
    """Points of a normal probability plot: n values each, in rising order.

    quantiles   standard normal quantiles at the plotting positions (i − 3/8)/(n + 1/4) (Blom 1958)
    readings    the ordered readings
    line        x̄ + s · quantile
    low, high   the band: where each ordered reading of a normal sample lies with the given probability
    level       that probability, for one point at a time
    """

    quantiles: np.ndarray
    readings: np.ndarray
    line: np.ndarray
    low: np.ndarray
    high: np.ndarray
    level: float


def probability_plot(x: np.ndarray, level: float = 0.95) -> ProbabilityPlot:
    """Return the points of the normal probability plot of one sample x of shape (n,), n ≥ 2, in the unit of x.

    The i-th of n ordered probabilities is beta(i, n + 1 − i); its quantiles, through x̄ + s·Φ⁻¹, are the band. Above
    2,000 readings it is computed at the outer places and at some between them, and interpolated.
    """
    x = np.asarray(x, dtype=float)
    n, mean, s = len(x), float(x.mean()), float(x.std(ddof=1))
    place = np.arange(1, n + 1)
    quantiles = special.ndtri((place - 0.375) / (n + 0.25))
    low, high = _band(n, quantiles, level)
    return ProbabilityPlot(quantiles, np.sort(x), mean + s * quantiles, mean + s * low, mean + s * high, level)


def _band(n: int, quantiles: np.ndarray, level: float) -> tuple[np.ndarray, np.ndarray]:
    """Return the lower and upper standard normal quantiles between which each ordered value lies."""
    place = np.arange(1, n + 1)
    if n > MOST_IN_FULL:
        inner = np.interp(np.linspace(quantiles[0], quantiles[-1], MOST_IN_FULL // 2), quantiles, place).round()
        outer = MOST_IN_FULL // 4
        place = np.unique(np.concatenate((place[:outer], inner.astype(int), place[-outer:])))
    low, high = (special.ndtri(special.betaincinv(place, n + 1 - place, (1 + side * level) / 2)) for side in (-1, 1))
    if len(place) == n:
        return low, high
    chosen = quantiles[place - 1]
    return np.interp(quantiles, chosen, low), np.interp(quantiles, chosen, high)
