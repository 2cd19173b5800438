"""The moments of a Sample against fractions.Fraction: each is the exact value, rounded once."""

from fractions import Fraction
from math import nextafter

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from made_samples import fractions_of, sample_of

from meanlab.core.numbers import root
from meanlab.procedures.sample import Sample, power_sums

STEADY = settings(max_examples=150, deadline=None, derandomize=True, database=None)


@st.composite
def number_texts(draw, most: int = 90) -> list[str]:
    """Draw readings as typed: few or many, coarse or fine, near a large offset or far apart, full of ties."""
    places = draw(st.sampled_from([0, 1, 4, 9, 150, 290]))
    offset = draw(st.sampled_from([0, 7, 10**9, 2**62, 10**30]))
    spread = draw(st.sampled_from([1, 5, 300, 10**6, 2**31, 2**40, 10**25]))
    steps = draw(st.lists(st.integers(-spread, spread), min_size=1, max_size=most))
    return [f"{offset + step}e-{places}" for step in steps]


def is_nearest_root(found: float, square: Fraction) -> bool:
    """Tell whether a double is the one nearest to √square: the ends of its rounding range enclose the root."""
    if found == 0:
        return square == 0
    low, high = ((Fraction(found) + Fraction(nextafter(found, end))) / 2 for end in (0.0, float("inf")))
    return low**2 <= square <= high**2


def is_nearest_signed_root(found: float, sign: Fraction, square: Fraction) -> bool:
    """Tell the same of a root that carries the sign of another number."""
    return is_nearest_root(abs(found), square) and (found < 0) == (sign < 0 and square != 0)


@STEADY
@given(number_texts(), st.integers(-30, 30), st.integers(1, 6))
def test_moments_are_exact_and_rounded_once(texts, off_target, divisor):
    """Mean, difference, s, standard error, T and g₁ are the doubles nearest to the values of exact fractions."""
    target = texts[0]
    plain = sample_of(texts, target)
    sample = Sample(plain.whole, plain.target + off_target, plain.exponent, divisor)
    unit = Fraction(10) ** sample.exponent / divisor
    values, held_against = [value / divisor for value in fractions_of(texts)], sample.target * unit
    n = len(values)
    mean = sum(values) / n
    assert sample.mean == float(mean)
    assert sample.difference == float(mean - held_against)
    if n == 1:
        assert sample.s == sample.standard_error == 0
        return
    second, third = (sum((value - mean) ** power for value in values) / n for power in (2, 3))
    variance = second * n / (n - 1)
    assert is_nearest_root(sample.s, variance)
    assert is_nearest_root(sample.standard_error, variance / n)
    if variance:
        assert is_nearest_signed_root(sample.ratio, mean - held_against, (mean - held_against) ** 2 * n / variance)
        assert is_nearest_signed_root(sample.skewness, third, third**2 / second**3)
    else:
        assert sample.skewness == 0


@STEADY
@given(number_texts(), st.integers(-5, 5))
def test_sums_of_powers_do_not_depend_on_how_they_are_summed(texts, shift):
    """Narrow numbers in halves of 64 bits, wide ones as Python's integers: the same exact sums."""
    whole = sample_of(texts).whole
    origin = int(whole[0]) + shift
    expected = tuple(sum((int(number) - origin) ** power for number in whole) for power in (1, 2, 3))
    assert power_sums(whole, origin) == expected
    assert power_sums(whole.astype(object), origin) == expected


def test_many_narrow_numbers_at_the_edge_of_31_bits_do_not_overflow():
    """A hundred thousand differences of 2³¹ − 1 have the sums of a closed form."""
    width, count = 2**31 - 1, 100_000
    whole = np.full(count, width, dtype=np.int64)
    whole[0] = 0
    rest = count - 1
    assert power_sums(whole, 0) == (rest * width, rest * width**2, rest * width**3)
    assert power_sums(-whole, 0) == (-rest * width, rest * width**2, -rest * width**3)


@STEADY
@given(number_texts())
def test_shifted_units_keep_their_proportions(texts):
    """What the checks get is (x − x₁) over its largest size, each rounded once."""
    values = fractions_of(texts)
    steps = [value - values[0] for value in values]
    widest = max(map(abs, steps))
    expected = [float(step / widest) if widest else 0.0 for step in steps]
    assert sample_of(texts).shifted.tolist() == expected


def test_a_root_just_above_the_middle_of_two_doubles_is_rounded_up():
    """√(k² + 1) lies above k = 2⁵³ + 1, the middle of two doubles, by less than 1e-16 of a step: it is not a tie."""
    middle = 2**53 + 1
    assert root(middle**2, 1) == 2.0**53
    assert root(middle**2 + 1, 1) == 2.0**53 + 2
    assert root(middle**2 - 1, 1) == 2.0**53


def test_differences_from_a_target_beyond_64_bits_are_exact():
    """A target at the end of a very wide equivalence limit does not overflow the units' own 64 bits."""
    sample = sample_of(["1", "2", "5"]).at(-(10**30))
    assert sample.differences.tolist() == [10**30 + 1, 10**30 + 2, 10**30 + 5]
    assert sample.at(1).differences.tolist() == [0, 1, 4]


def test_readings_far_below_their_target_have_a_finite_ratio():
    """A ratio that no double can hold is the largest double, with its sign: nothing overflows."""
    assert sample_of(["1e-300", "2e-300"], "1e300").ratio == -float(np.finfo(float).max)
    assert sample_of(["1e-300", "2e-300"], "-1e300").ratio == float(np.finfo(float).max)
