"""The sign test and the signed-rank test of many samples of equal size: the same laws as for one, each looked up once.

Null distributions are shared between samples with the same ranks, binomial tails between samples with the same counts.
"""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np

from meanlab.procedures.decision import p_value, tail
from meanlab.procedures.distributions import fair_critical
from meanlab.procedures.group import Group
from meanlab.procedures.sign import Counts
from meanlab.procedures.sign import tails as sign_tails
from meanlab.procedures.signed_rank import Null

MOST_SUMS = 2**20  # Walsh sums sorted at a time


@dataclass(frozen=True)
class Counted:
    """What a counting test comes to, arrays of shape (samples,); nan for an end or estimate that there is not.

    statistic  the number above the target, or W⁺
    decided    False where a rejection rests on leaving out units equal to the target
    low, high, difference   ends of the interval, and estimate minus target, in the unit of the readings
    """

    statistic: np.ndarray
    p: np.ndarray
    decided: np.ndarray
    low: np.ndarray
    high: np.ndarray
    difference: np.ndarray


def sign_tests(group: Group, alternative: str, alpha: float) -> Counted:
    """Return the sign test of each sample; see `sign.sign_test`."""
    counts, inverse = _counts(group)
    judged = [_sign(one, alternative, alpha) for one in counts]
    p, decided = (np.array(side)[inverse] for side in zip(*judged, strict=True))
    ordered = np.sort(group.whole, axis=1)
    n, nowhere = group.n, np.full(len(group), np.nan)
    j = fair_critical(tail(alternative, alpha), n)
    return Counted(
        statistic=np.array([float(one.above) for one in counts])[inverse],
        p=p,
        decided=decided,
        low=nowhere if j < 0 or alternative == "less" else group.value(ordered[:, j]),
        high=nowhere if j < 0 or alternative == "greater" else group.value(ordered[:, n - 1 - j]),
        difference=group.value(ordered[:, (n - 1) // 2] + ordered[:, n // 2] - 2 * group.target, 2),
    )


def sign_p(group: Group, side: str) -> np.ndarray:
    """Return the one-sided p of the sign test of each sample; ``side`` "greater" or "less"."""
    counts, inverse = _counts(group)
    pick = 0 if side == "greater" else 1
    return np.array([sign_tails(*one.worst(side))[pick] for one in counts])[inverse]


def _counts(group: Group) -> tuple[list[Counts], np.ndarray]:
    """Return the counts that occur, and which of them each sample has."""
    target = group.target[:, np.newaxis]
    below, above = (np.count_nonzero(side, axis=1) for side in (group.whole < target, group.whole > target))
    found, inverse = np.unique(below * (group.n + 1) + above, return_inverse=True)
    pairs = [divmod(int(code), group.n + 1) for code in found]
    return [Counts(low, high, group.n - low - high, 0) for low, high in pairs], inverse


def _sign(counts: Counts, alternative: str, alpha: float) -> tuple[float, bool]:
    p = float(p_value(alternative, *sign_tails(*counts.worst(alternative))))
    against = float(p_value(alternative, *sign_tails(*counts.worst(alternative, with_ties=True))))
    return p, not (counts.tied and p < alpha <= against)


def signed_rank_tests(group: Group, alternative: str, alpha: float, null: Null) -> Counted:
    """Return the signed-rank test of each sample, exact, n ≤ 200; see `signed_rank.signed_rank`."""
    observed, p_greater, p_less = _rank_tails(group.differences, null)
    centre = _hodges_lehmann(group.whole)
    low, high = (_ends(group, alternative, alpha, null, side) for side in (0, 1))
    return Counted(
        statistic=observed / 2,
        p=p_value(alternative, p_greater, p_less),
        decided=np.ones(len(group), dtype=bool),
        low=low,
        high=high,
        difference=group.value(centre - 4 * group.target, 4),
    )


def signed_rank_p(group: Group, side: str, null: Null) -> np.ndarray:
    """Return the one-sided p of the signed-rank test of each sample; ``side`` "greater" or "less"."""
    return _rank_tails(group.differences, null)[1 if side == "greater" else 2]


def _rank_tails(differences: np.ndarray, null: Null) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Return the doubled W⁺ of each row of differences with P(W⁺ ≥ it) and P(W⁺ ≤ it)."""
    order = np.argsort(np.abs(differences), axis=1)
    signed = np.take_along_axis(differences, order, axis=1)
    ranks = _doubled_midranks(np.abs(signed))
    ranks[signed == 0] = 0
    observed = np.where(signed > 0, ranks, 0).sum(axis=1)
    patterns, inverse = np.unique(ranks, axis=0, return_inverse=True)
    inverse = inverse.reshape(-1)
    by_pattern = np.argsort(inverse, kind="stable")
    upper, lower = np.empty(len(ranks)), np.empty(len(ranks))
    ends = np.cumsum(np.bincount(inverse, minlength=len(patterns)))
    for pattern, start, end in zip(patterns, [0, *ends[:-1]], ends, strict=True):
        rows = by_pattern[start:end]
        at_most, at_least = null.sums(pattern[pattern > 0])
        upper[rows], lower[rows] = at_least[observed[rows]], at_most[observed[rows]]
    return observed, upper, lower


def _doubled_midranks(rising: np.ndarray) -> np.ndarray:
    """Return twice the midranks of rows of sizes in rising order, shape (samples, n)."""
    n = rising.shape[1]
    place = np.arange(n)
    new = np.ones(rising.shape, dtype=bool)
    new[:, 1:] = rising[:, 1:] != rising[:, :-1]
    starts = np.maximum.accumulate(np.where(new, place, 0), axis=1)
    last = np.ones(rising.shape, dtype=bool)
    last[:, :-1] = new[:, 1:]
    ends = np.minimum.accumulate(np.where(last, place, n)[:, ::-1], axis=1)[:, ::-1]
    return np.asarray(starts + ends + 2)


def _hodges_lehmann(whole: np.ndarray) -> np.ndarray:
    """Return four times the median of the Walsh averages of each row."""
    n = whole.shape[1]
    rows, columns = np.triu_indices(n)
    first, second = (len(rows) - 1) // 2, len(rows) // 2
    found = np.empty(len(whole), dtype=whole.dtype)
    step = max(1, MOST_SUMS // len(rows))
    for start in range(0, len(whole), step):
        part = whole[start : start + step]
        sums = np.sort(part[:, rows] + part[:, columns], axis=1)
        found[start : start + step] = sums[:, first] + sums[:, second]
    return found


def _ends(group: Group, alternative: str, alpha: float, null: Null, side: int) -> np.ndarray:
    """Return the lower (side 0) or upper (1) ends of {μ: p(μ) ≥ α}; nan for one that does not exist."""
    found = np.full(len(group), np.nan)
    if alternative == ("less", "greater")[side]:
        return found
    sign = 1 - 2 * side
    fourfold = group.whole * 4
    each = tail(alternative, alpha)

    def rejects(rows: np.ndarray, a: np.ndarray) -> np.ndarray:
        tails = _rank_tails(fourfold[rows] - (sign * (2 * a + 1))[:, np.newaxis], null)
        return tails[1 + side] < each

    ends = (2 * group.whole.min(axis=1), 2 * group.whole.max(axis=1))
    low, high = ends if side == 0 else (-ends[1], -ends[0])
    rows = np.arange(len(group))
    rows = rows[rejects(rows, low - 1)]
    if len(rows):
        a = _last_where(lambda some, at: rejects(rows[some], at), low[rows] - 1, high[rows] + 1) + 1
        found[rows] = group.value(sign * 2 * a, 4)
    return found


def _last_where(holds: Callable[[np.ndarray, np.ndarray], np.ndarray], low: np.ndarray, high: np.ndarray) -> np.ndarray:
    """Return for each row the largest whole number in [low, high) up to which a condition holds; it holds at low."""
    low, high = low.copy(), high.copy()
    while True:
        open_rows = np.flatnonzero(high - low > 1)
        if not len(open_rows):
            return low
        middle = (low[open_rows] + high[open_rows]) // 2
        yes = holds(open_rows, middle)
        low[open_rows[yes]] = middle[yes]
        high[open_rows[~yes]] = middle[~yes]
