"""z, Student's t and guarded t against their formulas in mpmath, on readings where doubles lose their digits."""

from functools import lru_cache
from math import inf

import mpmath as mp
import numpy as np
import pytest
from made_samples import fractions_of, sample_of
from scipy import stats
from test_distributions import t_density_by_mpmath, t_tail_by_mpmath

from meanlab.procedures.mean_tests import (
    Further,
    components_of,
    effective_df,
    guard,
    guarded_t,
    guarded_tails,
    known_sigma,
    students_t,
    unguard,
)

ALTERNATIVES = ("two-sided", "greater", "less")
LIMIT = mp.mpf(10) ** -11

# invented readings: (texts, target)
READINGS = {
    "plain": (["5.02", "5.04", "4.98", "5.01", "5.03"], "5.00"),
    "offset 1e9": (["1000000005.02", "1000000005.04", "1000000004.98", "1000000005.01"], "1000000005.00"),
    "offset 1e15, last digit": ([f"1000000000000000.{d}" for d in (1, 2, 3, 1, 7)], "1000000000000000"),
    "1e150": (["1.2e150", "1.9e150", "1.1e150", "1.4e150", "1.5e150", "9.9e150"], "1e150"),
    "1e-150": (["1.2e-150", "1.9e-150", "1.1e-150", "1.4e-150", "1.5e-150", "9.9e-150"], "2e-150"),
    "1e299": (["1.2e299", "1.9e299", "1.1e299", "9.4e299"], "-9e299"),
    "two readings": (["7.1", "7.3"], "7.0"),
    "one far value, n = 8": (["1", "1", "1", "1", "1", "1", "1", "2"], "1.5"),
    "far away, p to 1e-100": ([str(d % 7) for d in range(60)], "300"),
    "far away, upwards": ([str(d % 7) for d in range(60)], "-300"),
    "beyond every double": ([str(d % 7) for d in range(60)], "10000000"),
    "on the target": (["1", "2", "3"], "2"),
    "skewed": (["0.1", "0.2", "0.2", "0.3", "0.5", "0.9", "1.8", "4.1", "0.1", "0.15"], "0.4"),
}


class Moments:
    """Mean, difference, scatter and skewness of readings in mpmath, from exact fractions."""

    def __init__(self, texts, target):
        values = fractions_of(texts)
        held_against = fractions_of([target])[0]
        self.n = len(values)
        mean = sum(values) / self.n
        second, third = (sum((value - mean) ** power for value in values) / self.n for power in (2, 3))

        def exact(fraction):
            return mp.mpf(fraction.numerator) / fraction.denominator

        self.difference = exact(mean - held_against)
        self.mean, self.target = exact(mean), exact(held_against)
        self.u = mp.sqrt(exact(second) / (self.n - 1))
        self.ratio = self.difference / self.u
        self.skew = exact(third) / exact(second) ** mp.mpf("1.5") if third else mp.mpf(0)


@pytest.fixture(autouse=True)
def _fifty_digits():
    with mp.workdps(170):
        yield


def normal_tail(z):
    """Return P(Z > z)."""
    return mp.erfc(z / mp.sqrt(2)) / 2


def tails(statistic, df):
    """Return both tails of t, or of the normal distribution for infinite df."""
    if df == inf:
        return normal_tail(statistic), normal_tail(-statistic)
    return t_tail_by_mpmath(statistic, df), t_tail_by_mpmath(-statistic, df)


def p_of(alternative, greater, less):
    """Return p for the alternative: two-sided is twice the smaller tail."""
    return {"greater": greater, "less": less, "two-sided": min(mp.mpf(1), 2 * min(greater, less))}[alternative]


def root_of(function, low, high):
    """Return where a rising function is 0, by bisection."""
    for _ in range(300):
        middle = (low + high) / 2
        low, high = (middle, high) if function(middle) < 0 else (low, middle)
    return (low + high) / 2


@lru_cache
def critical_of(df, each):
    """Return the statistic whose tail is ``each``: Newton's steps on the logarithm of the tail, from scipy's value."""
    each = mp.mpf(each)
    q = mp.mpf(float(stats.norm.isf(float(each)) if df == inf else stats.t.isf(float(each), float(df))))
    for _ in range(4):
        height = mp.npdf(q) if df == inf else t_density_by_mpmath(q, df)
        tail = tails(q, df)[0]
        q += tail / height * mp.log(tail / each)
    return q


def close(found, expected, scale=None):
    """Tell whether a double agrees with mpmath to 11 digits of the expected value or of a scale."""
    size = abs(expected) if scale is None else max(abs(scale), abs(expected))
    return abs(mp.mpf(float(found)) - expected) <= LIMIT * size or (expected < mp.mpf(10) ** -290 and found < 1e-290)


def assert_agrees(test, moments, u, statistic, df, greater, less, critical):
    """Compare every field of a Test with its formula."""
    assert close(test.statistic, statistic)
    assert close(test.standard_error, u)
    assert close(test.p_greater, greater)
    assert close(test.p_less, less)
    assert close(test.p_value, p_of(test.alternative, greater, less))
    lower, upper = critical
    for found, expected in zip(test.critical, critical, strict=True):
        assert found is None or close(found, expected)
    assert (test.critical[0] is None) == (test.alternative == "greater")
    assert (test.critical[1] is None) == (test.alternative == "less")
    low, high = moments.difference - upper * u, moments.difference - lower * u
    assert (test.offsets[1] is None) == (test.interval.low is None) == (test.alternative == "less")
    assert (test.offsets[2] is None) == (test.interval.high is None) == (test.alternative == "greater")
    for end, offset, shown in ((low, test.offsets[1], test.interval.low), (high, test.offsets[2], test.interval.high)):
        if offset is not None:
            assert close(offset, end, moments.difference if abs(moments.difference) > upper * u else upper * u)
            assert close(shown, moments.target + end, moments.mean)
    assert (test.df or inf) == pytest.approx(float(df), rel=1e-12)


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("name", READINGS)
def test_students_t_agrees_with_its_formula(name, alternative):
    """T, p, critical values and interval of t keep 11 digits whatever the offset and the power of ten."""
    texts, target = READINGS[name]
    moments, alpha = Moments(texts, target), 0.05
    each = alpha / 2 if alternative == "two-sided" else alpha
    df = moments.n - 1
    q = critical_of(df, each)
    test = students_t(sample_of(texts, target), alternative, alpha)
    assert_agrees(test, moments, moments.u, moments.ratio, df, *tails(moments.ratio, df), (-q, q))


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("name", [name for name in READINGS if name != "two readings"])
def test_guarded_t_agrees_with_its_formula(name, alternative):
    """The guarded t is, per tail, the larger p of T and Hall's cubic, and its interval the hull of both."""
    texts, target = READINGS[name]
    moments, alpha = Moments(texts, target), 0.01
    each = alpha / 2 if alternative == "two-sided" else alpha
    a, df = moments.skew / (3 * mp.sqrt(moments.n)), moments.n - 1

    def cubic(ratio):
        return ratio + a * ratio**2 + a**2 * ratio**3 / 3 + a / 2

    of_t, of_cubic = tails(moments.ratio, df), tails(cubic(moments.ratio), df)
    q = critical_of(df, each)
    ends = [root_of(lambda T, wanted=wanted: cubic(T) - wanted, mp.mpf(-(10**9)), mp.mpf(10**9)) for wanted in (-q, q)]
    critical = (min(-q, ends[0]), max(q, ends[1]))
    test = guarded_t(sample_of(texts, target), alternative, alpha)
    greater, less = max(of_t[0], of_cubic[0]), max(of_t[1], of_cubic[1])
    assert_agrees(test, moments, moments.u, moments.ratio, df, greater, less, critical)
    assert close(test.skew_term, a) or a == 0


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("sigma_df", [inf, 7.0, 22.5])
@pytest.mark.parametrize(("target_u", "target_df", "own_u"), [(0.0, inf, 0.0), (0.015, inf, 0.01), (0.02, 9.0, 0.0)])
def test_known_sigma_agrees_with_its_formula(alternative, sigma_df, target_u, target_df, own_u):
    """z is (x̄ − μ₀)/√(σ²/n + u₀² + u_B²), normal, or t by Welch–Satterthwaite where degrees of freedom are given."""
    texts, target = READINGS["plain"]
    moments, sigma, alpha = Moments(texts, target), 0.02, 0.1
    parts = [(mp.mpf(sigma) ** 2 / moments.n, sigma_df), (mp.mpf(target_u) ** 2, target_df), (mp.mpf(own_u) ** 2, inf)]
    u = mp.sqrt(sum(square for square, _ in parts))
    spread = sum(square**2 / df for square, df in parts if df != inf)
    df = u**4 / spread if spread else inf
    each = alpha / 2 if alternative == "two-sided" else alpha
    q = critical_of(df, each)
    test = known_sigma(
        sample_of(texts, target), sigma, sigma_df, alternative, alpha, Further(target_u, target_df, own_u)
    )
    statistic = moments.difference / u
    assert_agrees(test, moments, u, statistic, df, *tails(statistic, df), (-q, q))


def test_one_reading_with_a_known_sigma_is_tested():
    """z needs one reading only: (5.3 − 5)/0.1 = 3, two-sided p = erfc(3/√2)."""
    test = known_sigma(sample_of(["5.3"], "5"), 0.1, inf, "two-sided", 0.05, Further())
    assert test.statistic == pytest.approx(3, rel=1e-15)
    assert close(test.p_value, mp.erfc(3 / mp.sqrt(2)))


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("name", ["plain", "offset 1e9", "two readings", "1e-150"])
def test_t_with_an_uncertain_target_agrees_with_its_formula(name, alternative):
    """With u₀ and u_B the statistic is over the combined uncertainty, with Welch–Satterthwaite's degrees of freedom."""
    texts, target = READINGS[name]
    moments, alpha = Moments(texts, target), 0.05
    target_u, target_df, own_u = (float(moments.u * share) for share in (0.8, 0, 0.3))
    target_df = 12.0
    squares = [moments.u**2, mp.mpf(target_u) ** 2, mp.mpf(own_u) ** 2]
    u = mp.sqrt(sum(squares))
    df = u**4 / (squares[0] ** 2 / (moments.n - 1) + squares[1] ** 2 / 12)
    each = alpha / 2 if alternative == "two-sided" else alpha
    q = critical_of(df, each)
    test = students_t(sample_of(texts, target), alternative, alpha, Further(target_u, target_df, own_u))
    statistic = moments.difference / u
    assert_agrees(test, moments, u, statistic, df, *tails(statistic, df), (-q, q))


def test_the_far_tail_keeps_its_digits():
    """A p-value near 1e-100 is right to 11 digits, not a rounded zero."""
    test = students_t(sample_of(*READINGS["far away, p to 1e-100"]), "less", 0.05)
    assert 1e-290 < test.p_value < 1e-100


def test_the_cubic_and_its_inverse_undo_each_other():
    """g⁻¹(g(T)) = T for every skewness, also where the cubic is flat; g rises."""
    T = np.linspace(-40, 40, 2001)
    for a in (-3.0, -0.6, -0.05, 0.0, 1e-9, 0.02, 0.35, 1.1):
        flat = (1 + a * T) ** 2 < 1e-3
        assert np.allclose(unguard(guard(T, a), a)[~flat], T[~flat], rtol=1e-9, atol=1e-9)
        assert np.allclose(unguard(guard(T, a), a)[flat], T[flat], rtol=1e-3, atol=1e-3)
        assert np.all(np.diff(guard(T, a)) >= -1e-12)


def test_the_guarded_tails_of_many_samples_are_those_of_each():
    """Samples along the first axis give what single samples give, to the last bit."""
    generator = np.random.default_rng(20261201)
    ratios, terms = generator.normal(0, 3, 50), generator.normal(0, 0.3, 50)
    together = guarded_tails(ratios, terms, 9)
    single = [guarded_tails(ratio, term, 9) for ratio, term in zip(ratios, terms, strict=True)]
    for side in (0, 1):
        assert together[side].tolist() == [float(pair[side]) for pair in single]


def test_effective_degrees_of_freedom_of_gum_h1():
    """JCGM 100:2008, H.1: 5.8 (24), 3.9 (5), 6.7 (8) combine to ν_eff printed as 25; the formula gives 25.447."""
    assert int(effective_df([(5.8, 24), (3.9, 5), (6.7, 8)])) == 25
    assert effective_df([(1.0, inf), (2.0, inf)]) == inf


def test_shares_of_the_components_add_up_to_one():
    """The shares are those of u², whatever the unit; a component of 0 is left away."""
    parts = components_of(3e-200, 4, Further(4e-200, inf, 0.0))
    assert [part.name for part in parts] == ["scatter", "target"]
    assert [part.share for part in parts] == pytest.approx([9 / 25, 16 / 25], rel=1e-14)
