"""Numbers as text: rounded once, exactly, with the decimal sign that the readings used.

Rounding is half to even (ISO 80000-1, Annex B, rule A) of the shortest decimal that gives the double, the one a reader
would write down, so that a mean and its difference from the target round alike. The minus is the minus sign, and powers
of ten are written only below 0.0001 and from 10,000,000 on.
"""

from decimal import ROUND_HALF_EVEN, Context, Decimal
from math import isfinite, isinf, isnan

from meanlab.core.results import Interval, Test

PLAIN_FROM = Decimal("1e-4")
PLAIN_BELOW = Decimal("1e7")
MOST_DIGITS_OF_A_DOUBLE = 17
LONGEST_ZERO = 7
SMALLEST_P_SHOWN = 0.001
LARGEST_P_SHOWN = 0.995
WHOLE_DEGREES, MOST_DEGREES = 100, 1000
MINUS = "−"
PLANE_ANGLES = ("°", "′", "″")

_CONTEXT = Context(prec=3000, rounding=ROUND_HALF_EVEN)
_RAISED = str.maketrans("0123456789-", "⁰¹²³⁴⁵⁶⁷⁸⁹⁻")


def decimal_text(value: float | Decimal, places: int, sign: str = ".") -> str:
    """Return a number rounded to so many decimal places; negative places round to tens, hundreds, …

    A number that rounds to 0 has no minus; the powers of ten outside 0.0001 to 10,000,000 stand behind ×.

    >>> decimal_text(-0.004, 2), decimal_text(5.0216, 3, ","), decimal_text(1.234e-6, 7)
    ('0.00', '5,022', '1.2 × 10⁻⁶')
    """
    if isnan(value):
        return "–"
    if isinf(value):
        return f"{MINUS}∞" if value < 0 else "∞"
    rounded = rounded_to(value, places)
    minus = MINUS if rounded < 0 else ""
    return minus + _unsigned(abs(rounded), places).replace(".", sign)


def rounded_to(value: float | Decimal, places: int) -> Decimal:
    """Return the exact decimal nearest to a number at so many places, half to even.

    >>> rounded_to(2.5, 0), rounded_to(0.125, 2)
    (Decimal('2'), Decimal('0.12'))
    """
    exact = value if isinstance(value, Decimal) else _shortest(value)
    return exact.quantize(Decimal((0, (1,), -places)), context=_CONTEXT)


def _unsigned(rounded: Decimal, places: int) -> str:
    if not rounded:
        return "0" if not 0 < places <= LONGEST_ZERO else f"{0:.{places}f}"
    if PLAIN_FROM <= rounded < PLAIN_BELOW:
        return f"{rounded:f}"
    power = rounded.adjusted()
    mantissa = rounded.scaleb(-power, context=_CONTEXT)
    return f"{mantissa:.{max(0, power + places)}f} × 10{str(power).translate(_RAISED)}"


def signed_text(value: float | Decimal, places: int, sign: str = ".") -> str:
    """Return a difference with its sign, + included; one that rounds to 0 has none.

    >>> signed_text(0.0216, 3), signed_text(-0.0216, 3), signed_text(0.0001, 2)
    ('+0.022', '−0.022', '0.00')
    """
    text = decimal_text(value, places, sign)
    return f"+{text}" if isfinite(value) and rounded_to(value, places) > 0 else text


def places_for(uncertainty: float, digits: int = 2) -> int:
    """Return the decimal places at which an uncertainty has so many significant digits once it is rounded.

    Raises ValueError for an uncertainty that is not above 0 and finite. Source: JCGM 100:2008, 7.2.6.

    >>> places_for(0.027), places_for(0.0996), places_for(340)
    (3, 2, -1)
    """
    if not isfinite(uncertainty) or uncertainty <= 0:
        raise ValueError(f"An uncertainty that sets digits is above 0 and finite, not {uncertainty}.")
    places = digits - 1 - Decimal(float(uncertainty)).adjusted()
    return digits - 1 - rounded_to(uncertainty, places).adjusted()


def significant(value: float, digits: int, sign: str = ".") -> str:
    """Return a number with so many significant digits.

    >>> significant(0.018284, 3), significant(-1234.5, 2), significant(0.0, 2)
    ('0.0183', '−1200', '0')
    """
    if value == 0 or not isfinite(value):
        return decimal_text(value, 0, sign)
    return decimal_text(value, places_for(abs(value), digits), sign)


def number_text(value: float | Decimal, sign: str = ".") -> str:
    """Return a number by its shortest decimal text (a setting, not a result).

    >>> number_text(0.05, ","), number_text(1e-7), number_text(20.0)
    ('0,05', '1 × 10⁻⁷', '20')
    """
    exact = (value if isinstance(value, Decimal) else Decimal(repr(float(value)))).normalize(_CONTEXT)
    exponent = exact.as_tuple().exponent
    return decimal_text(exact, -exponent if isinstance(exponent, int) else 0, sign)


def p_text(p: float, significance: float, sign: str = ".") -> str:
    """Return "p = …" with two significant digits, "p < 0.001" below, "p > 0.99" near 1, more where two touch α.

    Rounding never moves p onto or across the significance level. At a level below 0.001 the level takes its place.

    >>> p_text(0.00182, 0.05), p_text(0.0499, 0.05), p_text(1e-9, 0.05), p_text(0.04997, 0.05)
    ('p = 0.0018', 'p = 0.0499', 'p < 0.001', 'p = 0.04997')
    """
    floor = min(SMALLEST_P_SHOWN, significance)
    if p < floor:
        return f"p < {number_text(floor, sign)}"
    if p >= LARGEST_P_SHOWN:
        return f"p > {number_text(0.99, sign)}"
    exact, level = _shortest(p), _shortest(significance)
    for digits in range(2, MOST_DIGITS_OF_A_DOUBLE + 1):
        places = places_for(p, digits)
        if _side(rounded_to(exact, places), level) == _side(exact, level):
            break
    return f"p = {decimal_text(exact, places, sign)}"


def df_text(df: float, sign: str = ".") -> str:
    """Return degrees of freedom: whole ones without places, others with one, large ones rounded.

    >>> df_text(11.0), df_text(11.8312, ","), df_text(145.31), df_text(14009763.2)
    ('11', '11,8', '145', '>1000')
    """
    if isfinite(df) and df > MOST_DEGREES and not float(df).is_integer():
        return f">{MOST_DEGREES}"
    return decimal_text(df, 0 if not isfinite(df) or float(df).is_integer() or df >= WHOLE_DEGREES else 1, sign)


def statistic_number(value: float, sign: str = ".") -> str:
    """Return a value on the scale of t or z: two decimals, four digits from 10,000,000 on.

    >>> statistic_number(4.0791), statistic_number(-1.5e9)
    ('4.08', '−1.500 × 10⁹')
    """
    return decimal_text(value, 2, sign) if abs(value) < PLAIN_BELOW else significant(value, 4, sign)


def rank_number(value: float, sign: str = ".") -> str:
    """Return a count or a sum of ranks, which is whole or a half.

    >>> rank_number(54.0), rank_number(12.5, ",")
    ('54', '12,5')
    """
    return decimal_text(value, 0 if float(value).is_integer() else 1, sign)


def statistic_text(test: Test, sign: str = ".") -> str:
    """Return the test statistic as a report writes it: "t(11) = 4.08", "z = 1.96", "W⁺ = 54", "9 of 10 above"."""
    if test.procedure == "signed_rank":
        return f"W⁺ = {rank_number(test.statistic, sign)}"
    if test.procedure == "sign":
        return f"{rank_number(test.statistic, sign)} of {test.n_used} above"
    name = "z" if test.df is None else f"t({df_text(test.df, sign)})"
    return f"{name} = {statistic_number(test.statistic, sign)}"


def percent_text(percent: float, places: int, sign: str = ".") -> str:
    """Return a relative difference in %, with its sign.

    >>> percent_text(0.4321, 2), percent_text(-12.0, 0)
    ('+0.43 %', '−12 %')
    """
    return f"{signed_text(percent, places, sign)} %"


def level_text(level: float, sign: str = ".") -> str:
    """Return a level or risk in % without the noise of binary fractions.

    >>> level_text(0.95), level_text(0.05), level_text(1 - 2 * 0.0125, ",")
    ('95 %', '5 %', '97,5 %')
    """
    percent = Decimal(f"{100 * level:.13g}")
    if percent >= 100:
        return "almost 100 %"
    return f"{number_text(percent, sign)} %"


def attained_text(level: float, sign: str = ".") -> str:
    """Return an attained level in %, which no one chose, with one decimal.

    >>> attained_text(0.97851)
    '97.9 %'
    """
    return f"{decimal_text(100 * level, 1, sign)} %"


def unit_text(value_text: str, unit: str) -> str:
    """Return a value with its unit behind a space (ISO 80000-1); only ° ′ ″ of plane angles close up.

    >>> unit_text("5.02", "mg/L"), unit_text("5.02", "%"), unit_text("5.02", ""), unit_text("45", "°")
    ('5.02 mg/L', '5.02 %', '5.02', '45°')
    """
    unit = plain_words(unit)
    if unit in PLANE_ANGLES:
        return value_text + unit
    return f"{value_text} {unit}" if unit else value_text


def plain_words(text: str) -> str:
    """Return what was typed on one line, every run of white space as one space.

    >>> plain_words("  Nitrate in\\n NC-7 ")
    'Nitrate in NC-7'
    """
    return " ".join(text.split())


def places_apart(value: float | None, target: Decimal | None, places: int) -> int:
    """Return the places, more than asked where rounding would move a value onto or across the target.

    >>> places_apart(5.0004, Decimal("5.000"), 3), places_apart(5.0216, Decimal("5.000"), 3)
    (4, 3)
    """
    if value is None or target is None or not isfinite(value) or value == float(target):
        return places
    exact = _shortest(value)
    finest = MOST_DIGITS_OF_A_DOUBLE - 1 - exact.adjusted()
    while places < finest and _side(rounded_to(exact, places), target) != _side(exact, target):
        places += 1
    return places


def interval_text(
    interval: Interval, places: int, sign: str = ".", unit: str = "", target: Decimal | None = None
) -> str:
    """Return an interval in words; where rounding would put an end on the target, both ends get more digits.

    >>> interval_text(Interval(5.0099, 5.0332, 0.95, 0.95), 3, ".", "mg/L")
    '5.010 mg/L to 5.033 mg/L'
    >>> interval_text(Interval(5.0099, None, 0.95, 0.95), 2, ".", "mg/L")
    'at least 5.01 mg/L'
    """
    for end in (interval.low, interval.high):
        places = places_apart(end, target, places)
    low = None if interval.low is None else unit_text(decimal_text(interval.low, places, sign), unit)
    high = None if interval.high is None else unit_text(decimal_text(interval.high, places, sign), unit)
    if low is None and high is None:
        return "no bounds"
    if high is None:
        return f"at least {low}"
    if low is None:
        return f"at most {high}"
    return f"{low} to {high}"


def _shortest(value: float) -> Decimal:
    return Decimal(repr(float(value)))


def _side(value: Decimal, other: Decimal) -> int:
    return (value > other) - (value < other)
