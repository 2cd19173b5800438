"""Samples of equal size beside each other as whole numbers, one a row, and their exact moments."""

from dataclasses import dataclass, replace
from functools import cached_property
from typing import Any

import numpy as np

from meanlab.procedures.rounding import quotients, ratios, roots, skewnesses

ROOM = 2**62
DOUBLE = 2**53
_OF_WHOLE = ("first", "steps", "s2", "s1", "second", "third", "mean", "s", "standard_error", "skewness", "shifted")


@dataclass(frozen=True)
class Group:
    """Samples of n units x = whole · 10**exponent, each held against its target · 10**exponent.

    whole   whole numbers, shape (samples, n): 64 bits where no sum can overflow, else Python integers (`group_of`)
    target  a whole number for each sample, of the same kind, shape (samples,)

    Every figure has shape (samples,) and is the one that `Sample` has for that row.
    """

    whole: np.ndarray
    target: np.ndarray
    exponent: int

    def __len__(self) -> int:
        return len(self.whole)

    @property
    def n(self) -> int:
        """How many units each sample has."""
        return int(self.whole.shape[1])

    def rows(self, places: np.ndarray) -> "Group":
        """Return the samples at some places, with what is already computed of them."""
        chosen = Group(self.whole[places], self.target[places], self.exponent)
        chosen.__dict__.update({name: self.__dict__[name][places] for name in _OF_WHOLE if name in self.__dict__})
        return chosen

    def at(self, target: np.ndarray) -> "Group":
        """Return the same samples held against other targets."""
        moved = replace(self, target=target)
        moved.__dict__.update({name: self.__dict__[name] for name in _OF_WHOLE if name in self.__dict__})
        return moved

    @cached_property
    def first(self) -> np.ndarray:
        """The first unit of each sample, from which the others are measured."""
        return self.whole[:, 0]

    @cached_property
    def steps(self) -> np.ndarray:
        """whole − first, shape (samples, n)."""
        return self.whole - self.first[:, np.newaxis]

    @cached_property
    def s1(self) -> np.ndarray:
        """Σd of d = whole − first."""
        return self.steps.sum(axis=1)

    @cached_property
    def s2(self) -> np.ndarray:
        """Σd²."""
        return (self.steps * self.steps).sum(axis=1)

    @cached_property
    def second(self) -> np.ndarray:
        """n²·m₂, the second central moment (divisor n) as a whole number."""
        return self.n * self.s2 - self.s1 * self.s1

    @cached_property
    def third(self) -> np.ndarray:
        """n³·m₃, the third central moment (divisor n) as a whole number."""
        steps, s1, s2 = self.steps, self.s1, self.s2
        if steps.dtype != object and 6 * (self.n * _widest(steps)) ** 3 >= ROOM:
            steps, s1, s2 = (numbers.astype(object) for numbers in (steps, s1, s2))
        s3 = (steps * steps * steps).sum(axis=1)
        third = self.n * self.n * s3 - 3 * self.n * s1 * s2 + 2 * s1 * s1 * s1
        return np.asarray(third)

    @cached_property
    def total_difference(self) -> np.ndarray:
        """Σ(whole − target)."""
        return self.s1 + self.n * (self.first - self.target)

    @cached_property
    def mean(self) -> np.ndarray:
        """x̄."""
        return quotients(self.s1 + self.n * self.first, self.n, self.exponent)

    @cached_property
    def difference(self) -> np.ndarray:
        """x̄ − μ₀."""
        return quotients(self.total_difference, self.n, self.exponent)

    @cached_property
    def s(self) -> np.ndarray:
        """Experimental standard deviation (divisor n − 1); 0 for one unit."""
        if self.n < 2:
            return np.zeros(len(self))
        return roots(self.second, self.n * (self.n - 1), 2 * self.exponent)

    @cached_property
    def standard_error(self) -> np.ndarray:
        """s/√n; 0 for one unit."""
        if self.n < 2:
            return np.zeros(len(self))
        return roots(self.second, self.n**2 * (self.n - 1), 2 * self.exponent)

    @cached_property
    def ratio(self) -> np.ndarray:
        """T = (x̄ − μ₀)/(s/√n); every sample needs s > 0."""
        return ratios(self.total_difference, self.n - 1, self.second)

    @cached_property
    def skewness(self) -> np.ndarray:
        """g₁ = m₃/m₂^1.5 (divisor n); every sample needs s > 0."""
        return skewnesses(self.third, self.second)

    @cached_property
    def shifted(self) -> np.ndarray:
        """The units measured from the first one and scaled so that the largest is ±1, shape (samples, n); s > 0."""
        widest = np.max(np.abs(self.steps), axis=1)
        if self.steps.dtype != object:
            return self.steps / widest[:, np.newaxis].astype(float)
        shares = [[_share(step, most) for step in row] for row, most in zip(self.steps, widest, strict=True)]
        return np.array(shares, dtype=float).reshape(self.whole.shape)

    @cached_property
    def differences(self) -> np.ndarray:
        """whole − target, shape (samples, n)."""
        return self.whole - self.target[:, np.newaxis]

    def coarser_than(self, limit: float) -> np.ndarray:
        """Tell of each sample whether the common step r of its units is larger than ``limit`` times s; s > 0."""
        s, coarse = self.s, np.zeros(len(self), dtype=bool)
        apart = self.whole[:, 1:] - self.whole[:, :-1]
        bound = np.gcd(apart[:, 0], apart[:, 1]) if self.n > 2 else apart[:, 0]  # no step is larger, unless 0
        near = (bound == 0) | (quotients(bound, 1, self.exponent) / s > limit)
        if near.any():
            step = np.gcd.reduce(apart[near], axis=1)
            coarse[near] = quotients(step, 1, self.exponent) / s[near] > limit
        return coarse

    def value(self, whole: np.ndarray, parts: int = 1) -> np.ndarray:
        """Return whole numbers on the scale of the units, divided by ``parts``, in the unit of the readings."""
        return quotients(whole, parts, self.exponent)


def group_of(whole: np.ndarray, target: np.ndarray, exponent: int, limit: int = 0) -> Group:
    """Return samples of shape (samples, n) against their targets, as 64-bit integers where every sum fits.

    ``limit`` is how far from its target a sample will be held against too.
    """
    n = whole.shape[1]
    if whole.dtype != object and target.dtype != object:
        away = max(_widest(whole), _widest(target) + limit)
        if 4 * n * away < ROOM and away < DOUBLE and (n * _widest(whole - whole[:, :1])) ** 2 * 2 < ROOM:
            return Group(whole, target, exponent)
    return Group(whole.astype(object), target.astype(object), exponent)


def _widest(numbers: np.ndarray) -> int:
    return max(abs(int(numbers.min())), abs(int(numbers.max()))) if numbers.size else 0


def _share(step: Any, most: Any) -> float:
    return float(step) / float(most) if most < DOUBLE else int(step) / int(most)
