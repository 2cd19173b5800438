"""The normal model on below- and above-limit readings, against published data and 50 digits."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from mpmath import findroot, log, mp, mpf, ncdf, npdf
from scipy import special, stats

from meanlab.checks.censored_fit import Entries, censored_fit_of, fit, likelihood_ratio_p, profile, profile_interval
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet

# US EPA 1989/1992: 24 sulfate results, 3 below 1450 mg/L (printed values from memory; ML values at 50 digits)
SULFATE = [1850, 1760, 1710, 1575, 1475, 1780, 1790, 1780, 1790, 1800, 1800, 1840, 1820, 1860, 1780, 1760, 1800, 1900]
SULFATE += [1770, 1790, 1780]
# Tobin 1958, Econometrica 26:24: 20 values, 13 at the limit 0 (ML values at 50 digits)
TOBIN = [0.7, 3.7, 3.0, 10.4, 1.5, 3.5, 6.1]


def below(values, limit, count, **question):
    """Return the fit of values with so many entries below a limit."""
    censored = tuple({"index": place, "kind": "below", "limit": limit} for place in range(count))
    return censored_fit_of(ReadingSet(tuple(map(str, values)), censored=censored), Question("1700", **question))


def test_the_sulfate_readings():
    """Mean and s are the maximum-likelihood values at 50 digits, near Cohen's table values 1723.66 and 155.31."""
    found = below(SULFATE, "1450", 3)
    assert found.mean == pytest.approx(1723.9951053560458, rel=1e-13)
    assert found.s == pytest.approx(153.6450900759109, rel=1e-13)
    assert (found.n, found.censored) == (24, 3)
    assert found.mean == pytest.approx(1723.66, rel=1e-3)


def test_tobins_values():
    """Also with 65 % below the limit the top is found, though such a fit is not shown."""
    mean, s, _ = fit(Entries(np.array(TOBIN), np.zeros(13), np.ones(13)))
    assert mean == pytest.approx(-2.2274394398187196, rel=1e-12)
    assert s == pytest.approx(5.945262217102683, rel=1e-12)


def fifty_digits(known, limits, sides):
    """Return the mean and s at which both slopes of the likelihood are 0, and the likelihood's logarithm."""
    mp.dps = 50
    known, limits = [mpf(x) for x in known], [mpf(x) for x in limits]

    def slopes(mean, s):
        z = [(x - mean) / s for x in known]
        w = [side * (limit - mean) / s for limit, side in zip(limits, sides, strict=True)]
        mills = [npdf(v) / ncdf(v) for v in w]
        first = sum(z) - sum(side * m for side, m in zip(sides, mills, strict=True))
        second = sum(v * v for v in z) - len(z) - sum(v * m for v, m in zip(w, mills, strict=True))
        return first, second

    start = (sum(known) / len(known), mpf(np.std(np.array(known, dtype=float))))
    mean, s = findroot(slopes, start)
    return mean, s, log_likelihood(known, limits, sides, mean, s)


def log_likelihood(known, limits, sides, mean, s):
    """Return the logarithm of the likelihood without the constant of the normal density."""
    hidden = sum(log(ncdf(side * (limit - mean) / s)) for limit, side in zip(limits, sides, strict=True))
    return hidden - len(known) * log(s) - sum(((x - mean) / s) ** 2 for x in known) / 2


BOTH_SIDES = (
    ["2.1", "2.7", "3.0", "3.3", "3.9", "4.4", "4.6", "5.2"],
    ["2", "2", "1.5", "5", "5.5"],
    [1, 1, 1, -1, -1],
)


def test_entries_on_both_sides_at_fifty_digits():
    """Entries below one limit and above another give the mean and s at which both slopes are 0 at 50 digits."""
    known, limits, sides = BOTH_SIDES
    mean, s, top = fifty_digits(known, limits, sides)
    found = fit(Entries(np.array(known, dtype=float), np.array(limits, dtype=float), np.array(sides, dtype=float)))
    assert found[0] == pytest.approx(float(mean), rel=1e-13)
    assert found[1] == pytest.approx(float(s), rel=1e-13)
    assert found[2] == pytest.approx(float(top), rel=1e-13)


def test_interval_and_p_are_those_of_the_profile_at_fifty_digits():
    """At both ends of the interval twice the fall of the profile is χ²(0.95; 1), and p is its tail at the target."""
    known, limits, sides = BOTH_SIDES
    censored = tuple(
        {"index": place, "kind": "below" if side > 0 else "above", "limit": limit}
        for place, (limit, side) in enumerate(zip(limits, sides, strict=True))
    )
    found = censored_fit_of(ReadingSet(tuple(known), censored=censored), Question("2.8"))
    _, _, top = fifty_digits(known, limits, sides)
    exact = [mpf(x) for x in known], [mpf(x) for x in limits], sides

    def fall(mean):
        def slope(s):
            step = mpf("1e-20")
            up, down = (log_likelihood(*exact, mean, s + sign * step) for sign in (1, -1))
            return (up - down) / (2 * step)

        s = findroot(slope, mpf(found.s) + abs(mean - mpf(found.mean)) / 2)
        return float(2 * (top - log_likelihood(*exact, mean, s)))

    for end in (found.interval.low, found.interval.high):
        assert fall(mpf(end)) == pytest.approx(stats.chi2.ppf(0.95, 1), rel=1e-9)
    assert found.p_value == pytest.approx(stats.chi2.sf(fall(mpf("2.8")), 1), rel=1e-9)


def test_without_hidden_entries_it_is_the_plain_normal_fit():
    """With nothing censored mean and s are x̄ and s with divisor n, and the profile falls by n/2·ln(1 + d²/s²)."""
    x = np.array(SULFATE, dtype=float)
    entries = Entries(x, np.zeros(0), np.zeros(0))
    mean, s, top = fit(entries)
    assert (mean, s) == pytest.approx((x.mean(), x.std()), rel=1e-13)
    assert top - profile(entries, mean + 30) == pytest.approx(len(x) / 2 * np.log1p((30 / s) ** 2), rel=1e-10)
    assert likelihood_ratio_p(entries, mean, top) == pytest.approx(1.0, abs=1e-6)


def test_scipy_finds_the_same_top_roughly():
    """scipy's general optimiser on the same readings agrees to the digits it has."""
    data = stats.CensoredData(uncensored=SULFATE, left=[1450] * 3)
    mean, s = stats.norm.fit(data)
    found = below(SULFATE, "1450", 3)
    assert (found.mean, found.s) == pytest.approx((mean, s), rel=2e-4)


@pytest.mark.parametrize(
    ("values", "limit", "count", "why"),
    [
        (SULFATE[:5], "1450", 4, "nine entries"),
        (SULFATE[:6], "1450", 7, "more hidden than known"),
        ([1500] * 8, "1450", 4, "known ones all equal"),
        (SULFATE[:9], None, 1, "an entry without a limit"),
    ],
)
def test_no_fit_where_it_would_be_mostly_model(values, limit, count, why):
    """There is no fit with few entries, few known ones, no scatter or unknown limits."""
    assert below(values, limit, count) is None


def test_fifteen_digits_of_offset_do_not_matter():
    """Readings with a large common part give the same s to full accuracy: they are scaled exactly first."""
    far = [f"1000000000{value}.0" for value in SULFATE]
    found, plain = below(far, "10000000001450", 3), below(SULFATE, "1450", 3)
    assert found.s == pytest.approx(plain.s, rel=1e-12)


@settings(max_examples=30, deadline=None)
@given(st.lists(st.integers(1, 400), min_size=8, max_size=20, unique=True), st.integers(1, 5), st.integers(-3, 3))
def test_the_fit_moves_with_the_unit(values, hidden, power):
    """In another unit mean, s and interval change by the factor, p not at all."""
    values = [value + 100 for value in values]
    count = max(hidden, 10 - len(values))
    plain = below(values, "100", count)
    scaled = tuple(f"{value}e{power}" for value in values)
    censored = tuple({"index": place, "kind": "below", "limit": f"100e{power}"} for place in range(count))
    moved = censored_fit_of(ReadingSet(scaled, censored=censored), Question(f"1700e{power}"))
    factor = 10.0**power
    assert (moved.mean, moved.s) == pytest.approx((plain.mean * factor, plain.s * factor), rel=1e-10)
    assert moved.interval.low == pytest.approx(plain.interval.low * factor, rel=1e-8, abs=1e-6 * factor)
    assert moved.p_value == pytest.approx(plain.p_value, rel=1e-7, abs=1e-300)


def test_a_target_far_away_has_p_0():
    """A target a googol scatters away ends in p = 0, not in an overflow."""
    found = censored_fit_of(
        ReadingSet(tuple(map(str, SULFATE)), censored=({"index": 0, "kind": "below", "limit": "1450"},)),
        Question("1e300"),
    )
    assert found.p_value == pytest.approx(0.0, abs=1e-300)


@pytest.mark.parametrize("far", [30.0, 1e3, 1e6])
@pytest.mark.parametrize("side", [1.0, -1.0])
def test_limits_far_from_the_readings(far, side):
    """Limits many scatters away still end where both slopes of the likelihood are 0 to 12 digits."""
    made = np.random.default_rng(2)
    entries = Entries(made.normal(size=8) / far, np.array([-1.0, -0.6, 0.7]), side * np.array([1.0, 1.0, -1.0]))
    mean, s, top = fit(entries)
    z, w = (entries.known - mean) / s, entries.sides * (entries.limits - mean) / s
    mills = np.exp(-w * w / 2 - special.log_ndtr(w)) / np.sqrt(2 * np.pi)
    assert z.sum() == pytest.approx(entries.sides @ mills, abs=1e-12 * (np.abs(z).sum() + mills.sum()))
    assert z @ z - len(z) == pytest.approx(w @ mills, abs=1e-12 * (z @ z + len(z) + np.abs(w) @ mills))
    low, high = profile_interval(entries, mean, s, top, 0.05)
    assert low < mean < high
