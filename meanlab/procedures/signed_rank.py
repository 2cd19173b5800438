"""The signed-rank test: sums of ranks of the differences from the target, exact for ties, zeros by Pratt (1959)."""

from collections.abc import Callable
from math import erfc, exp, pi, sqrt

import numpy as np

from meanlab.core.results import Interval, Test
from meanlab.procedures.decision import p_value, rejecting_sides, tail
from meanlab.procedures.sample import Sample

EXACT_UP_TO = 200
LISTED_UP_TO = 1000
ESTIMATED_UP_TO = 20_000


def doubled_midranks(differences: np.ndarray) -> np.ndarray:
    """Return twice the midranks of |d|, whole numbers, zeros ranked too; shape (n,).

    >>> doubled_midranks(np.array([0, -2, 2, 5])).tolist()
    [2, 5, 5, 8]
    """
    sizes = np.abs(differences)
    if sizes.dtype != object and int(sizes.max()) < len(sizes):  # many on a short scale are counted, not sorted
        counts = np.bincount(sizes)
        up_to = np.cumsum(counts)
        return (2 * up_to - counts + 1)[sizes]
    order = np.argsort(sizes, kind="stable")
    ordered = sizes[order]
    starts = np.flatnonzero(np.concatenate(([True], ordered[1:] != ordered[:-1])))
    ends = np.append(starts[1:], len(ordered))
    ranks = np.empty(len(sizes), dtype=np.int64)
    ranks[order] = np.repeat(starts + ends + 1, ends - starts)
    return ranks


def null_distribution(doubled_ranks: tuple[int, ...]) -> np.ndarray:
    """Return P(2·W⁺ = k) for k = 0…Σ of the doubled ranks, each rank positive with probability ½.

    Exact convolution; positive terms only, so each probability keeps about 14 digits.

    >>> null_distribution((2, 4)).tolist()
    [0.25, 0.0, 0.25, 0.0, 0.25, 0.0, 0.25]
    """
    chance = np.zeros(sum(doubled_ranks) + 1)
    chance[0] = 1.0
    reach = 0
    for rank in sorted(doubled_ranks):
        reach += rank
        taken = chance[: reach + 1] * 0.5
        chance[: reach + 1] = taken
        chance[rank : reach + 1] += taken[: reach + 1 - rank]
    return chance


class Null:
    """Null distributions of W⁺ for the rank patterns met in one analysis; the pattern without ties is met often."""

    def __init__(self) -> None:
        self._seen: dict[bytes, tuple[np.ndarray, np.ndarray]] = {}

    def sums(self, ranks: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
        """Return P(2·W⁺ ≤ k) and P(2·W⁺ ≥ k) for k = 0…Σ."""
        pattern = np.sort(ranks)
        key = pattern.tobytes()
        if key not in self._seen:
            chance = null_distribution(tuple(pattern.tolist()))
            lower = np.cumsum(chance)
            self._seen[key] = lower, lower[::-1]  # the distribution is symmetric
        return self._seen[key]

    def tails(self, differences: np.ndarray) -> tuple[float, float]:
        """Return P(W⁺ ≥ observed) and P(W⁺ ≤ observed)."""
        return self.tails_of(*counted_ranks(differences), len(differences))

    def tails_of(self, ranks: np.ndarray, observed: int, n: int) -> tuple[float, float]:
        """Return the same of the doubled ranks that count and their observed positive sum, among n units."""
        if n > EXACT_UP_TO:
            law = Approximate(ranks)
            return law.upper(observed - law.centre), law.upper(law.centre - observed)
        lower, upper = self.sums(ranks)
        return float(upper[observed]), float(lower[observed])


def counted_ranks(differences: np.ndarray) -> tuple[np.ndarray, int]:
    """Return the doubled midranks of the differences that are not 0, and the sum of those of positive ones."""
    ranks = doubled_midranks(differences)
    return ranks[differences != 0], int(ranks[differences > 0].sum())


class Approximate:
    """2·W⁺ by the normal approximation with ties, continuity and fourth-cumulant terms.

    The variance is Σr²/4 over the midranks r, the fourth cumulant −Σr⁴/8; the Edgeworth term of an upper tail is
    φ(z)·(z³ − 3z)·κ₄/(24σ⁴), taken as a factor exp(term/tail) so that no far tail turns negative. The continuity
    correction is half of the step between neighbouring sums.
    """

    def __init__(self, ranks: np.ndarray) -> None:
        doubled = ranks.astype(float)
        squares = doubled * doubled
        self.variance = float(squares.sum()) / 4
        self.kurtosis = -float(squares @ squares) / 8 / self.variance**2 if self.variance else 0.0
        self.step = 1.0 if np.any(ranks & 1) else 2.0
        self.centre = float(doubled.sum()) / 2

    def upper(self, distance: float) -> float:
        """Return the probability of a sum that lies this far above the centre, or farther."""
        if self.variance == 0:
            return 1.0
        z = (distance - self.step / 2) / sqrt(self.variance)
        plain = erfc(z / sqrt(2)) / 2
        if plain < 1e-300:
            return 0.0
        edge = exp(-z * z / 2) / sqrt(2 * pi) * (z**3 - 3 * z) * self.kurtosis / 24
        return min(1.0, plain * exp(edge / plain))


def signed_rank(sample: Sample, alternative: str, alpha: float, estimate_always: bool = False) -> Test:
    """Return the signed-rank test of the centre of symmetry; needs s > 0.

    W⁺ is the sum of the ranks of the positive differences; zeros are ranked and then left out (Pratt 1959). The null
    distribution is exact and conditional on the observed ranks up to n = 200, approximate above. The estimate is
    the Hodges–Lehmann median of the Walsh averages; the interval is the closure of {μ: p(μ) ≥ α} of this very test.
    Both are left away above n = 20,000 unless ``estimate_always``.
    Source: Wilcoxon 1945; Pratt 1959; Hodges & Lehmann 1963.
    """
    null = Null()
    counted, observed = counted_ranks(sample.differences)
    exact = sample.n <= EXACT_UP_TO
    p_greater, p_less = null.tails_of(counted, observed, sample.n)
    p = float(p_value(alternative, p_greater, p_less))
    rightmost = 0.5 ** len(counted)
    estimated = estimate_always or sample.n <= ESTIMATED_UP_TO
    zeros = sample.n - len(counted)
    centre = hodges_lehmann(sample) if estimated else None
    low, high = _ends(sample, null, alternative, alpha) if estimated else (None, None)
    attained = 1 - _size_without_ties(sample.n, null, alternative, alpha)
    return Test(
        procedure="signed_rank",
        parameter="centre of symmetry",
        alternative=alternative,
        significance=alpha,
        n=sample.n,
        n_used=len(counted),
        statistic=observed / 2,
        df=None,
        p_value=p,
        p_greater=p_greater,
        p_less=p_less,
        critical=critical_sums(counted, null, alternative, alpha, exact),
        reject=p < alpha,
        estimate=_value(sample, centre),
        standard_error=None,
        interval=Interval(_value(sample, low), _value(sample, high), 1 - alpha, attained),
        offsets=(_value(sample, centre, True), _value(sample, low, True), _value(sample, high, True)),
        smallest_p=float(p_value(alternative, rightmost, rightmost)),
        approximate=not exact,
        null_ranks=tuple(np.sort(counted).tolist()) if exact else (),
        null_variance=float(np.sum(counted.astype(float) ** 2)) / 16,
        notes=_remarks(zeros, exact, estimated),
    )


def _remarks(zeros: int, exact: bool, estimated: bool) -> tuple[str, ...]:
    remarks = []
    if zeros:
        equal = "1 reading equal" if zeros == 1 else f"{zeros} readings equal"
        remarks.append(f"{equal} to the target ranked and then left out (Pratt 1959).")
    if not exact:
        remarks.append("p by the normal approximation with corrections for ties, steps and the fourth cumulant.")
    if not estimated:
        remarks.append(
            f"No estimate and interval above {ESTIMATED_UP_TO:,} readings unless this procedure is asked for."
        )
    return tuple(remarks)


def critical_sums(
    ranks: np.ndarray, null: Null, alternative: str, alpha: float, exact: bool
) -> tuple[float | None, float | None]:
    """Return the largest lower and smallest upper sum W⁺ that reject; None where there is none."""
    total = int(ranks.sum())
    each = tail(alternative, alpha)
    below, above = rejecting_sides(alternative)
    if exact:
        lower, _ = null.sums(ranks)
        rejecting = int(np.searchsorted(lower, each, side="left")) - 1
        while rejecting >= 0 and lower[rejecting] == (lower[rejecting - 1] if rejecting else 0.0):
            rejecting -= 1
    else:
        law = Approximate(ranks)
        rejecting = _last_where(lambda k: law.upper(law.centre - k) < each, -1, total // 2)
        rejecting -= rejecting % 2 if law.step == 2 else 0
    if rejecting < 0:
        return None, None
    return (rejecting / 2 if below else None), ((total - rejecting) / 2 if above else None)


def _last_where(holds: Callable[[int], bool], low: int, high: int) -> int:
    """Return the largest whole number in [low, high) up to which a condition holds; it holds at ``low``."""
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (middle, high) if holds(middle) else (low, middle)
    return low


def _value(sample: Sample, fourfold: int | None, from_target: bool = False) -> float | None:
    """Return a quarter of a whole number, or its distance from the target, in the unit of the readings."""
    if fourfold is None:
        return None
    return sample.value(fourfold - 4 * sample.target if from_target else fourfold, 4)


def _ends(sample: Sample, null: Null, alternative: str, alpha: float) -> tuple[int | None, int | None]:
    """Return four times the ends of the interval on the whole-number scale; None for an end that does not exist."""
    each = tail(alternative, alpha)
    low = None if alternative == "less" else _end(sample, null, each, 0)
    high = None if alternative == "greater" else _end(sample, null, each, 1)
    return low, high


def _end(sample: Sample, null: Null, each: float, side: int) -> int | None:
    """Return four times an end of {μ: p(μ) ≥ α}: it is half of a whole number a, found by bisection.

    p changes only at Walsh averages, halves of whole numbers, so it is tried in the gap beside each, at a ± ½.
    """
    smallest, largest = 2 * int(sample.whole.min()), 2 * int(sample.whole.max())
    fourfold = _room_for_four(sample.whole)

    def rejects(a: int) -> bool:
        if side == 0:
            return null.tails(fourfold - (2 * a + 1))[0] < each
        return null.tails(fourfold - (2 * -a - 1))[1] < each

    low, high = (smallest, largest) if side == 0 else (-largest, -smallest)
    if not rejects(low - 1):
        return None
    a = _last_where(rejects, low - 1, high + 1) + 1
    return 2 * a if side == 0 else -2 * a


def _room_for_four(whole: np.ndarray) -> np.ndarray:
    if whole.dtype != object and int(np.max(np.abs(whole))) < 2**59:
        return whole * 4
    return whole.astype(object) * 4


def _size_without_ties(n: int, null: Null, alternative: str, alpha: float) -> float:
    """Return the probability that this test rejects a true target when no ranks are tied."""
    each = tail(alternative, alpha)
    if n > EXACT_UP_TO:
        return alpha
    lower, _ = null.sums(np.arange(2, 2 * n + 1, 2))
    rejecting = int(np.searchsorted(lower, each, side="left")) - 1
    size = float(lower[rejecting]) if rejecting >= 0 else 0.0
    return 2 * size if alternative == "two-sided" else size


def hodges_lehmann(sample: Sample) -> int:
    """Return four times the median of the n(n + 1)/2 Walsh averages (xᵢ + xⱼ)/2, i ≤ j, on the whole-number scale.

    Up to 1,000 units the averages are listed; above, the middle ones are found by counting pairs.
    """
    n = sample.n
    count = n * (n + 1) // 2
    middles = ((count - 1) // 2, count // 2)
    if n <= LISTED_UP_TO:
        rows, columns = np.triu_indices(n)
        sums = np.sort(sample.whole[rows] + sample.whole[columns])
        first, second = int(sums[middles[0]]), int(sums[middles[1]])
    else:
        ordered = np.sort(sample.whole)
        first, second = (_walsh_sum(ordered, place) for place in middles)
    return first + second


def _walsh_sum(ordered: np.ndarray, place: int) -> int:
    """Return the Walsh sum with ``place`` smaller ones in order, by bisection over whole numbers."""

    def too_small(a: int) -> bool:
        pairs = int(np.searchsorted(ordered, a - ordered, side="right").sum())
        alone = int(np.searchsorted(2 * ordered, a, side="right"))
        return (pairs + alone) // 2 <= place

    return _last_where(too_small, 2 * int(ordered[0]) - 1, 2 * int(ordered[-1]) + 1) + 1
