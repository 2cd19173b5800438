"""The probability to find a difference, against published values, 60 digits and other libraries."""

from math import inf, sqrt

import numpy as np
import pytest
from exact_powers import combined_power, shifted_t_upper, sign_power
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats
from statsmodels.stats.power import TTestPower

import meanlab
from meanlab.planning.detection import Design, detection_power
from meanlab.planning.scatter import ratio_panels
from meanlab.planning.scatter import shifted_t_upper as ours
from meanlab.procedures.distributions import normal_critical, t_critical
from meanlab.procedures.mean_tests import Further

ALTERNATIVES = ("two-sided", "greater", "less")
THEIRS = {"two-sided": "two-sided", "greater": "larger", "less": "smaller"}

# source; difference in s; n; α; alternative; power by mpmath (non-central t, quadrature at 30 digits or more)
PUBLISHED = [
    ("statsmodels test suite TestTTPowerOneS1", 1, 30, 0.05, "two-sided", 0.9995636009612033),
    ("statsmodels test suite TestTTPowerOneS3", 1, 30, 0.05, "greater", 0.9998920102048707),
    ("statsmodels test suite TestTTPowerOneS5", 0.2, 20, 0.05, "less", 0.0060639326679063224),
    ("statsmodels test suite TestTTPowerOneS6", -0.2, 20, 0.05, "less", 0.21707518167188544),
    ("non-central t (Cohen 1988; Owen 1965)", 1.0, 10, 0.05, "two-sided", 0.8030968566327217),
    ("non-central t (Cohen 1988; Owen 1965)", 2.0, 4, 0.01, "two-sided", 0.3076760830278067),
    ("non-central t (Cohen 1988; Owen 1965)", 0.5, 12, 0.1, "two-sided", 0.49240692356579224),
]


@pytest.mark.parametrize(("source", "difference", "n", "alpha", "alternative", "power"), PUBLISHED)
def test_published_powers(source, difference, n, alpha, alternative, power):
    """The power of t is the published one."""
    assert meanlab.power(n, difference, 1, alternative, alpha) == pytest.approx(power, rel=1e-11)


@pytest.mark.parametrize("n", [2, 3, 5, 10, 30, 200])
@pytest.mark.parametrize("shift", [0.0, 0.5, 1.7, 3.0, 6.0])
@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_power_agrees_with_statsmodels(n, shift, alternative):
    """The power of t agrees with statsmodels over n, shift δ√n/s and alternative (it gives nan for larger shifts)."""
    difference = shift / sqrt(n)
    theirs = TTestPower().power(difference, n, 0.05, alternative=THEIRS[alternative])
    assert meanlab.power(n, difference, 1.0, alternative) == pytest.approx(float(theirs), rel=1e-8, abs=1e-12)


@pytest.mark.parametrize(
    ("df", "tail", "shift"),
    [
        (1, 0.025, 3.0),
        (1, 0.0005, 900.0 / 30),
        (2, 0.025, -6.0),
        (4, 0.0005, 2.8),
        (9, 0.025, 3.1),
        (9, 0.025, -3.1),
        (9, 0.025, -8.0),
        (29, 0.05, 2.8),
        (99, 0.025, -8.0),
        (500, 0.025, -4.8),
        (3, 1e-12, 0.0),
        (3, 1e-6, 10.0),
    ],
)
def test_the_tail_keeps_its_digits(df, tail, shift):
    """Upper tails of the non-central t keep 9 digits down to 1e-23 (60 digits, Lenth's series)."""
    t = float(t_critical(tail, df))
    assert ours(t, df, shift) == pytest.approx(float(shifted_t_upper(t, df, shift)), rel=1e-9)


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("alpha", [0.2, 0.05, 0.001, 1e-8])
@pytest.mark.parametrize("n", [2, 3, 10, 1000])
def test_without_a_difference_the_power_is_the_level(alternative, alpha, n):
    """At δ = 0 power is α for t and for z: test and power come out of one distribution."""
    assert meanlab.power(n, 0, 1, alternative, alpha) == pytest.approx(alpha, rel=1e-9)
    assert meanlab.power(n, 0, 1, alternative, alpha, sigma_known=True) == pytest.approx(alpha, rel=1e-9)


@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_z_with_an_uncertain_target_keeps_the_level(alternative):
    """With known σ and a target uncertainty the size is still α, since all of it is known."""
    found = meanlab.power(5, 0, 1, alternative, 0.05, sigma_known=True, target_uncertainty=0.7)
    assert found == pytest.approx(0.05, rel=1e-10)


def test_z_is_the_normal_distribution():
    """Known σ: power = Φ(δ√n/σ − z) by scipy.stats.norm."""
    expected = stats.norm.sf(stats.norm.isf(0.05) - 0.8 * sqrt(6))
    assert meanlab.power(6, 0.8, 1, "greater", 0.05, sigma_known=True) == pytest.approx(expected, rel=1e-12)
    assert meanlab.power(1, 3, 1, "greater", 0.05, sigma_known=True) == pytest.approx(
        stats.norm.sf(stats.norm.isf(0.05) - 3), rel=1e-12
    )


def test_an_estimated_sigma_is_a_non_central_t():
    """σ with ν degrees of freedom: the power is that of t with ν instead of n − 1."""
    found = detection_power(4, 1.0, Design(1.0, procedure="z", sigma_df=20.0))
    t = stats.t.isf(0.025, 20)
    expected = stats.nct.sf(t, 20, 2.0) + stats.nct.cdf(-t, 20, 2.0)
    assert found == pytest.approx(float(expected), rel=1e-9)


@pytest.mark.parametrize(
    ("n", "difference", "u", "alternative"),
    [
        (3, 1.0, 0.2, "two-sided"),
        (6, 1.0, 0.5, "two-sided"),
        (10, 0.8, 0.3, "greater"),
        (2, 2.0, 0.1, "greater"),
        (30, 2.0, 1.0, "two-sided"),
        (5, 0.0, 0.5, "two-sided"),
    ],
)
def test_uncertain_targets_against_another_quadrature(n, difference, u, alternative):
    """∫ over s with Welch–Satterthwaite degrees of freedom agrees with scipy's adaptive quadrature to 9 digits."""
    tail, sides = (0.025, 2) if alternative == "two-sided" else (0.05, 1)
    expected = combined_power(n, difference, 1.0, u, tail, sides)
    found = meanlab.power(n, difference, 1.0, alternative, 0.05, target_uncertainty=u)
    assert found == pytest.approx(expected, rel=1e-9)


def test_the_size_with_an_uncertain_target_is_near_the_level():
    """u₀ = 0.5 σ at n = 6 and a true target: the test rejects in 5.1 % (simulated for this project, ± 0.15 %)."""
    assert meanlab.power(6, 0, 1, target_uncertainty=0.5) == pytest.approx(0.051, abs=0.004)


def test_a_vanishing_uncertainty_of_the_target_is_none():
    """u₀ → 0 leads back to the non-central t."""
    plain = meanlab.power(7, 0.9, 1)
    assert meanlab.power(7, 0.9, 1, target_uncertainty=1e-7) == pytest.approx(plain, rel=1e-6)


@pytest.mark.parametrize("n", [1, 5, 6, 10, 21, 80])
@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_sign_power_is_the_exact_binomial(n, alternative):
    """The power of the sign test is the binomial sum with P(x > μ₀) = Φ(δ/σ); at δ = 0 it is the attained size."""
    tail, sides = (0.025, 2) if alternative == "two-sided" else (0.05, 1)
    for difference in (0.0, 0.7):
        towards = -difference if alternative == "less" else difference
        expected = sign_power(n, stats.norm.cdf(difference), tail, sides)
        found = detection_power(n, towards, Design(1.0, alternative, procedure="sign"))
        assert found == pytest.approx(float(expected), rel=1e-10, abs=1e-15)
    assert detection_power(n, 0.0, Design(1.0, alternative, procedure="sign")) <= 0.05


def test_signed_rank_is_t_with_fewer_readings_and_marked():
    """Signed rank: shift √(3/π) of that of t (Hodges & Lehmann 1956), 0 where nothing could be significant."""
    design = Design(1.0, procedure="signed_rank")
    t = stats.t.isf(0.025, 11)
    shift = 0.9 * sqrt(12 * 3 / np.pi)
    expected = stats.nct.sf(t, 11, shift) + stats.nct.cdf(-t, 11, shift)
    assert detection_power(12, 0.9, design) == pytest.approx(float(expected), rel=1e-9)
    assert design.kind == "approximate"
    assert detection_power(5, 9.0, design) == 0.0
    assert detection_power(5, 9.0, Design(1.0, "greater", procedure="signed_rank")) > 0.9


def test_guarded_t_is_planned_as_t():
    """The guarded t is planned as t, marked as an upper bound, from three readings on."""
    design = Design(1.0, procedure="guarded_t")
    assert detection_power(9, 1.0, design) == detection_power(9, 1.0, Design(1.0))
    assert detection_power(2, 1.0, design) == 0.0
    assert design.kind == "upper bound"


@pytest.mark.parametrize("df", [1.0, 2.0, 4.0, 19.0, 300.0, 9999.0, 1e8])
def test_the_quadrature_over_s_holds_all_of_it(df):
    """The weights over s/σ add to 1, and the mean of (s/σ)² is 1, for 1 to 100 million degrees of freedom."""
    for panels in ({}, {"middle": 1.3, "width": 0.01}, {"steps": 12.7}):
        r, weights = ratio_panels(df, **panels)
        assert float(weights.sum()) == pytest.approx(1.0, abs=1e-11)
        assert float(weights @ (r * r)) == pytest.approx(1.0, abs=1e-11)


@settings(max_examples=80, deadline=None)
@given(
    st.integers(2, 60),
    st.integers(-6000, 6000).map(lambda steps: steps / 1000),
    st.floats(1e-3, 1e3),
    st.sampled_from(ALTERNATIVES),
    st.floats(0.001, 0.4),
    st.sampled_from([0.0, 0.3]),
)
def test_power_does_not_depend_on_the_unit(n, difference, unit, alternative, alpha, u):
    """Power is the same in every unit, mirrored with the side, between 0 and 1, and rises to the side asked."""
    found = meanlab.power(n, difference, 1, alternative, alpha, target_uncertainty=u)
    scaled = meanlab.power(n, difference * unit, unit, alternative, alpha, target_uncertainty=u * unit)
    mirror = {"two-sided": "two-sided", "greater": "less", "less": "greater"}[alternative]
    assert 0 <= found <= 1
    assert scaled == pytest.approx(found, rel=1e-6, abs=1e-14)
    mirrored = meanlab.power(n, -difference, 1, mirror, alpha, target_uncertainty=u)
    assert mirrored == pytest.approx(found, rel=1e-12, abs=1e-300)
    side = {"greater": 1, "less": -1}.get(alternative, np.sign(difference))
    further = difference + 0.1 * side
    assert meanlab.power(n, further, 1, alternative, alpha, target_uncertainty=u) >= found * (1 - 1e-9)


@pytest.mark.parametrize("difference", [1e-300, 1e-20, 1e20, 1e300, -1e300])
@pytest.mark.parametrize("s", [1e-300, 1.0, 1e300])
@pytest.mark.parametrize("u", [0.0, 1e-300, 1.0, 1e300])
def test_extreme_numbers_give_a_probability(difference, s, u):
    """Differences and scatters at the ends of the range of doubles give a probability, no warning and no exception."""
    for alternative in ALTERNATIVES:
        for known in (True, False):
            found = meanlab.power(4, difference, s, alternative, 0.05, known, u)
            assert 0 <= found <= 1


def test_levels_at_the_ends_of_the_range():
    """Levels next to 0 and next to a half still give the level at δ = 0."""
    for alpha in (1e-15, 0.4999999999):
        for n in (2, 4, 40):
            assert meanlab.power(n, 0, 1, "greater", alpha) == pytest.approx(alpha, rel=1e-6)


def test_the_normal_limit_of_many_readings():
    """With many readings the non-central t leads to the normal distribution (z = 1.96)."""
    shift = 0.03 * sqrt(10_000)
    expected = stats.norm.sf(float(normal_critical(0.025)) - shift)
    assert meanlab.power(10_000, 0.03, 1) == pytest.approx(expected, abs=2e-4)
    assert ours(1.96, inf, shift) == pytest.approx(float(stats.norm.sf(1.96 - shift)), rel=1e-12)


def test_both_components_enter_alike():
    """The laboratory's own uncertainty widens the power as the target's does where both are exactly known."""
    one = detection_power(6, 1.0, Design(1.0, further=Further(target_u=0.5)))
    other = detection_power(6, 1.0, Design(1.0, further=Further(own_u=0.3, target_u=0.4)))
    assert other == pytest.approx(one, rel=1e-12)
