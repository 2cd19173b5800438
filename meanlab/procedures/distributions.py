"""Tails and quantiles that the tests, the intervals, the power and the pictures share, so that they cannot disagree.

Every function takes arrays and returns doubles; tails are upper tails, with full relative accuracy down to 1e-300.
Checked against mpmath at 50 digits in tests/procedures/test_distributions.py.
"""

from typing import Any

import numpy as np
from scipy import special

EXACT_COUNT = 1000
NEAR = 1e-6
FAR = 1e150
FEW_SHARE = 1 / 500


def normal_upper(z: Any) -> Any:
    """Return P(Z > z) for a standard normal Z.

    >>> round(float(normal_upper(1.959963984540054)), 12)
    0.025
    """
    return special.ndtr(-np.asarray(z, dtype=float))


def normal_critical(tail: Any) -> Any:
    """Return the value that a standard normal exceeds with probability ``tail``."""
    return -special.ndtri(tail)


def t_upper(t: Any, df: Any) -> Any:
    """Return P(T > t) for Student's t with ``df`` degrees of freedom (infinite: the normal distribution).

    Near 0 the incomplete beta function loses digits in its argument, so two terms of the series are used there; where
    t² no longer fits a double, the leading term (√ν/t)^ν/(ν·B(ν/2, ½)) is all of the tail.

    >>> round(float(t_upper(2.2621571627982053, 9)), 12)
    0.025
    """
    t, df = np.asarray(t, dtype=float), np.asarray(df, dtype=float)
    all_finite = bool(np.isfinite(df).all())
    finite = df if all_finite else np.where(np.isfinite(df), df, 1.0)
    with np.errstate(over="ignore", under="ignore"):
        tail = special.stdtr(finite, -t)
        near, far = t * t < NEAR * np.minimum(finite, 1.0), t > FAR
        if near.any():
            series = 0.5 - t * _t_height(finite) * (1 - (finite + 1) / finite * t * t / 6)
            tail = np.where(near, series, tail)
        if far.any():
            leading = (np.sqrt(finite) / np.where(far, t, FAR)) ** finite / (finite * special.beta(finite / 2, 0.5))
            tail = np.where(far, leading, tail)
        if all_finite:
            return tail
        return np.where(np.isfinite(df), tail, special.ndtr(-t))


def t_critical(tail: Any, df: Any) -> Any:
    """Return the value that Student's t with ``df`` degrees of freedom exceeds with probability ``tail`` < ½.

    Where the library's inverse gives up (tails below 1e-250), the leading term of the tail is turned round.

    >>> round(float(t_critical(0.025, 9)), 12)
    2.262157162798
    """
    df = np.asarray(df, dtype=float)
    all_finite = bool(np.isfinite(df).all())
    finite = df if all_finite else np.where(np.isfinite(df), df, 1.0)
    q = -special.stdtrit(finite, tail)
    lost = q <= 0
    if lost.any():
        q = np.where(lost, np.sqrt(finite) * (tail * finite * special.beta(finite / 2, 0.5)) ** (-1 / finite), q)
    return q if all_finite else np.where(np.isfinite(df), q, -special.ndtri(tail))


def t_density(t: Any, df: Any) -> Any:
    """Return the density of Student's t; infinite ``df`` gives the normal density."""
    t, df = np.asarray(t, dtype=float), np.asarray(df, dtype=float)
    finite = np.where(np.isfinite(df), df, 1.0)
    with np.errstate(over="ignore", under="ignore"):
        density = _t_height(finite) * np.exp(-(finite + 1) / 2 * np.log1p(t * t / finite))
        if np.all(np.isfinite(df)):
            return density
        return np.where(np.isfinite(df), density, np.exp(-t * t / 2) / np.sqrt(2 * np.pi))


def _t_height(df: Any) -> Any:
    """Return the density of Student's t at 0; the beta function loses digits at many degrees of freedom."""
    v = 1 / np.asarray(df, dtype=float)
    many = (1 + v * (-1 / 4 + v * (1 / 32 + v * (5 / 128 - v * 21 / 2048)))) / np.sqrt(2 * np.pi)
    return np.where(v < FEW_SHARE, many, 1 / (np.sqrt(df) * special.beta(np.asarray(df) / 2, 0.5)))


def fair_lower(count: int, n: int) -> float:
    """Return P(B ≤ count) for B binomial with n trials and probability ½; exact up to 1,000 trials.

    >>> fair_lower(1, 10)
    0.0107421875
    """
    if count < 0:
        return 0.0
    if count >= n:
        return 1.0
    if n > EXACT_COUNT:
        return float(special.bdtr(count, n, 0.5))
    total = ways = 1
    for k in range(count):
        ways = ways * (n - k) // (k + 1)
        total += ways
    return total / 2**n


def fair_critical(tail: float, n: int) -> int:
    """Return the largest count j with P(B ≤ j) < tail for B binomial(n, ½); −1 where there is none.

    >>> fair_critical(0.025, 10), fair_critical(0.025, 5)
    (1, -1)
    """
    if n > EXACT_COUNT:
        low, high = -1, n // 2
        while high - low > 1:
            middle = (low + high) // 2
            low, high = (middle, high) if fair_lower(middle, n) < tail else (low, middle)
        return low
    total, bound, count, ways = 0, tail * 2.0**n, -1, 1
    while total + ways < bound:
        total += ways
        count += 1
        ways = ways * (n - count) // (count + 1)
    return count
