"""Quotients and roots of whole numbers for many samples at once, each the nearest double, as `core.numbers` gives them.

A number is carried as the sum of two doubles, high + low, with about 104 bits (Dekker 1971, Numerische Mathematik
18:224). Where the low part lies so close to half a unit of the last place that those bits cannot tell which way to
round, and where whole numbers are no 64-bit ones, the one number is computed by `core.numbers`.
"""

from collections.abc import Callable
from typing import Any, TypeAlias

import numpy as np

from meanlab.core.numbers import quotient, root

Pair: TypeAlias = tuple[Any, Any]
EXACT = 2**53
CLOSE = 2.0**-40
_SPLITTER = 2.0**27 + 1


def quotients(numerator: np.ndarray, denominator: int, exponent: int = 0) -> np.ndarray:
    """Return numerator · 10**exponent / denominator, shape (samples,), each the nearest double.

    >>> quotients(np.array([1, 2, 10]), 3).tolist()
    [0.3333333333333333, 0.6666666666666666, 3.3333333333333335]
    """

    def one(place: int) -> float:
        return quotient(int(numerator[place]), denominator, exponent)

    if numerator.dtype == object or exponent > 0:
        return _one_by_one(one, len(numerator))
    whole = denominator * 10**-exponent
    if whole < EXACT and _all_below(numerator, EXACT):
        return numerator / float(whole)
    return _nearest(_divided(_pair(numerator), _pair(whole)), one)


def roots(numerator: np.ndarray, denominator: Any, exponent: int = 0) -> np.ndarray:
    """Return √(numerator · 10**exponent / denominator), shape (samples,), each the nearest double; no sign of its own.

    >>> roots(np.array([2, 4, 0]), 1).tolist()
    [1.4142135623730951, 2.0, 0.0]
    """

    def one(place: int) -> float:
        return root(int(numerator[place]), int(np.broadcast_to(denominator, numerator.shape)[place]), exponent)

    if numerator.dtype == object or exponent > 0:
        return _one_by_one(one, len(numerator))
    squared = _divided(_divided(_pair(numerator), _pair(denominator)), _pair(10**-exponent))
    return _nearest(_root(squared), one)


def ratios(difference: np.ndarray, factor: int, squares: np.ndarray) -> np.ndarray:
    """Return difference · √(factor / squares), shape (samples,), each the nearest double; squares above 0.

    >>> ratios(np.array([-3, 2]), 1, np.array([2, 4])).tolist()
    [-2.1213203435596424, 1.0]
    """

    def one(place: int) -> float:
        size = root(int(difference[place]) ** 2 * factor, int(squares[place]))
        return size if difference[place] >= 0 else -size

    if difference.dtype == object or squares.dtype == object:
        return _one_by_one(one, len(difference))
    scale = _root(_divided(_pair(factor), _pair(squares)))
    return _nearest(_product(_pair(difference), scale), one)


def skewnesses(third: np.ndarray, second: np.ndarray) -> np.ndarray:
    """Return third / second^1.5, shape (samples,), each the nearest double; second above 0.

    >>> skewnesses(np.array([-4, 0]), np.array([4, 9])).tolist()
    [-0.5, 0.0]
    """

    def one(place: int) -> float:
        size = root(int(third[place]) ** 2, int(second[place]) ** 3)
        return size if third[place] >= 0 else -size

    if third.dtype == object or second.dtype == object:
        return _one_by_one(one, len(third))
    below = _pair(second)
    return _nearest(_divided(_divided(_pair(third), below), _root(below)), one)


def _one_by_one(one: Callable[[int], float], count: int) -> np.ndarray:
    return np.array([one(place) for place in range(count)], dtype=float)


def _all_below(numbers: np.ndarray, bound: int) -> bool:
    return not len(numbers) or (-bound < int(numbers.min()) and int(numbers.max()) < bound)


def _nearest(pair: Pair, one: Callable[[int], float]) -> np.ndarray:
    """Return high + low as one double; what is too close to the middle between two is computed alone."""
    high, low = pair
    unit = np.spacing(np.abs(high))
    part = np.abs(low) / unit
    unclear = (np.abs(part - 0.5) < CLOSE) | (np.abs(part - 0.25) < CLOSE)  # a quarter: just below a power of two
    for place in np.flatnonzero(unclear):
        high[place] = one(int(place))
    return np.asarray(high)


def _pair(whole: Any) -> Pair:
    """A whole number, or 64-bit ones, as two doubles without loss."""
    if isinstance(whole, np.ndarray):
        high = whole.astype(float)
        return high, (whole - high.astype(np.int64)).astype(float)
    return np.float64(whole), np.float64(whole - int(float(whole)))


def _two_sum(a: Any, b: Any) -> Pair:
    """a + b as two doubles, |a| ≥ |b|."""
    total = a + b
    return total, b - (total - a)


def _two_product(a: Any, b: Any) -> Pair:
    product = a * b
    a_high, b_high = _upper_half(a), _upper_half(b)
    a_low, b_low = a - a_high, b - b_high
    return product, ((a_high * b_high - product) + a_high * b_low + a_low * b_high) + a_low * b_low


def _upper_half(a: Any) -> Any:
    wide = _SPLITTER * a
    return wide - (wide - a)


def _product(x: Pair, y: Pair) -> Pair:
    high, low = _two_product(x[0], y[0])
    return _two_sum(high, low + (x[0] * y[1] + x[1] * y[0]))


def _divided(x: Pair, y: Pair) -> Pair:
    first = x[0] / y[0]
    rest = _less(x, _product((first, 0.0), y))
    second = rest[0] / y[0]
    rest = _less(rest, _product((second, 0.0), y))
    high, low = _two_sum(first, second)
    return _two_sum(high, low + rest[0] / y[0])


def _less(x: Pair, y: Pair) -> Pair:
    """x − y, where y is close to x."""
    total = x[0] - y[0]
    part = total - x[0]
    lost = (x[0] - (total - part)) - (y[0] + part)
    return _two_sum(total, lost + (x[1] - y[1]))


def _root(x: Pair) -> Pair:
    """√x, 0 for 0."""
    first = np.sqrt(x[0])
    rest = _less(x, _two_product(first, first))
    with np.errstate(invalid="ignore", divide="ignore"):
        second = np.where(first > 0, rest[0] / (2 * first), 0.0)
    return _two_sum(first, second)
