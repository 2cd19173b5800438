"""Samples of plain numbers, judged in blocks of equal size: from the cells to the columns of the result."""

from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal

import numpy as np

from meanlab.checks.units import units_that_differ
from meanlab.core.numbers import places, scaled
from meanlab.core.question import Question
from meanlab.many.cells import MOST_PLACES, WIDE, Cells
from meanlab.many.judging import UNTESTED, Judged, judge
from meanlab.many.one_by_one import decided_alone
from meanlab.many.samples import Samples, Targets
from meanlab.procedures.group import group_of
from meanlab.procedures.signed_rank import Null

BLOCK = 2**17  # readings judged at a time
STEP_OF_PLACES = 5
SURE = 2.0**50  # whole numbers that a product of doubles is sure to come close enough to
FARTHEST = 40  # digits before and behind the decimal sign of long numbers that are judged together


@dataclass(frozen=True)
class Block:
    """Some samples with what was found of them; ``reasons`` are those of the samples that cannot be tested."""

    samples: np.ndarray
    judged: Judged
    reasons: np.ndarray


def blocks(samples: Samples, question: Question, targets: Targets) -> Iterator[Block]:
    """Judge every sample that can be judged beside others, block by block."""
    null = Null()
    plain = np.flatnonzero((samples.counts > 0) & ~samples.odd & targets.usable)
    in_two_units = units_that_differ(samples.cells.unit, question.unit) is not None
    if samples.preparations is not None or in_two_units or not len(plain):
        return
    finest = _finest_places(samples, targets, question)[plain]
    key = samples.counts[plain] * (WIDE + 1) + (finest + STEP_OF_PLACES - 1) // STEP_OF_PLACES
    order = np.argsort(key, kind="stable")
    for alike in np.split(order, np.flatnonzero(np.diff(key[order])) + 1):
        chosen, places_of = plain[alike], int(finest[alike].max())
        size = max(1, BLOCK // int(samples.counts[chosen[0]]))
        for start in range(0, len(chosen), size):
            block = _Entries(chosen[start : start + size], places_of, samples, targets)
            found = _block(block, samples, question, targets, null)
            if found is not None:
                yield found


def _finest_places(samples: Samples, targets: Targets, question: Question) -> np.ndarray:
    """Return the most decimal places among the readings of each sample, its target and E."""
    finest = np.zeros(len(samples), dtype=int)
    filled = samples.counts > 0
    finest[filled] = np.maximum.reduceat(samples.cells.places[samples.order], samples.starts[filled])
    of_targets = np.array([0 if one is None else places(one) for one in targets.exact] + [0])
    limit = question.exact_number("equivalence_limit")
    return np.maximum(np.maximum(finest, of_targets[targets.code]), 0 if limit is None else places(limit))


class _Entries:
    """The numbers of samples of equal size, shape (samples, n), and which target each has."""

    def __init__(self, chosen: np.ndarray, finest: int, samples: Samples, targets: Targets) -> None:
        self.samples, self.finest = chosen, finest
        n = int(samples.counts[chosen[0]])
        self.places = samples.order[samples.starts[chosen][:, np.newaxis] + np.arange(n)]
        codes, self.which = np.unique(targets.code[chosen], return_inverse=True)
        self.targets = [targets.exact[code] or Decimal(0) for code in codes]

    def whole(self, cells: Cells, limit: Decimal | None) -> tuple[np.ndarray, np.ndarray, int, int | None] | None:
        """Return numbers, targets, their exponent and E as whole numbers; None where they span too many digits."""
        settings = self.targets if limit is None else [*self.targets, limit]
        if self.finest <= MOST_PLACES:
            numbers = cells.numbers[self.places] * 10.0**self.finest
            exact = [scaled(one, -self.finest) for one in settings]
            if np.abs(numbers).max() >= SURE or max(map(abs, exact)) >= SURE:
                return None
            whole, exponent = np.rint(numbers).astype(np.int64), -self.finest
        else:
            decimals = [cells.decimal(place) for place in self.places.reshape(-1).tolist()]
            exponent = -max(0, *map(places, decimals), *map(places, settings))
            largest = max(one.adjusted() for one in [*decimals, *settings] if one)
            if max(largest, -exponent) > FARTHEST:
                return None
            exact = [scaled(one, exponent) for one in settings]
            long = [scaled(one, exponent) for one in decimals]
            whole = np.array(long, dtype=object).reshape(self.places.shape)
        kept = np.array(exact[: len(self.targets)], dtype=whole.dtype)[self.which]
        return whole, kept, exponent, None if limit is None else exact[-1]


def _block(entries: _Entries, samples: Samples, question: Question, targets: Targets, null: Null) -> Block | None:
    found = entries.whole(samples.cells, question.exact_number("equivalence_limit"))
    if found is None:
        return None
    whole, target, exponent, limit = found
    group = group_of(whole, target, exponent, limit or 0)
    step_known = ~samples.cells.computed[entries.places].any(axis=1)
    judged = judge(group, question, step_known, limit, null)
    return Block(entries.samples, judged, _reasons(entries.samples, judged, samples, question, targets))


def _reasons(chosen: np.ndarray, judged: Judged, samples: Samples, question: Question, targets: Targets) -> np.ndarray:
    """Return why nothing can be tested: samples of equal size that scatter, or do not, have the same reason."""
    reasons = np.full(len(chosen), "", dtype=object)
    untested = judged.verdict == UNTESTED
    untested &= ~judged.beyond
    scatters = judged.numbers["s"] > 0
    for alike in (untested & scatters, untested & ~scatters):
        if alike.any():
            reasons[alike] = decided_alone(samples, int(chosen[np.flatnonzero(alike)[0]]), question, targets)[1]
    return reasons
