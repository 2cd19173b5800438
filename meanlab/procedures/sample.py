"""The independent units of one question as whole numbers, and their exact moments."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property
from typing import Any

import numpy as np

from meanlab.core.numbers import quotient, root

FEW = 64
NARROW = 2**31
WIDE = 2**61


@dataclass(frozen=True)
class Sample:
    """n independent units x = whole · 10**exponent / divisor, held against target · 10**exponent / divisor.

    whole     whole numbers, shape (n,), 64 bits where they fit, else Python integers
    target    a whole number on the same scale
    divisor   1, or for preparation means the least common multiple of their counts of readings
    """

    whole: np.ndarray
    target: int
    exponent: int
    divisor: int = 1

    @property
    def n(self) -> int:
        """How many independent units."""
        return len(self.whole)

    def at(self, target: int) -> "Sample":
        """Return the same units held against another target."""
        return replace(self, target=target)

    def without(self, places: Sequence[int]) -> "Sample":
        """Return the sample without the units at these places."""
        return replace(self, whole=np.delete(self.whole, list(places)))

    @cached_property
    def first(self) -> int:
        """The first unit, from which the others are measured."""
        return int(self.whole[0])

    @cached_property
    def sums(self) -> tuple[int, int, int]:
        """Σd, Σd², Σd³ of d = whole − first, exactly."""
        return power_sums(self.whole, self.first)

    @cached_property
    def central(self) -> tuple[int, int]:
        """n²·m₂ and n³·m₃, the second and third central moments (divisor n) as whole numbers."""
        n, (s1, s2, s3) = self.n, self.sums
        return n * s2 - s1 * s1, n * n * s3 - 3 * n * s1 * s2 + 2 * s1**3

    @cached_property
    def total_difference(self) -> int:
        """Σ(whole − target)."""
        return self.sums[0] + self.n * (self.first - self.target)

    @cached_property
    def mean(self) -> float:
        """x̄, correctly rounded."""
        return quotient(self.sums[0] + self.n * self.first, self.n * self.divisor, self.exponent)

    @cached_property
    def difference(self) -> float:
        """x̄ − μ₀, correctly rounded."""
        return quotient(self.total_difference, self.n * self.divisor, self.exponent)

    @cached_property
    def s(self) -> float:
        """Experimental standard deviation (divisor n − 1), correctly rounded; 0 for one unit."""
        if self.n < 2:
            return 0.0
        return root(self.central[0], self.n * (self.n - 1) * self.divisor**2, 2 * self.exponent)

    @cached_property
    def standard_error(self) -> float:
        """s/√n, correctly rounded."""
        if self.n < 2:
            return 0.0
        return root(self.central[0], self.n**2 * (self.n - 1) * self.divisor**2, 2 * self.exponent)

    @cached_property
    def ratio(self) -> float:
        """T = (x̄ − μ₀)/(s/√n), correctly rounded; needs s > 0."""
        size = root(self.total_difference**2 * (self.n - 1), self.central[0])
        return size if self.total_difference >= 0 else -size

    @cached_property
    def skewness(self) -> float:
        """g₁ = m₃/m₂^1.5 (divisor n), correctly rounded; 0 where s = 0."""
        second, third = self.central
        if second == 0:
            return 0.0
        size = root(third**2, second**3)
        return size if third >= 0 else -size

    @cached_property
    def shifted(self) -> np.ndarray:
        """The units measured from the first one and scaled so that the largest is ±1, shape (n,), doubles."""
        steps = self.whole - self.first
        widest = int(np.max(np.abs(steps)))
        if widest == 0:
            return np.zeros(self.n)
        if widest < 2**53:
            return steps.astype(float) / widest
        return np.array([int(step) / widest for step in steps])

    @cached_property
    def differences(self) -> np.ndarray:
        """whole − target, shape (n,), exact."""
        narrow = self.whole.dtype != object and -WIDE < self.target < WIDE
        return (self.whole if narrow else self.whole.astype(object)) - self.target

    def value(self, whole: int, parts: int = 1) -> float:
        """Return a whole number on the scale of the units, divided by ``parts``, in the unit of the readings."""
        return quotient(whole, parts * self.divisor, self.exponent)


@dataclass(frozen=True)
class Spans:
    """Units known to lie between two bounds on the scale of Sample; a plain unit has low = high.

    lows, highs   whole numbers or ±infinity, shape (n,)
    """

    lows: np.ndarray
    highs: np.ndarray
    target: int
    exponent: int
    divisor: int = 1

    @classmethod
    def of(cls, sample: Sample) -> "Spans":
        """Return the plain units of a sample."""
        return cls(sample.whole, sample.whole, sample.target, sample.exponent, sample.divisor)

    @property
    def n(self) -> int:
        """How many independent units."""
        return len(self.lows)

    def at(self, target: int) -> "Spans":
        """Return the same units held against another target."""
        return replace(self, target=target)

    @cached_property
    def plain(self) -> bool:
        """Whether every unit has equal bounds."""
        return self.lows is self.highs or bool(np.all(self.lows == self.highs))

    @cached_property
    def rising(self) -> tuple[np.ndarray, np.ndarray]:
        """The lower bounds in rising order, and the upper ones, shape (n,) each."""
        lows = np.sort(self.lows)
        return lows, (lows if self.plain else np.sort(self.highs))

    def value(self, bound: Any, other: Any = None, origin: int = 0) -> float | None:
        """Return a bound, or the middle of two, minus ``origin`` in the unit of the readings; None if infinite."""
        pair = (bound, bound if other is None else other)
        if any(isinstance(end, float) for end in pair):
            return None
        return quotient(int(pair[0]) + int(pair[1]) - 2 * origin, 2 * self.divisor, self.exponent)


def whole_array(numbers: Sequence[int], *others: int) -> np.ndarray:
    """Return whole numbers as 64-bit integers where sums of two of them and ``others`` fit, else as Python's."""
    fits = all(-WIDE < number < WIDE for number in (min(numbers), max(numbers), *others))
    return np.array(numbers, dtype=np.int64 if fits else object)


def power_sums(whole: np.ndarray, origin: int) -> tuple[int, int, int]:
    """Return Σd, Σd², Σd³ of d = whole − origin as Python integers, exactly.

    Many narrow numbers are summed as 64-bit integers in halves, so that no sum can overflow.

    >>> power_sums(np.array([7, 8, 10]), 7)
    (4, 10, 28)
    """
    steps = whole - origin
    if len(steps) > FEW and steps.dtype != object and int(np.max(np.abs(steps))) < NARROW:
        squares = steps * steps
        high, low = squares >> 31, squares & (NARROW - 1)
        return _total(steps), _total(squares), (_total(high * steps) << 31) + _total(low * steps)
    numbers = [int(step) for step in steps]
    squares_of = [number * number for number in numbers]
    cubes = sum(square * number for square, number in zip(squares_of, numbers, strict=True))
    return sum(numbers), sum(squares_of), cubes


def _total(numbers: Any) -> int:
    """Sum 64-bit integers in two halves: exact up to 2³¹ of them."""
    return (int(np.sum(numbers >> 32)) << 32) + int(np.sum(numbers & 0xFFFFFFFF))
