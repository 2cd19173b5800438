"""Run order against certified data, exact laws and other libraries."""

from itertools import permutations

import numpy as np
import pytest
from facts_for_checks import check_of
from mpmath import cos, matrix, mp, mpf, pi, quad, sin
from scipy import stats

from meanlab.checks.run_order import lag1, runs_about_median, slope_test, von_neumann_p, von_neumann_ratio

# NIST StRD Mavro (public domain): certified lag-1 autocorrelation 0.937989183438248
MAVRO = "18 17 18 19 18 17 15 14 15 15 17 18 18 19 19 21 20 16 14 13 13 15 15 16 15 14 13 14 15 14 15 16 15 16 19 20 20"
MAVRO += " 21 22 23 24 25 27 26 26 26 27 26 25 24"
STEPS = np.array([int(step) for step in MAVRO.split()], dtype=float)


def test_the_certified_correlation_of_neighbours():
    """The lag-1 correlation is NIST's certified one, and the von Neumann ratio the value at 50 digits."""
    assert lag1(STEPS) == pytest.approx(0.937989183438248, rel=1e-12)
    assert von_neumann_ratio(STEPS) == pytest.approx(0.09087685078464403, rel=1e-12)


def test_moments_of_the_ratio():
    """Over all orders of fixed readings the ratio averages 2 exactly (von Neumann 1941; common practice)."""
    ratios = [von_neumann_ratio(np.array(order)) for order in permutations([1.0, 2.0, 4.0, 7.0, 9.0, 10.5])]
    assert np.mean(ratios) == pytest.approx(2.0, rel=1e-12)


def imhof_lower(ratio, n):
    """Return P(von Neumann ratio < ratio) exactly: Imhof 1961 on Σ(4 sin²(πk/2n) − ratio)z², k = 1…n − 1."""
    mp.dps = 20
    roots = [4 * sin(pi * k / (2 * n)) ** 2 - mpf(ratio) for k in range(1, n)]

    def integrand(u):
        if u == 0:
            return sum(roots) / 2
        angle = sum(mp.atan(root * u) for root in roots) / 2
        return sin(angle) / (u * mp.fprod((1 + (root * u) ** 2) ** mpf("0.25") for root in roots))

    return float(mpf("0.5") - quad(integrand, [0, 0.5, 1, 2, 4, 8, 16, 64, 256, 4096]) / pi)


@pytest.mark.parametrize("n", [8, 10, 20])
@pytest.mark.parametrize("share", [0.5, 0.8])
def test_p_against_the_exact_law(n, share):
    """The beta law differs from the exact law of the ratio (Imhof 1961) by less than 0.0015 in the lower tail."""
    ratio = 2 * share
    assert von_neumann_p(ratio, n) == pytest.approx(imhof_lower(ratio, n), abs=1.5e-3)


def test_imhof_itself_is_right():
    """The exact law used above gives ½ at the middle of its range, and its roots are those of the differences."""
    assert imhof_lower(2.0, 8) == pytest.approx(0.5, abs=1e-9)
    mp.dps = 20
    differences = matrix([[1, -1, 0], [-1, 2, -1], [0, -1, 1]])
    found = sorted(float(root) for root in mp.eigsy(differences, eigvals_only=True))
    assert found[1:] == pytest.approx([float(2 - 2 * cos(pi * k / 3)) for k in (1, 2)], rel=1e-12)


@pytest.mark.parametrize("n", [8, 15, 40])
def test_slope_p_agrees_with_scipy(n):
    """The p of the slope is that of scipy.stats.linregress."""
    x = np.random.default_rng(n).normal(size=n) + 0.05 * np.arange(n)
    assert slope_test(x) == pytest.approx(stats.linregress(np.arange(n), x).pvalue, rel=1e-9)


def test_a_straight_line_has_slope_p_0():
    """Readings on one line leave no residual; the p is 0, not an exception."""
    assert slope_test(np.arange(10.0)) == 0.0


def test_runs_about_the_median():
    """Runs and their expectation 1 + 2ab/(a + b) agree with counting by hand (NIST/SEMATECH e-Handbook 1.3.5.13)."""
    assert runs_about_median(np.array([1.0, 1, 9, 9, 1, 9, 1, 9])) == (6, 5.0)
    assert runs_about_median(np.array([1.0, 2, 3, 4, 5])) == (2, 3.0)


def test_a_drift_is_said_with_what_it_does_to_the_risk():
    """A drift raises a caution that names the inflated risk."""
    check = check_of("run order", STEPS, run_order=True)
    assert check.outcome == "caution"
    assert "13 to 15 %" in check.message
    assert check.statistic == pytest.approx(0.09087685078464403, rel=1e-12)


def test_nothing_is_said_about_an_order_that_was_not_declared():
    """Without a declared run order there is no such check."""
    assert check_of("run order", STEPS) is None


def test_fewer_than_eight_readings_show_no_order():
    """Below eight readings the check says that it cannot see anything."""
    check = check_of("run order", STEPS[:7], run_order=True)
    assert (check.outcome, check.statistic, check.p_value) == ("note", None, None)


def test_each_look_has_half_the_level():
    """The check sets off for independent readings in about 5 % of all orders: two looks at 0.025 each (union bound)."""
    made = np.random.default_rng(7)
    found = [check_of("run order", made.normal(size=12), run_order=True).outcome == "caution" for _ in range(1500)]
    assert 0.03 <= np.mean(found) <= 0.06
