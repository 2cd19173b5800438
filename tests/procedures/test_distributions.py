"""The shared tails and quantiles against mpmath at 50 and more digits, and against exact whole numbers."""

from fractions import Fraction
from math import comb, inf

import mpmath as mp
import numpy as np
import pytest

from meanlab.procedures.distributions import (
    fair_critical,
    fair_lower,
    normal_critical,
    normal_upper,
    t_critical,
    t_density,
    t_upper,
)

TWELVE_DIGITS = 1e-12
DEGREES = (1, 1.5, 2, 2.7, 3, 4, 5, 7, 11.8, 19, 29, 99, 250.5, 999, 5e3, 1e4, 1e5, 1e6)
STATISTICS = (0, 1e-12, 1e-6, 1e-3, 0.00101, 0.01, 0.1, 0.5, 1, 1.7, 2.262, 5, 12, 21, 50, 200, 1e4, 1e20)
TAILS = (0.45, 0.25, 0.1, 0.05, 0.025, 0.01, 0.005, 0.0005, 1e-6, 1e-10, 1e-20, 1e-50, 1e-100)


def t_tail_by_mpmath(t: float, df: float) -> mp.mpf:
    """Return P(T > t) by the incomplete beta function; 160 digits, so that its complement keeps 50 at 1e-100."""
    with mp.workdps(160):
        t, df = mp.mpf(t), mp.mpf(df)
        if t < 0:
            return 1 - t_tail_by_mpmath(-t, df)
        if 2 * t * t < df:
            return (1 - mp.betainc(mp.mpf(1) / 2, df / 2, 0, t * t / (df + t * t), regularized=True)) / 2
        return mp.betainc(df / 2, mp.mpf(1) / 2, 0, df / (df + t * t), regularized=True) / 2


def t_density_by_mpmath(t: float, df: float) -> mp.mpf:
    """Return the density of Student's t from its definition."""
    with mp.workdps(50):
        t, df = mp.mpf(t), mp.mpf(df)
        height = mp.gamma((df + 1) / 2) / (mp.sqrt(df * mp.pi) * mp.gamma(df / 2))
        return height * (1 + t * t / df) ** (-(df + 1) / 2)


def relative_error(found: float, expected: mp.mpf) -> float:
    """Return |found − expected| / |expected|."""
    return float(abs((mp.mpf(float(found)) - expected) / expected))


@pytest.mark.parametrize("df", DEGREES)
def test_both_tails_of_students_t_keep_twelve_digits(df):
    """The tail of t keeps 12 digits from the middle to 1e-290, also near 0 with many degrees of freedom."""
    for t in STATISTICS:
        for side in (1, -1):
            expected = t_tail_by_mpmath(side * t, df)
            if expected > mp.mpf(10) ** -290:
                assert relative_error(t_upper(side * t, df), expected) < TWELVE_DIGITS, (side * t, df)


@pytest.mark.parametrize("df", DEGREES)
def test_a_critical_value_of_t_leaves_the_tail_that_was_asked(df):
    """The tail beyond a critical value, by mpmath, is the tail asked for, down to 1e-100."""
    for tail in TAILS:
        assert relative_error(tail, t_tail_by_mpmath(float(t_critical(tail, df)), df)) < TWELVE_DIGITS, (tail, df)


@pytest.mark.parametrize("df", DEGREES)
def test_the_density_of_t_keeps_twelve_digits(df):
    """The density drawn under the picture is that of the definition."""
    for t in (0, 0.3, -1.0, 2.5, 8.0):
        assert relative_error(t_density(t, df), t_density_by_mpmath(t, df)) < TWELVE_DIGITS, (t, df)


def test_a_tail_that_the_library_gives_up_has_a_critical_value():
    """Five degrees of freedom and a tail of 1e-299: the critical value leaves that tail."""
    assert relative_error(1e-299, t_tail_by_mpmath(float(t_critical(1e-299, 5)), 5)) < TWELVE_DIGITS


def test_a_statistic_whose_square_overflows_has_a_tail():
    """With one degree of freedom the tail is arctan(1/t)/π (Cauchy), also where t² is no double."""
    for t in (1e149, 1e151, 1e200, 1e280):
        assert relative_error(t_upper(t, 1), mp.atan(1 / mp.mpf(t)) / mp.pi) < TWELVE_DIGITS
    assert t_upper(-1e200, 1) == 1
    assert t_upper(1e200, 5) == 0


@pytest.mark.parametrize("z", [0, 0.01, -0.01, 1, -1, 1.96, 5, -5, 10, 21.27, 37])
def test_normal_tails_keep_twelve_digits(z):
    """The normal tail keeps 12 digits down to 1e-300, and is that of t with infinite degrees of freedom."""
    with mp.workdps(50):
        expected = mp.erfc(mp.mpf(z) / mp.sqrt(2)) / 2
    assert relative_error(normal_upper(z), expected) < TWELVE_DIGITS
    assert t_upper(z, inf) == normal_upper(z)


@pytest.mark.parametrize("tail", [*TAILS, 1e-200, 1e-300])
def test_normal_critical_values_leave_the_tail_that_was_asked(tail):
    """The tail beyond a normal critical value is the tail asked for."""
    with mp.workdps(50):
        expected = mp.erfc(mp.mpf(float(normal_critical(tail))) / mp.sqrt(2)) / 2
    assert relative_error(tail, expected) < TWELVE_DIGITS
    assert t_critical(tail, inf) == normal_critical(tail)


def test_arrays_give_what_single_numbers_give():
    """Samples along the first axis, with finite and infinite degrees of freedom side by side."""
    t, df = np.array([-3.0, 0.0, 1e-5, 2.0, 1e200]), np.array([4.0, inf, 7.5, inf, 1.0])
    assert t_upper(t, df).tolist() == [float(t_upper(*pair)) for pair in zip(t, df, strict=True)]
    assert t_density(t, df).tolist() == [float(t_density(*pair)) for pair in zip(t, df, strict=True)]
    assert t_critical(0.025, df).tolist() == [float(t_critical(0.025, one)) for one in df]


def binomial_lower(count: int, n: int) -> Fraction:
    """Return P(B ≤ count) for a fair coin thrown n times, exactly."""
    return Fraction(sum(comb(n, k) for k in range(count + 1)), 2**n)


@pytest.mark.parametrize("n", [1, 2, 5, 10, 47, 200, 1000])
def test_fair_coin_tails_are_exact(n):
    """Up to 1,000 trials each tail is the exact one, rounded once."""
    for count in {0, 1, n // 4, n // 2, n - 1, n}:
        assert fair_lower(count, n) == float(binomial_lower(count, n))
    assert fair_lower(-1, n) == 0


@pytest.mark.parametrize("n", [1001, 1500, 4000])
def test_many_throws_keep_eleven_digits(n):
    """Above 1,000 trials the tails come from the incomplete beta function, to 11 digits."""
    for count in (n // 4, n // 2 - 60, n // 2, n // 2 + 5):
        expected = binomial_lower(count, n)
        assert abs(Fraction(fair_lower(count, n)) / expected - 1) < 1e-11


@pytest.mark.parametrize("n", [0, 1, 4, 5, 6, 13, 40, 999, 1000, 1001, 2500])
@pytest.mark.parametrize("tail", [0.25, 0.05, 0.025, 0.005, 0.03125, 2.0**-12, 1e-9])
def test_the_critical_count_is_the_largest_that_stays_below_the_tail(n, tail):
    """P(B ≤ j) < tail ≤ P(B ≤ j + 1), by exact whole numbers; a tail that is attained does not reject."""
    j = fair_critical(tail, n)
    assert j < 0 or binomial_lower(j, n) < Fraction(tail)
    assert binomial_lower(j + 1, n) >= Fraction(tail)
