"""The probability to show agreement: quadratures of others, and identities that need no simulation."""

import pytest
from exact_powers import agreement_power, agreement_power_many_digits
from hypothesis import given, settings
from hypothesis import strategies as st

import meanlab


@pytest.mark.parametrize(
    ("n", "limit", "true", "alpha"),
    [(10, 1.0, 0.0, 0.05), (2, 1.0, 0.0, 0.05), (2, 20.0, 0.0, 0.05), (3, 2.0, 0.5, 0.05), (30, 0.5, 0.1, 0.05),
     (10, 1.0, 1.0, 0.05), (20, 0.3, 0.3, 0.05), (6, 0.3, 0.0, 0.1), (200, 0.2, 0.0, 0.025)],
)  # fmt: skip
def test_power_at_many_digits(n, limit, true, alpha):
    """The power of two one-sided t tests agrees to 11 digits with the integral of Owen 1965 at 25 digits."""
    expected = float(agreement_power_many_digits(n, limit, 1.0, true, alpha))
    assert meanlab.power_agreement(n, limit, 1.0, true, alpha) == pytest.approx(expected, rel=1e-11)


@pytest.mark.parametrize(
    ("n", "limit", "true", "u"),
    [(10, 1.0, 0.0, 0.2), (5, 2.0, 0.3, 0.4), (100, 0.4, 0.0, 0.05), (3, 3.0, 1.0, 0.5)],
)
def test_uncertain_targets_against_another_quadrature(n, limit, true, u):
    """With an uncertain target the power agrees with scipy's adaptive quadrature."""
    expected = agreement_power(n, limit, 1.0, true, 0.05, u)
    assert meanlab.power_agreement(n, limit, 1.0, true, 0.05, u) == pytest.approx(expected, rel=1e-8)


@pytest.mark.parametrize("n", [2, 3, 5, 10, 50])
@pytest.mark.parametrize("limit", [0.1, 0.5, 1.0, 3.0, 50.0])
@pytest.mark.parametrize("alpha", [0.01, 0.05, 0.2])
def test_at_the_limit_agreement_is_claimed_with_at_most_the_level(n, limit, alpha):
    """A true difference of ± E is taken for agreement with at most α (Schuirmann 1987), nearly α for wide limits."""
    found = meanlab.power_agreement(n, limit, 1.0, limit, alpha)
    assert found <= alpha * (1 + 1e-10)
    assert meanlab.power_agreement(n, limit, 1.0, -limit, alpha) == pytest.approx(found, rel=1e-9, abs=1e-300)
    if limit == 50.0 and n >= 5:
        assert found == pytest.approx(alpha, rel=1e-6)


@pytest.mark.parametrize(("n", "limit", "true"), [(10, 1.0, 0.2), (5, 2.0, 0.0), (20, 0.6, -0.3), (4, 3.0, 1.0)])
def test_both_one_sided_powers_bound_it(n, limit, true):
    """P(both reject) lies between P₁ + P₂ − 1 and the smaller of both, P₁ and P₂ being one-sided powers of t."""
    above = meanlab.power(n, limit + true, 1.0, "greater")
    below = meanlab.power(n, true - limit, 1.0, "less")
    found = meanlab.power_agreement(n, limit, 1.0, true)
    assert above + below - 1 - 1e-12 <= found <= min(above, below) + 1e-12


def test_wide_limits_make_the_lower_bound_exact():
    """Where the interval always fits within the limits, P(both reject) = P₁ + P₂ − 1."""
    above = meanlab.power(30, 1.0 + 0.4, 1.0, "greater")
    below = meanlab.power(30, 0.4 - 1.0, 1.0, "less")
    assert meanlab.power_agreement(30, 1.0, 1.0, 0.4) == pytest.approx(above + below - 1, rel=1e-9)


@settings(max_examples=60, deadline=None)
@given(
    st.integers(2, 60),
    st.integers(1, 4000).map(lambda steps: steps / 1000),
    st.integers(-3000, 3000).map(lambda steps: steps / 1000),
    st.sampled_from([1e-6, 0.01, 7.0, 1e5]),
    st.sampled_from([0.0, 0.2]),
)
def test_it_does_not_depend_on_the_unit(n, limit, true, unit, u):
    """The power is the same in every unit and for both signs, between 0 and 1, and rises with the limit."""
    found = meanlab.power_agreement(n, limit, 1, true, target_uncertainty=u)
    scaled = meanlab.power_agreement(n, limit * unit, unit, true * unit, target_uncertainty=u * unit)
    assert 0 <= found <= 1
    assert scaled == pytest.approx(found, rel=1e-8, abs=1e-14)
    assert meanlab.power_agreement(n, limit, 1, -true, target_uncertainty=u) == pytest.approx(
        found, rel=1e-9, abs=1e-14
    )
    assert meanlab.power_agreement(n, limit + 0.1, 1, true, target_uncertainty=u) >= found - 1e-12


@pytest.mark.parametrize("limit", [1e-300, 1e-9, 1e9, 1e300])
@pytest.mark.parametrize("s", [1e-300, 1.0, 1e300])
@pytest.mark.parametrize("u", [0.0, 1e-300, 1.0, 1e300])
@pytest.mark.parametrize("true", [0.0, 1.0, 1e300])
def test_extreme_numbers_give_a_probability(limit, s, u, true):
    """Numbers at the ends of the range give a probability, no warning and no exception."""
    for n in (2, 9, 10_000):
        assert 0 <= meanlab.power_agreement(n, limit, s, true, 0.05, u) <= 1
