"""Samples of plain numbers, judged in blocks of equal size: from the cells of the table to the columns of the result."""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from meanlab.core.numbers import places, scaled
from meanlab.core.question import Question
from meanlab.many.cells import MOST_PLACES
from meanlab.many.judging import UNTESTED, Judged, judge
from meanlab.many.one_by_one import decided_alone
from meanlab.many.samples import Samples, Targets
from meanlab.procedures.group import group_of
from meanlab.procedures.signed_rank import Null

BLOCK = 2**17  # readings judged at a time
STEP_OF_PLACES = 5
SURE = 2.0**50  # whole numbers that a product of doubles is sure to come close enough to


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
    if samples.preparations is not None or not len(plain):
        return
    finest = _finest_places(samples, targets, question)[plain]
    plain, finest = plain[finest <= MOST_PLACES], finest[finest <= MOST_PLACES]
    key = samples.counts[plain] * (MOST_PLACES + 1) + (finest + STEP_OF_PLACES - 1) // STEP_OF_PLACES
    order = np.argsort(key, kind="stable")
    for alike in np.split(order, np.flatnonzero(np.diff(key[order])) + 1):
        chosen, exponent = plain[alike], -int(finest[alike].max())
        size = max(1, BLOCK // int(samples.counts[chosen[0]]))
        for start in range(0, len(chosen), size):
            found = _block(chosen[start : start + size], exponent, samples, question, targets, null)
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


def _block(
    chosen: np.ndarray, exponent: int, samples: Samples, question: Question, targets: Targets, null: Null
) -> Block | None:
    n = int(samples.counts[chosen[0]])
    entries = samples.order[samples.starts[chosen][:, np.newaxis] + np.arange(n)]
    numbers = samples.cells.numbers[entries] * 10.0**-exponent
    codes, inverse = np.unique(targets.code[chosen], return_inverse=True)
    exact = [scaled(targets.exact[code], exponent) for code in codes]  # type: ignore[arg-type]
    given = question.exact_number("equivalence_limit")
    limit = None if given is None else scaled(given, exponent)
    if np.abs(numbers).max() >= SURE or max(map(abs, [*exact, limit or 0])) >= SURE:
        return None
    group = group_of(np.rint(numbers).astype(np.int64), np.array(exact, dtype=np.int64)[inverse], exponent, limit or 0)
    step_known = ~samples.cells.computed[entries].any(axis=1)
    judged = judge(group, question, step_known, limit, null)
    return Block(chosen, judged, _reasons(chosen, judged, samples, question, targets))


def _reasons(
    chosen: np.ndarray, judged: Judged, samples: Samples, question: Question, targets: Targets
) -> np.ndarray:
    """Return why nothing can be tested: samples of equal size that scatter, or do not, have the same reason."""
    reasons = np.full(len(chosen), "", dtype=object)
    untested = judged.verdict == UNTESTED
    untested &= ~judged.beyond
    scatters = judged.numbers["s"] > 0
    for alike in (untested & scatters, untested & ~scatters):
        if alike.any():
            reasons[alike] = decided_alone(samples, int(chosen[np.flatnonzero(alike)[0]]), question, targets)[1]
    return reasons
