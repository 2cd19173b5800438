"""The signed rank against enumeration of every assignment of signs, with ties and zeros, and against scipy without."""

from bisect import bisect_left, bisect_right
from fractions import Fraction
from functools import cache
from itertools import combinations_with_replacement, product
from math import inf
from statistics import median

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from made_samples import fractions_of, sample_of
from scipy import stats

from meanlab.procedures import signed_rank as rooms
from meanlab.procedures.signed_rank import Approximate, doubled_midranks, hodges_lehmann, signed_rank

STEADY = settings(max_examples=60, deadline=None, derandomize=True, database=None)
ALTERNATIVES = ("two-sided", "greater", "less")

# few distinct values, so that ties and zeros abound
tied_readings = st.lists(st.integers(-4, 6), min_size=2, max_size=10).filter(lambda values: len(set(values)) > 1)


def midranks(sizes: list[Fraction]) -> list[Fraction]:
    """Return for each size the mean of the places it shares, by counting."""
    return [
        Fraction(2 * sum(other < size for other in sizes) + sum(other == size for other in sizes) + 1, 2)
        for size in sizes
    ]


@cache
def sums_of_all_signs(ranks: tuple[Fraction, ...]) -> list[Fraction]:
    """Return the sum of the positive ranks for each of the 2^n assignments of signs."""
    return [
        sum(rank for rank, up in zip(ranks, signs, strict=True) if up) for signs in product((0, 1), repeat=len(ranks))
    ]


def enumerated(values, target) -> tuple[Fraction, Fraction, Fraction]:
    """Return W⁺ and both exact tails by enumeration; zeros are ranked and then left out (Pratt 1959)."""
    differences = [Fraction(value) - Fraction(target) for value in values]
    ranks = midranks([abs(one) for one in differences])
    counted = tuple(rank for rank, one in zip(ranks, differences, strict=True) if one)
    observed = sum(rank for rank, one in zip(ranks, differences, strict=True) if one > 0)
    sums = sums_of_all_signs(tuple(sorted(counted)))
    above, below = sum(one >= observed for one in sums), sum(one <= observed for one in sums)
    return Fraction(observed), Fraction(above, len(sums)), Fraction(below, len(sums))


def texts_of(values) -> list[str]:
    """Return whole numbers as readings with two decimals."""
    return [f"{value}e-2" for value in values]


@STEADY
@given(st.lists(st.integers(-4, 6), min_size=2, max_size=12).filter(lambda v: len(set(v)) > 1), st.integers(-5, 7))
def test_tails_are_those_of_the_enumeration(values, target):
    """W⁺ and both tails equal those of all 2^n assignments of signs to the observed ranks, to the last bit."""
    observed, above, below = enumerated(values, target)
    test = signed_rank(sample_of(texts_of(values), f"{target}e-2"), "two-sided", 0.05)
    assert Fraction(test.statistic) == observed
    assert (Fraction(test.p_greater), Fraction(test.p_less)) == (above, below)
    assert Fraction(test.p_value) == min(Fraction(1), 2 * min(above, below))


@STEADY
@given(tied_readings, st.sampled_from(ALTERNATIVES), st.sampled_from([0.01, 0.05, 0.1, 0.25, 0.45]))
def test_critical_values_and_smallest_p_are_those_of_the_enumeration(values, alternative, alpha):
    """The critical sums are the outermost that still reject; the smallest p is that of the most extreme signs."""
    test = signed_rank(sample_of(texts_of(values), "1e-2"), alternative, alpha)
    differences = [value - 1 for value in values]
    ranks = midranks([Fraction(abs(one)) for one in differences])
    sums = sorted(sums_of_all_signs(tuple(sorted(r for r, one in zip(ranks, differences, strict=True) if one))))
    most = Fraction(alpha) / (2 if alternative == "two-sided" else 1) * len(sums)
    lower = [one for one in set(sums) if bisect_right(sums, one) < most]
    upper = [one for one in set(sums) if len(sums) - bisect_left(sums, one) < most]
    expected = (
        float(max(lower)) if lower and alternative != "greater" else None,
        float(min(upper)) if upper and alternative != "less" else None,
    )
    assert test.critical == expected
    assert test.smallest_p == min(1, (2 if alternative == "two-sided" else 1) / len(sums))


def interval_by_grid(values, alternative, alpha) -> tuple[Fraction | float, Fraction | float]:
    """Return the closure of {μ: p(μ) ≥ α} over targets at every quarter step; p changes at half steps only."""
    quarter, span = Fraction(1, 4), max(values) - min(values)
    grid = [min(values) - 1 + quarter * step for step in range(4 * span + 9)]
    each = Fraction(alpha) / (2 if alternative == "two-sided" else 1)
    inside = []
    for target in grid:
        _, above, below = enumerated(values, target)
        kept = (alternative == "less" or above >= each) and (alternative == "greater" or below >= each)
        if kept:
            inside.append(target)
    low, high = inside[0], inside[-1]
    low = -inf if low == grid[0] else low - quarter if low.denominator == 4 else low
    high = inf if high == grid[-1] else high + quarter if high.denominator == 4 else high
    assert inside == [target for target in grid if inside[0] <= target <= inside[-1]], "p is not monotone"
    return low, high


@STEADY
@given(
    st.lists(st.integers(-3, 5), min_size=2, max_size=8).filter(lambda values: len(set(values)) > 1),
    st.sampled_from(ALTERNATIVES),
    st.sampled_from([0.05, 0.1, 0.25, 0.45]),
)
def test_the_interval_is_the_set_of_targets_that_are_not_rejected(values, alternative, alpha):
    """The ends are those of {μ: p(μ) ≥ α} over a grid of targets, each tried by enumeration."""
    low, high = interval_by_grid(values, alternative, alpha)
    interval = signed_rank(sample_of(texts_of(values), "0"), alternative, alpha).interval
    assert interval.low == (None if low == -inf else float(low / 100))
    assert interval.high == (None if high == inf else float(high / 100))


@pytest.mark.parametrize("n", [5, 6, 9, 12, 25, 50])
@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_without_ties_p_is_that_of_scipy(n, alternative):
    """scipy 1.17 wilcoxon, method "exact", on readings without ties and zeros."""
    values = np.random.default_rng(n).permutation(np.arange(1, n + 1) * 7 % 101 + 0.5) * np.where(
        np.random.default_rng(n + 1).random(n) < 0.6, 1, -1
    )
    assert len(set(np.abs(values))) == n
    expected = stats.wilcoxon(values, alternative=alternative, method="exact")
    test = signed_rank(sample_of([str(value) for value in values]), alternative, 0.05)
    assert test.p_value == pytest.approx(expected.pvalue, rel=1e-12)
    assert test.approximate is False


def smaller_sum_distribution(n: int) -> list[int]:
    """Return how many subsets of 1…n have each sum, by counting in whole numbers."""
    ways = [1] + [0] * (n * (n + 1) // 2)
    for rank in range(1, n + 1):
        for total in range(len(ways) - 1, rank - 1, -1):
            ways[total] += ways[total - rank]
    return ways


@pytest.mark.parametrize("n", [53, 100, 200])
def test_long_convolutions_keep_twelve_digits(n):
    """Up to n = 200 each tail agrees with whole-number counting, down to 2^(−n)."""
    ways, total = smaller_sum_distribution(n), n * (n + 1) // 2
    for smaller in (0, 1, 10, total // 4, total // 2 - 7, total // 2):
        signs, rest = [-1] * n, smaller
        for rank in range(n, 0, -1):  # the largest ranks first: any sum up to n(n + 1)/2 can be made
            if rank <= rest:
                signs[rank - 1], rest = 1, rest - rank
        values = [str(sign * rank) for sign, rank in zip(signs, range(1, n + 1), strict=True)]
        test = signed_rank(sample_of(values), "less", 0.05)
        assert test.statistic == smaller
        assert abs(Fraction(test.p_less) / Fraction(sum(ways[: smaller + 1]), 2**n) - 1) < 1e-12


@pytest.mark.parametrize("n", [201, 300])
def test_the_approximation_above_200_is_close_to_the_exact_tail(n):
    """Just above n = 200 the tail is within 0.2 % of whole-number counting down to p = 1e-3, 2 % down to 1e-5."""
    ways, total = smaller_sum_distribution(n), n * (n + 1) // 2
    law, running, tried = Approximate(np.arange(2, 2 * n + 1, 2)), 0, 0
    for observed, count in enumerate(ways[: total // 2]):
        running += count
        exact = float(Fraction(running, 2**n))
        if exact > 1e-5 and observed % 37 == 0:
            assert law.upper(law.centre - 2 * observed) == pytest.approx(exact, rel=2e-3 if exact > 1e-3 else 0.02)
            tried += 1
    assert tried > 10


@STEADY
@given(st.lists(st.integers(-9, 9), min_size=1, max_size=25), st.booleans())
def test_the_estimate_is_the_median_of_all_walsh_averages(values, by_counting):
    """Hodges–Lehmann: the median of (xᵢ + xⱼ)/2, i ≤ j, listed or found by counting pairs."""
    pairs = combinations_with_replacement([Fraction(value) for value in values], 2)
    expected = median((first + second) / 2 for first, second in pairs)
    before = rooms.LISTED_UP_TO
    rooms.LISTED_UP_TO = 0 if by_counting else before
    try:
        assert Fraction(hodges_lehmann(sample_of([str(value) for value in values])), 4) == expected
    finally:
        rooms.LISTED_UP_TO = before


def test_decimals_make_the_ties_that_floating_point_breaks():
    """0.3 − 0.2 and 0.2 − 0.1 are tied as decimals; as doubles they are not, and W⁺ and p would change."""
    assert 0.3 - 0.2 != 0.2 - 0.1
    test = signed_rank(sample_of(["0.3", "0.1", "0.6"], "0.2"), "greater", 0.05)
    assert test.statistic == 1.5 + 3
    assert test.p_greater == float(enumerated([3, 1, 6], 2)[1])
    assert doubled_midranks(sample_of(["0.3", "0.1", "0.6"], "0.2").differences).tolist() == [3, 3, 6]


def test_a_huge_offset_changes_nothing():
    """Readings beyond 64 bits have the ranks, p and interval of the same readings near 0."""
    near, offset = ["1", "4", "4", "9", "-2", "3"], 10**30
    far = sample_of([str(offset + int(text)) for text in near], str(offset))
    one, other = (signed_rank(sample, "two-sided", 0.1) for sample in (sample_of(near), far))
    assert (one.statistic, one.p_value, one.critical) == (other.statistic, other.p_value, other.critical)
    assert one.offsets == other.offsets


def test_critical_sums_of_published_tables():
    """Critical values of the smaller sum, one-sided 2.5 %, n = 6…25: OEIS A226330, as the printed tables have them."""
    table = [0, 2, 3, 5, 8, 10, 13, 17, 21, 25, 29, 34, 40, 46, 52, 58, 65, 73, 81, 89]
    for n, expected in enumerate(table, 6):
        test = signed_rank(sample_of([str(rank) for rank in range(1, n + 1)]), "less", 0.025)
        # OEIS A226330 admits P ≤ 2.5 %; no tail equals it exactly, so that "<" gives the same
        assert test.critical == (expected, None)


def test_fractions_are_read_as_typed():
    """The helper of these tests reads texts by the standard library alone."""
    assert fractions_of(["4e-2", "0.04"]) == [Fraction(1, 25)] * 2
