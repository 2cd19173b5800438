"""The law that is drawn under the null hypothesis, against closed forms, enumeration and scipy."""

from itertools import product
from math import comb, inf

import pytest
from hypothesis import given, settings
from made_tests import ALTERNATIVES, alternatives, levels, made, procedures, targets, whole_numbers
from scipy import stats

from meanlab.pictures.null_law import MOST_BARS, drawn_statistic, null_law

TWELVE = [1, -3, 4, 9, -2, 6, 12, 5, -7, 8, 3, 2]
TIED = [3, 3, -3, 5, 5, 0, -1, 2, 2]


def size_of(alternative: str, alpha: float) -> float:
    return alpha / 2 if alternative == "two-sided" else alpha


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("alpha", [0.05, 0.01, 0.001])
@pytest.mark.parametrize(("procedure", "law"), [("t", stats.t(11)), ("z", stats.norm())])
def test_each_region_of_t_and_z_has_its_share_of_the_level(procedure, law, alternative, alpha):
    """Areas add up to the significance level, and each is that tail of scipy's distribution beyond its bound."""
    regions = null_law(made(procedure, TWELVE, 0, alternative, alpha)).regions
    assert sum(region.area for region in regions) == pytest.approx(alpha, abs=1e-9)
    for region in regions:
        tail = law.sf(region.bound) if region.upper else law.cdf(region.bound)
        assert region.area == pytest.approx(float(tail), abs=1e-12)
        assert region.area == pytest.approx(size_of(alternative, alpha), abs=1e-9)


def test_the_guarded_t_never_takes_more_than_its_share():
    """Each region of the guarded t lies beyond that of t, so its area under t(n − 1) is at most α/2."""
    skewed = [1, 2, 2, 3, 3, 4, 5, 6, 9, 14, 25, 60]
    regions = null_law(made("guarded_t", skewed, 8)).regions
    areas = [region.area for region in regions]
    assert areas == [pytest.approx(float(stats.t(11).sf(abs(region.bound))), abs=1e-12) for region in regions]
    assert all(area <= 0.025 + 1e-12 for area in areas)
    assert min(areas) < 0.02


@pytest.mark.parametrize("readings", [TWELVE[:10], TIED])
@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_signed_rank_bars_are_the_enumerated_distribution(readings, alternative):
    """Every bar is the share of sign patterns that give its sum of ranks (all 2ⁿ′ patterns, one by one)."""
    test = made("signed_rank", readings, 0, alternative)
    law = null_law(test)
    counts: dict[float, int] = {}
    for signs in product((0, 1), repeat=len(test.null_ranks)):
        total = sum(rank for rank, sign in zip(test.null_ranks, signs, strict=True) if sign) / 2
        counts[total] = counts.get(total, 0) + 1
    share = {total: count / 2 ** len(test.null_ranks) for total, count in counts.items()}
    assert {(bar.low + bar.high) / 2: bar.probability for bar in law.bars} == pytest.approx(share, abs=1e-12)
    for region in law.regions:
        assert region.area == pytest.approx(sum(p for total, p in share.items() if region.holds(total)), abs=1e-9)
        assert region.area < size_of(alternative, 0.05)


@pytest.mark.parametrize("n", [5, 6, 12, 40])
def test_sign_bars_are_binomial(n):
    """Every bar is C(n, k)/2ⁿ; the region is the widest pair of tails below α/2 each."""
    law = null_law(made("sign", list(range(1, n + 1)), 0))
    assert [bar.probability for bar in law.bars] == pytest.approx([comb(n, k) / 2**n for k in range(n + 1)], abs=1e-15)
    each = [float(stats.binom(n, 0.5).cdf(k)) for k in range(n)]
    expected = max((p for p in each if p < 0.025), default=None)
    assert [region.area for region in law.regions] == pytest.approx(
        [] if expected is None else [expected] * 2, abs=1e-9
    )


@pytest.mark.parametrize("procedure", ["signed_rank", "sign"])
@pytest.mark.parametrize("n", [3, 7, 30, 150])
@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_bars_sum_to_one_and_hatched_bars_to_the_region(procedure, n, alternative):
    """Binning loses no probability and never mixes what rejects with what does not; bars do not overlap."""
    readings = [(-1) ** i * (i + 1) + i // 3 for i in range(n)]
    law = null_law(made(procedure, readings, 2, alternative, 0.2))
    assert sum(bar.probability for bar in law.bars) == pytest.approx(1, abs=1e-9)
    hatched = sum(bar.probability for bar in law.bars if bar.rejects)
    assert hatched == pytest.approx(sum(region.area for region in law.regions), abs=1e-9)
    assert len(law.bars) <= MOST_BARS + 2
    assert all(a.high <= b.low + 1e-9 for a, b in zip(law.bars, law.bars[1:], strict=False))


def test_many_readings_are_drawn_by_the_normal_curve_and_say_so():
    """Above the exact range the signed rank has the mean and variance of its ranks (Wilcoxon 1945) and is marked."""
    n = 210
    law = null_law(made("signed_rank", [(-1) ** i * (3 * i + 1) for i in range(n)], 0))
    assert law.approximate
    assert law.centre == n * (n + 1) / 4
    assert law.spread == pytest.approx((n * (n + 1) * (2 * n + 1) / 24) ** 0.5, rel=1e-12)
    assert [region.area for region in law.regions] == pytest.approx([0.025] * 2, abs=5e-4)


@settings(max_examples=120, deadline=None)
@given(procedures, whole_numbers, targets, alternatives, levels)
def test_the_statistic_lies_in_the_shaded_region_exactly_where_the_test_rejects(
    procedure, x, target, alternative, alpha
):
    """Shading follows the rejection for every procedure and alternative."""
    test = made(procedure, x, target, alternative, alpha)
    law = null_law(test)
    place = drawn_statistic(test, law)
    assert any(region.holds(place) for region in law.regions) == test.reject
    assert place == pytest.approx(test.statistic, rel=1e-12, abs=1e-12)


@settings(max_examples=60, deadline=None)
@given(procedures, whole_numbers, targets, alternatives, levels)
def test_regions_are_those_of_the_alternative(procedure, x, target, alternative, alpha):
    """A lower region only where a low value rejects, an upper one only where a high one does; bounds are critical."""
    test = made(procedure, x, target, alternative, alpha)
    bounds = [region.bound for region in null_law(test).regions]
    assert bounds == [end for end in test.critical if end is not None]
    for region in null_law(test).regions:
        assert (region.low, region.high) == ((region.bound, inf) if region.upper else (-inf, region.bound))
        assert region.upper is not (alternative == "less") or alternative == "two-sided"
