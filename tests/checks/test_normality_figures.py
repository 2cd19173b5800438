"""Shapiro–Wilk, D'Agostino's skewness test and Anderson–Darling against published values and other libraries."""

from math import asin, pi, sqrt

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from hypothesis.extra.numpy import arrays
from scipy import stats
from statsmodels.stats.diagnostic import normal_ad

from meanlab.checks.normality import (
    anderson_darling,
    anderson_darling_p,
    probability_plot,
    shapiro_wilk,
    shapiro_wilk_weights,
    skewness,
    skewness_error,
    skewness_test,
)

MEN = [148, 154, 158, 160, 161, 162, 166, 170, 182, 195, 236]
TWENTY = [0.11, 7.87, 4.61, 10.14, 7.95, 3.14, 0.46, 4.43, 0.21, 4.75]
TWENTY += [0.71, 1.52, 3.24, 0.93, 0.42, 4.97, 9.53, 4.55, 0.47, 6.66]
THREE = [-0.7746653110021126, -0.4344432067942129, 1.8157053280290931]
PARTICLES = [50, 48, 44, 56, 61, 52, 53, 55, 67, 51]
CAVENDISH = [5.5, 5.61, 4.88, 5.07, 5.26, 5.55, 5.36, 5.29, 5.58, 5.65, 5.57, 5.53, 5.62, 5.29, 5.44]
CAVENDISH += [5.34, 5.79, 5.1, 5.27, 5.39, 5.42, 5.47, 5.63, 5.34, 5.46, 5.3, 5.75, 5.68, 5.85]
SLEEP = [1.2, 2.4, 1.3, 1.3, 0.0, 1.0, 1.8, 0.8, 4.6, 1.4]
SIZES = [3, 4, 5, 6, 7, 8, 10, 11, 12, 13, 20, 29, 50, 200, 1000, 5000]

# source; readings; W; p; both recomputed from the AS R94 coefficients with mpmath at 50 digits
PUBLISHED = [
    ("Shapiro & Wilk 1965, Biometrika 52:591, example 1", MEN, 0.7888146948353875, 0.006703814056503012),
    ("SciPy test suite, TestShapiro.test_basic", TWENTY, 0.9004728793175613, 0.042089575222258),
    ("SciPy test suite, test_length_3_gh18322", THREE, 0.8465877064550877, 0.23136664898824139),
    ("NIST/SEMATECH e-Handbook 7.2.2 particle counts", PARTICLES, 0.958723853938171, 0.771228452212515),
    ("Cavendish 1798, density of the earth", CAVENDISH, 0.9788397945487153, 0.8079750124627736),
    ("Student 1908, sleep differences", SLEEP, 0.8298713319287945, 0.0333416086303079),
]


@pytest.mark.parametrize(("source", "readings", "W", "p"), PUBLISHED)
def test_shapiro_wilk_of_published_readings(source, readings, W, p):
    """W and p are those of Royston's algorithm on readings published elsewhere."""
    found, found_p = shapiro_wilk(np.array([readings], dtype=float))
    assert float(found[0]) == pytest.approx(W, rel=1e-9)
    assert float(found_p[0]) == pytest.approx(p, rel=1e-6)


def test_the_printed_value_of_the_first_example():
    """W of the eleven weights rounds to the 0.79 that Shapiro & Wilk 1965 print."""
    assert round(float(shapiro_wilk(np.array([MEN], dtype=float))[0][0]), 2) == 0.79


@pytest.mark.parametrize("n", SIZES)
@pytest.mark.parametrize("shape", ["normal", "exponential", "rounded"])
def test_shapiro_wilk_agrees_with_scipy(n, shape):
    """For every size and several shapes W and p agree with scipy.stats.shapiro, all samples at once."""
    made = np.random.default_rng(n)
    x = made.exponential(size=(4, n)) if shape == "exponential" else made.normal(size=(4, n))
    x = np.round(x, 1) if shape == "rounded" else x
    W, p = shapiro_wilk(x)
    for row in range(4):
        theirs = stats.shapiro(x[row])
        assert W[row] == pytest.approx(theirs.statistic, rel=1e-8)
        assert p[row] == pytest.approx(theirs.pvalue, rel=1e-4, abs=1e-90)


@pytest.mark.parametrize("W", [0.7545207078751857, 0.7723195175075135, 0.7938926261462366])
def test_p_of_three_readings_is_the_closed_form(W):
    """At n = 3 p is 6/π (asin √W − asin √¾), the exact law (percentage points 1, 5, 10 % in closed form)."""
    x = np.array([[-1.0, middle_of(W), 1.0]])
    found, p = shapiro_wilk(x)
    assert float(found[0]) == pytest.approx(W, rel=1e-12)
    assert float(p[0]) == pytest.approx(6 / pi * (asin(sqrt(W)) - asin(sqrt(0.75))), rel=1e-9)


def middle_of(W):
    """Return m for which the three readings −1, m, 1 have this W: Σ(x − x̄)² = 2 + 2m²/3, range²/2 = 2."""
    return sqrt(3 * (1 / W - 1))


@pytest.mark.parametrize("n", [3, 4, 5, 6, 11, 12, 50, 5000])
def test_weights_have_length_one_and_are_antisymmetric(n):
    """The coefficients of W have length 1 and opposite signs at both ends, as Shapiro & Wilk define them."""
    weights = shapiro_wilk_weights(n)
    assert float(weights @ weights) == pytest.approx(1.0, rel=1e-12)
    assert weights == pytest.approx(-weights[::-1], abs=0)
    assert np.all(np.diff(weights) > 0)


@pytest.mark.parametrize("n", [2, 5001])
def test_sizes_outside_the_algorithm_are_refused(n):
    """Below 3 and above 5,000 readings no W is computed."""
    with pytest.raises(ValueError, match="3 to 5,000"):
        shapiro_wilk(np.arange(n, dtype=float)[np.newaxis, :])


@pytest.mark.parametrize("n", [8, 9, 12, 30, 100, 3000])
def test_skewness_test_agrees_with_scipy(n):
    """D'Agostino's skewness p agrees with scipy.stats.skewtest to 9 digits."""
    x = np.random.default_rng(n).gamma(4.0, size=(5, n))
    assert skewness_test(x) == pytest.approx(stats.skewtest(x, axis=1).pvalue, rel=1e-9)


def test_skewness_test_needs_eight_readings():
    """With seven readings the approximation of D'Agostino is not used."""
    with pytest.raises(ValueError, match="at least 8"):
        skewness_test(np.arange(7.0)[np.newaxis, :])


def test_skewness_and_its_error():
    """g₁ agrees with scipy.stats.skew; its standard error is that of Fisher 1930, √(6(n − 2)/((n + 1)(n + 3)))."""
    x = np.array([MEN], dtype=float)
    assert float(skewness(x)[0]) == pytest.approx(stats.skew(MEN), rel=1e-12)
    assert skewness_error(11) == pytest.approx(sqrt(6 * 9 / (12 * 14)), rel=1e-15)


# A*² by mpmath at 50 digits, Stephens's correction (D'Agostino & Stephens 1986)
@pytest.mark.parametrize(
    ("readings", "adjusted"),
    [(PARTICLES, 0.2843700827488033), (CAVENDISH, 0.209364640769381), (SLEEP, 0.8605102101623572)],
)
def test_anderson_darling_of_published_readings(readings, adjusted):
    """A*² agrees with the value computed at 50 digits."""
    assert float(anderson_darling(np.array([readings], dtype=float))[0][0]) == pytest.approx(adjusted, rel=1e-10)


@pytest.mark.parametrize("n", [8, 20, 100])
def test_anderson_darling_p_agrees_with_statsmodels(n):
    """p by Stephens's formula agrees with statsmodels over its four ranges."""
    made = np.random.default_rng(5)
    x = np.concatenate([made.normal(size=(20, n)), made.exponential(size=(20, n))])
    _, p = anderson_darling(x)
    theirs = np.array([normal_ad(row)[1] for row in x])
    assert p == pytest.approx(theirs, rel=1e-8, abs=1e-14)


def test_the_critical_value_of_anderson_darling():
    """A*² of 0.752 is the 5 % point of Stephens's table (D'Agostino & Stephens 1986, from memory), to its rounding."""
    assert float(anderson_darling_p(np.array([0.752]))[0]) == pytest.approx(0.05, abs=5e-4)


@settings(max_examples=60, deadline=None)
@given(
    arrays(float, st.integers(8, 20), elements=st.floats(-1, 1).map(lambda v: round(v, 3))),
    st.floats(0.01, 100),
    st.floats(-100, 100),
)
def test_figures_do_not_depend_on_origin_and_scale(x, scale, shift):
    """W, the skewness p and A*² are the same for a + b·x; only the sign of the skewness turns with the scale."""
    if np.ptp(x) < 0.05:
        return
    plain, moved = x[np.newaxis, :], (shift + scale * x)[np.newaxis, :]
    assert shapiro_wilk(moved)[0] == pytest.approx(shapiro_wilk(plain)[0], rel=1e-6)
    assert skewness_test(moved) == pytest.approx(skewness_test(plain), rel=1e-4)
    assert anderson_darling(moved)[0] == pytest.approx(anderson_darling(plain)[0], rel=1e-5)
    assert skewness(-moved) == pytest.approx(-skewness(plain), rel=1e-4, abs=1e-6)


def test_band_of_the_probability_plot_is_the_law_of_order_statistics():
    """The band holds Φ⁻¹ of the beta(i, n + 1 − i) quantiles (scipy.stats.beta) on the scale of x̄ and s."""
    x = np.array(CAVENDISH)
    plot = probability_plot(x, 0.95)
    place = np.arange(1, len(x) + 1)
    for tail, band in ((0.025, plot.low), (0.975, plot.high)):
        expected = x.mean() + x.std(ddof=1) * stats.norm.ppf(stats.beta.ppf(tail, place, len(x) + 1 - place))
        assert band == pytest.approx(expected, rel=1e-10)
    assert np.all(plot.readings == np.sort(x))
    assert np.all((plot.low < plot.line) & (plot.line < plot.high))
    assert plot.quantiles == pytest.approx(stats.norm.ppf((place - 0.375) / (len(x) + 0.25)), rel=1e-12)


def test_band_of_very_many_readings_is_interpolated_closely():
    """Above 2,000 readings the band is interpolated, to four decimals of a standard deviation everywhere."""
    n = 5000
    plot = probability_plot(np.random.default_rng(1).normal(size=n))
    mean, s = np.mean(plot.readings), np.std(plot.readings, ddof=1)
    place = np.concatenate([np.arange(1, 3), np.arange(400, n, 97)])
    for tail, band in ((0.025, plot.low), (0.975, plot.high)):
        expected = stats.norm.ppf(stats.beta.ppf(tail, place, n + 1 - place))
        assert (band[place - 1] - mean) / s == pytest.approx(expected, abs=1e-4)
