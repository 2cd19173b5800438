"""What the rule looks at, for many samples of equal size at once: the same names as in `route.Look`, as arrays."""

from collections.abc import Iterator
from dataclasses import dataclass
from functools import cached_property
from typing import Any, cast

import numpy as np

from meanlab.checks.facts import coarse_limit
from meanlab.checks.normality import shapiro_wilk, skewness_test
from meanlab.core.question import Question
from meanlab.procedures.group import Group
from meanlab.route import RULE, Look, cannot_run


@dataclass(frozen=True)
class Looks:
    """Samples of plain units before the rule; ``step_known`` tells whether the step of the readings is known."""

    question: Question
    group: Group
    step_known: np.ndarray
    censored: int = 0

    def rows(self, places: np.ndarray) -> "Looks":
        """Return the samples at some places."""
        return Looks(self.question, self.group.rows(places), self.step_known[places])

    @property
    def n(self) -> int:
        """Units in each sample."""
        return self.group.n

    @property
    def s(self) -> np.ndarray:
        """Experimental standard deviations."""
        return self.group.s

    @property
    def needed(self) -> np.ndarray:
        """28 + 25 g₁²."""
        return np.asarray(28 + 25 * self.group.skewness**2)

    @property
    def coarse(self) -> np.ndarray:
        """Whether the step of the readings makes the pre-test meaningless."""
        limit, declared = coarse_limit(self.n), self.question.number("resolution")
        if declared is not None:
            return np.asarray(declared / self.s > limit)
        return self.step_known & self.group.coarser_than(limit)

    @cached_property
    def shapiro_wilk(self) -> tuple[np.ndarray, np.ndarray]:
        """W and p of Shapiro–Wilk."""
        return shapiro_wilk(self.group.shifted)

    @property
    def skewness_p(self) -> np.ndarray:
        """p of D'Agostino's skewness test."""
        return skewness_test(self.group.shifted)

    @cached_property
    def can_reject(self) -> np.ndarray:
        """Whether the signed rank could reject with the units that are not equal to the target."""
        counted = np.count_nonzero(self.group.differences, axis=1)
        sides = 2.0 if self.question.alternative == "two-sided" else 1.0
        return np.asarray(sides * 0.5**counted < self.question.alpha)

    @property
    def signed_rank_can_reject(self) -> bool:
        """The same for samples that are alike in this."""
        return bool(self.can_reject.all())

    @property
    def target_is_uncertain(self) -> bool:
        """Whether the target has a standard uncertainty."""
        return bool(self.question.number("target_uncertainty"))


def procedures_for(looks: Looks) -> Iterator[tuple[np.ndarray, str | None]]:
    """Yield the procedure of the rule, or the fixed one where it can run, with the places of the samples it is for."""
    fixed = looks.question.procedure
    everywhere = np.arange(len(looks.group))
    if fixed == "rule":
        yield from _by_rule(looks, everywhere)
        return
    constant = looks.s == 0
    for places in (everywhere[constant], everywhere[~constant]):
        if len(places):
            obstacle = cannot_run(fixed, cast(Look, _One(looks.question, looks.n, float(looks.s[places[0]]))))
            yield places, None if obstacle else fixed


@dataclass(frozen=True)
class _One:
    """One of the samples that are alike in what decides whether a fixed procedure can run."""

    question: Question
    n: int
    s: float
    censored: int = 0


def _by_rule(looks: Looks, places: np.ndarray) -> Iterator[tuple[np.ndarray, str | None]]:
    """Take the rows of the rule from the top, each on the samples that no row before has fitted."""
    for row in RULE:
        fits = np.broadcast_to(row.when(cast(Look, looks)), len(places))
        if not fits.any():
            continue
        for places_of, alike in _alike(places[fits], looks.rows(fits), row.number):
            yield places_of, row.procedure(cast(Look, alike))
        places, looks = places[~fits], looks.rows(~fits)
        if not len(places):
            return


def _alike(places: np.ndarray, looks: Looks, row: int) -> Iterator[tuple[np.ndarray, Any]]:
    """Part the samples of row 11 by whether the signed rank could reject; those of every other row stay together."""
    if row != 11:
        yield places, looks
        return
    for side in (looks.can_reject, ~looks.can_reject):
        if side.any():
            yield places[side], looks.rows(side)
