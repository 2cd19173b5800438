"""Rounding as one long table each: (value, places or uncertainty, expected text), extremes included."""

from decimal import Decimal
from math import inf, nan

import pytest
from hypothesis import given
from hypothesis import strategies as st

from meanlab.core.results import Interval, Test
from meanlab.wording import numbers

DECIMAL_TEXTS = [
    # half to even of the shortest decimal that gives the double: ISO 80000-1, Annex B, rule A; JCGM 100:2008, 7.2.6
    (0.125, 2, "0.12"),
    (0.375, 2, "0.38"),
    (2.5, 0, "2"),
    (-2.5, 0, "−2"),
    (2.675, 2, "2.68"),  # typed as 2.675, a tie: to the even digit, whatever the binary tail of the double
    (1.005, 2, "1.00"),
    (Decimal("1.005"), 2, "1.00"),  # a true tie goes to the even digit
    (Decimal("1.015"), 2, "1.02"),
    (0.0, 2, "0.00"),
    (-0.0, 2, "0.00"),
    (-0.004, 2, "0.00"),
    (-0.006, 2, "−0.01"),
    (5.0, 3, "5.000"),
    (9.9996, 3, "10.000"),
    (12345.6, -2, "12300"),
    (12350, -2, "12400"),
    (49, -2, "0"),
    (9999999.4, 0, "9999999"),
    (9999999.6, 0, "1.0000000 × 10⁷"),
    (12345678.0, -5, "1.23 × 10⁷"),
    (1e-4, 5, "0.00010"),
    (9.99e-5, 6, "0.000100"),
    (1.234e-6, 7, "1.2 × 10⁻⁶"),
    (-1.234e-6, 7, "−1.2 × 10⁻⁶"),
    (1.234e-6, 3, "0.000"),
    (1e-300, 301, "1.0 × 10⁻³⁰⁰"),
    (5e-324, 324, "5 × 10⁻³²⁴"),
    (1e300, -299, "1.0 × 10³⁰⁰"),
    (1.7976931348623157e308, -306, "1.80 × 10³⁰⁸"),
    (0.0, 300, "0"),
    (inf, 2, "∞"),
    (-inf, 2, "−∞"),
    (nan, 2, "–"),
]


@pytest.mark.parametrize(("value", "places", "expected"), DECIMAL_TEXTS)
def test_decimal_text(value, places, expected):
    """A number is rounded once, half to even, with a proper minus and never as minus zero."""
    assert numbers.decimal_text(value, places) == expected


@pytest.mark.parametrize(("value", "places", "expected"), DECIMAL_TEXTS)
def test_decimal_comma(value, places, expected):
    """The decimal sign of the readings replaces the point and nothing else."""
    assert numbers.decimal_text(value, places, ",") == expected.replace(".", ",")


ROUNDED_TO_UNCERTAINTY = [
    # JCGM 100:2008 (GUM), 7.2.6: "10.057 62 Ω with u = 27 mΩ should be rounded to 10.058 Ω"
    (10.05762, 0.027, "10.058"),
    # JCGM 100:2008 (GUM), 7.2.2: m = 100.021 47 g with u = 0.35 mg, and U = 0.79 mg in 7.2.4
    (100.02147, 0.35e-3, "100.02147"),
    (100.02147, 0.79e-3, "100.02147"),
    (5.0216, 0.01163, "5.022"),
    (5.0216, 0.00996, "5.022"),  # 0.00996 has two significant digits as 0.010
    (5.0216, 0.00994, "5.0216"),
    (1234.5, 340.0, "1230"),
    (1234.5, 3400.0, "1200"),
    (1e9, 2.5e7, "1.000 × 10⁹"),
    (3.2e-7, 4.1e-8, "3.20 × 10⁻⁷"),
    (1e-300, 1e-301, "1.00 × 10⁻³⁰⁰"),
    (0.0, 0.5, "0.00"),
    (-0.001, 0.5, "0.00"),
]


@pytest.mark.parametrize(("value", "uncertainty", "expected"), ROUNDED_TO_UNCERTAINTY)
def test_rounding_to_the_place_of_the_uncertainty(value, uncertainty, expected):
    """A value is shown to the decimal place of its uncertainty at two significant digits."""
    assert numbers.decimal_text(value, numbers.places_for(uncertainty)) == expected


@pytest.mark.parametrize("uncertainty", [0.0, -1.0, inf, nan])
def test_no_digits_without_an_uncertainty(uncertainty):
    """An uncertainty that sets no digits is refused, so that no caller rounds to nonsense."""
    with pytest.raises(ValueError, match="above 0 and finite"):
        numbers.places_for(uncertainty)


@given(st.floats(min_value=1e-300, max_value=1e300), st.integers(1, 6))
def test_significant_digits_are_as_many_as_asked(uncertainty, digits):
    """The uncertainty itself, rounded at its own places, has exactly so many significant digits."""
    rounded = numbers.rounded_to(uncertainty, numbers.places_for(uncertainty, digits))
    assert len(rounded.as_tuple().digits) == digits


@given(st.floats(allow_nan=False, allow_infinity=False), st.integers(-20, 20))
def test_rounding_is_within_half_a_step(value, places):
    """No text is further from its value than half a step of its last place."""
    assert abs(numbers.rounded_to(value, places) - Decimal(repr(value))) <= Decimal("0.5").scaleb(-places)


@given(st.floats(allow_nan=False, allow_infinity=False), st.integers(-20, 20))
def test_zero_has_no_sign(value, places):
    """A text of zeros only never carries a minus or a plus."""
    text = numbers.signed_text(value, places)
    assert text[0] not in "+−" or any(digit in text for digit in "123456789")


SIGNED = [
    (0.0216, 4, "+0.0216"),
    (-0.0216, 4, "−0.0216"),
    (0.00001, 2, "0.00"),
    (-0.00001, 2, "0.00"),
    (0.0, 1, "0.0"),
    (2.5e8, -7, "+2.5 × 10⁸"),
]


@pytest.mark.parametrize(("value", "places", "expected"), SIGNED)
def test_signed_text(value, places, expected):
    """A difference shows on which side it lies, unless it rounds to 0."""
    assert numbers.signed_text(value, places) == expected


SIGNIFICANT = [
    (0.018284, 3, "0.0183"),
    (0.0996, 2, "0.10"),
    (999.6, 3, "1000"),
    (1234.5, 2, "1200"),
    (-0.5, 2, "−0.50"),
    (0.0, 2, "0"),
    (1.24e-9, 2, "1.2 × 10⁻⁹"),
    (inf, 2, "∞"),
]


@pytest.mark.parametrize(("value", "digits", "expected"), SIGNIFICANT)
def test_significant(value, digits, expected):
    """A number can be had with a count of significant digits, zeros at the end included."""
    assert numbers.significant(value, digits) == expected


P_TEXTS = [
    (0.0018234, 0.05, "p = 0.0018"),
    (0.63, 0.05, "p = 0.63"),
    (0.1, 0.05, "p = 0.10"),
    (1.0, 0.05, "p > 0.99"),
    (0.996, 0.05, "p > 0.99"),
    (0.05, 0.05, "p = 0.050"),
    (0.0499, 0.05, "p = 0.0499"),
    (0.0501, 0.05, "p = 0.0501"),
    (0.04997, 0.05, "p = 0.04997"),
    (0.050000001, 0.05, "p = 0.050000001"),
    (0.049999999999999996, 0.05, "p = 0.049999999999999996"),  # the double just below 0.05
    (0.0544, 0.05, "p = 0.054"),
    (0.0123, 0.0125, "p = 0.012"),
    (0.01246, 0.0125, "p = 0.012"),
    (0.01254, 0.0125, "p = 0.013"),
    (0.0124999, 0.0125, "p = 0.012"),
    (0.012499, 0.012, "p = 0.0125"),
    (0.001, 0.05, "p = 0.0010"),
    (0.00099999, 0.05, "p < 0.001"),
    (1e-100, 0.05, "p < 0.001"),
    (0.0, 0.05, "p < 0.001"),
    (0.0005, 0.001, "p < 0.001"),
    (0.001, 0.001, "p = 0.0010"),
    (0.0010001, 0.001, "p = 0.0010001"),
    (0.0007, 0.0005, "p = 0.00070"),
    (0.0004, 0.0005, "p < 0.0005"),
    (1e-9, 1e-7, "p < 1 × 10⁻⁷"),
    (2.34e-7, 1e-7, "p = 2.3 × 10⁻⁷"),
]


@pytest.mark.parametrize(("p", "significance", "expected"), P_TEXTS)
def test_p_text(p, significance, expected):
    """p has two significant digits, more only where two would touch or cross α, and is never written as 0.000."""
    assert numbers.p_text(p, significance) == expected


@given(st.floats(0.0, 1.0), st.sampled_from([0.05, 0.01, 0.1, 0.001, 0.0005, 0.025]))
def test_p_as_printed_decides_as_p_does(p, significance):
    """Whoever compares the printed p with α comes to the decision of the unrounded p."""
    text = numbers.p_text(p, significance)
    assert "0.000 " not in f"{text} "
    if text.startswith("p < "):
        assert p < float(text[4:]) <= significance or (p < 0.001 <= significance)
    elif "×" not in text:
        assert (float(text[4:]) < significance) == (p < significance)


DEGREES = [(11, "11"), (11.0, "11"), (11.8312, "11.8"), (11.96, "12.0"), (1.0, "1"), (inf, "∞"), (250000.0, "250000")]


@pytest.mark.parametrize(("df", "expected"), DEGREES)
def test_df_text(df, expected):
    """Whole degrees of freedom have no places, effective ones have one."""
    assert numbers.df_text(df) == expected


def a_test(procedure, statistic, df=None, n_used=10):
    """Return a test of which only the statistic matters."""
    return Test(
        procedure, "mean", "two-sided", 0.05, 10, n_used, statistic, df, 0.5, 0.5, 0.5, (None, None), False,
        None, None, Interval(None, None, 0.95, 0.95), 0.0,
    )  # fmt: skip


STATISTICS = [
    (a_test("t", 4.0791, 11.0), "t(11) = 4.08"),
    (a_test("t", -4.0791, 11.8312), "t(11.8) = −4.08"),
    (a_test("guarded_t", 2.0, 19.0), "t(19) = 2.00"),
    (a_test("t", 1.5e9, 2.0), "t(2) = 1.500 × 10⁹"),
    (a_test("t", -0.001, 2.0), "t(2) = 0.00"),
    (a_test("z", 1.96), "z = 1.96"),
    (a_test("z", 1.96, 20.0), "t(20) = 1.96"),
    (a_test("signed_rank", 54.0), "W⁺ = 54"),
    (a_test("signed_rank", 54.5), "W⁺ = 54.5"),
    (a_test("sign", 9.0), "9 of 10 above"),
]


@pytest.mark.parametrize(("test", "expected"), STATISTICS)
def test_statistic_text(test, expected):
    """Each procedure writes its statistic as the trade does; z with σ from records is a t."""
    assert numbers.statistic_text(test) == expected


def test_statistic_with_decimal_comma():
    """The decimal comma reaches degrees of freedom, statistic and ranks."""
    assert numbers.statistic_text(a_test("t", 4.0791, 11.8312), ",") == "t(11,8) = 4,08"
    assert numbers.statistic_text(a_test("signed_rank", 54.5), ",") == "W⁺ = 54,5"


LEVELS = [
    (0.95, "95 %"),
    (1 - 0.05, "95 %"),
    (1 - 2 * 0.05, "90 %"),
    (0.05, "5 %"),
    (0.975, "97.5 %"),
    (0.001, "0.1 %"),
    (1 - 1e-9, "99.9999999 %"),
    (1.0, "almost 100 %"),
    (0.005, "0.5 %"),
]


@pytest.mark.parametrize(("level", "expected"), LEVELS)
def test_level_text(level, expected):
    """A level is written as it was chosen, without the noise of binary fractions."""
    assert numbers.level_text(level) == expected


def ends(low, high):
    """Return a 95 % interval."""
    return Interval(low, high, 0.95, 0.95)


INTERVALS = [
    (ends(5.0099, 5.0332), 3, "mg/L", None, "5.010 mg/L to 5.033 mg/L"),
    (ends(5.0099, 5.0332), 3, "", None, "5.010 to 5.033"),
    (ends(5.0099, None), 2, "mg/L", None, "at least 5.01 mg/L"),
    (ends(None, 5.0332), 2, "mg/L", None, "at most 5.03 mg/L"),
    (ends(None, None), 2, "mg/L", None, "no bounds"),
    (ends(-0.004, 0.01), 2, "%", None, "0.00 % to 0.01 %"),
    (ends(5.0004, 5.0332), 3, "mg/L", "5.000", "5.0004 mg/L to 5.0332 mg/L"),  # would be 5.000, the target
    (ends(4.97, 4.9998), 3, "mg/L", "5.000", "4.9700 mg/L to 4.9998 mg/L"),
    (ends(5.0, 5.0332), 3, "mg/L", "5.000", "5.000 mg/L to 5.033 mg/L"),  # an end on the target stays there
    (ends(5.00045, 5.02), 3, "mg/L", "5.0004", "5.00045 mg/L to 5.02000 mg/L"),  # 5.000 and 5.0004 would not do
    (ends(5.0004, None), 3, "mg/L", "5", "at least 5.0004 mg/L"),
    (ends(8e-5, 1.2e-4), 6, "g", None, "8.0 × 10⁻⁵ g to 0.000120 g"),
]


@pytest.mark.parametrize(("interval", "places", "unit", "target", "expected"), INTERVALS)
def test_interval_text(interval, places, unit, target, expected):
    """An interval is written with one number of places, and its ends keep to their side of the target."""
    exact_target = None if target is None else Decimal(target)
    assert numbers.interval_text(interval, places, ".", unit, exact_target) == expected


@given(st.floats(-1e6, 1e6), st.decimals(-1000, 1000, places=3), st.integers(-2, 5))
def test_an_end_keeps_its_side_of_the_target(end, target, places):
    """However near to the target, a shown value lies on the side of it where the value lies."""
    shown = numbers.rounded_to(Decimal(repr(end)), numbers.places_apart(end, target, places))
    if end != float(target):
        assert (shown > target) == (end > float(target))
        assert (shown < target) == (end < float(target))


UNITS = [
    ("5.02", "mg/L", "5.02 mg/L"),
    ("5.02", "%", "5.02 %"),  # ISO 80000-1, 7.1.4: a space before % as before every unit symbol
    ("20.1", "°C", "20.1 °C"),
    ("45", "°", "45°"),  # ISO 80000-1, 7.1.4: the exception is degree, minute and second of plane angle
    ("5.02", "", "5.02"),
    ("5.02", "  mg /  L ", "5.02 mg / L"),
    ("5.02", "\t", "5.02"),
]


@pytest.mark.parametrize(("value", "unit", "expected"), UNITS)
def test_unit_text(value, unit, expected):
    """A space stands between a number and its unit, and none where there is no unit."""
    assert numbers.unit_text(value, unit) == expected


def test_percent_text():
    """A relative difference has its sign, a space before % and the decimal sign of the readings."""
    assert numbers.percent_text(0.4321, 2, ",") == "+0,43 %"
    assert numbers.percent_text(-0.001, 2) == "0.00 %"
