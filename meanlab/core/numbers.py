"""Exact decimals: a reading is the decimal number that was typed, and stays so until one last rounding to double.

Floating point breaks ties (0.3 − 0.2 against 0.2 − 0.1) and loses digits of sums of squares; scaled integers keep both.
"""

import re
from collections.abc import Iterable, Sequence
from decimal import Context, Decimal
from itertools import repeat
from math import isqrt
from sys import float_info
from typing import Any

from meanlab.core.complaints import Complaint, QuestionComplaint, ReadingsComplaint

MOST_CHARACTERS = 60
MOST_DIGITS = 40
SMALLEST = Decimal("1e-300")
LARGEST = Decimal("1e300")
WIDEST_SPAN = 650
MOST_WORK = 20_000_000
MOST_COMPUTED_DIGITS = 12
MOST_WAYS_OF_TYPING = 8

_NUMBER = re.compile(r"[+-]?(\d+([.,]\d*)?|[.,]\d+)([eE][+-]?\d{1,4})?", re.ASCII)
_WIDE = Context(prec=2 * WIDEST_SPAN)
_SIGNS = str.maketrans({"−": "-", "–": "-", "＋": "+"})  # minus sign, en dash, full-width plus


def as_typed(number: Any) -> str:
    """Return the text of a number: a text as it is, anything else by its shortest decimal text.

    >>> as_typed("5.020"), as_typed(0.1)
    ('5.020', '0.1')
    """
    return number if isinstance(number, str) else str(number)


def exact(number: Any, what: str = "This entry", kind: type[Complaint] = ReadingsComplaint, where: str = "") -> Decimal:
    """Return a number or number text ("5.020", "5,02") as an exact decimal that keeps its trailing zeros.

    A number that is no text enters by its shortest decimal text. A single comma or point is the decimal sign.
    ``what`` opens the sentence of a complaint of class ``kind``, raised for anything that is not one finite number of
    at most 60 characters and 40 significant digits with value 0 or 1e-300 ≤ |x| ≤ 1e300.

    >>> exact("5,020")
    Decimal('5.020')
    >>> exact(0.1)
    Decimal('0.1')
    """
    text = as_typed(number).strip()
    plain = text.translate(_SIGNS)
    shown = text if len(text) <= MOST_CHARACTERS else text[: MOST_CHARACTERS - 1] + "…"
    if len(text) > MOST_CHARACTERS:
        raise kind(f'{what}: "{shown}" has {len(text)} characters; at most {MOST_CHARACTERS} are read.', where)
    if not _NUMBER.fullmatch(plain):
        raise kind(f'{what}: "{shown}" is not a number. Type digits with one decimal point or comma.', where)
    value = Decimal(plain.replace(",", "."))
    if len(value.as_tuple().digits) > MOST_DIGITS:
        raise kind(f'{what}: "{shown}" has more than {MOST_DIGITS} significant digits.', where)
    if value and not SMALLEST <= abs(value) <= LARGEST:
        raise kind(f'{what}: "{shown}" is outside 1e-300 to 1e300, the range that is computed exactly.', where)
    return value if value else abs(value)


def exact_setting(number: Any, name: str, where: str) -> Decimal:
    """Return a number of the question (target, σ, u, E) as an exact decimal, or complain naming it."""
    return exact(number, f"The {name}", QuestionComplaint, where)


def places(value: Decimal) -> int:
    """Return how many decimal places a number was written with; negative for whole tens (1.2e3 gives −2).

    >>> places(Decimal("5.020")), places(Decimal("12"))
    (3, 0)
    """
    exponent = value.as_tuple().exponent
    assert isinstance(exponent, int)  # finite by construction
    return -exponent


def finest_places(values: Sequence[Decimal]) -> int:
    """Return the most decimal places any of the values was written with; 0 without values.

    Numbers typed alike are told apart from others without being taken to pieces, which is ten times as fast.

    >>> finest_places([Decimal("5.0"), Decimal("5.02"), Decimal("5")])
    2
    """
    found, left = [], list(values)
    for _ in range(MOST_WAYS_OF_TYPING):
        if not left:
            break
        first = left[0]
        found.append(places(first))
        if all(map(first.same_quantum, left)):
            return max(found)
        left = [value for value in left if not first.same_quantum(value)]
    return max([*found, *map(places, left)], default=0)


def looks_computed(value: Decimal) -> bool:
    """Tell whether a stored number has more digits than an instrument shows, hence says nothing of its resolution."""
    return len(value.normalize().as_tuple().digits) > MOST_COMPUTED_DIGITS


def common_exponent(values: Sequence[Decimal], what: str = "The numbers", count: int | None = None) -> int:
    """Return the power of ten of which every value is a whole multiple; ``count`` where the values stand for many.

    Raises ReadingsComplaint where the values span more than 650 digits or the exact sums would be too long.
    """
    lowest = -finest_places(values)
    highest = max(map(Decimal.adjusted, filter(None, values)), default=lowest)
    span = highest - lowest + 1
    if span > WIDEST_SPAN or span * (count or len(values)) > MOST_WORK:
        raise ReadingsComplaint(
            f"{what} span {span} digits from the largest to the finest; at most {WIDEST_SPAN} digits, and "
            f"{MOST_WORK:,} digits for all readings together, are computed exactly. Remove what is not a reading.",
            "readings",
        )
    return lowest


def scaled(value: Decimal, exponent: int) -> int:
    """Return value / 10**exponent, a whole number.

    >>> scaled(Decimal("5.02"), -3)
    5020
    """
    return int(_WIDE.scaleb(value, -exponent))


def scaled_all(values: Iterable[Decimal], exponent: int) -> list[int]:
    """Return value / 10**exponent of each value, whole numbers.

    >>> scaled_all([Decimal("5.02"), Decimal("5")], -3)
    [5020, 5000]
    """
    return list(map(int, map(_WIDE.scaleb, values, repeat(Decimal(-exponent)))))


def power_of_ten_ratio(numerator: int, denominator: int, exponent: int) -> tuple[int, int]:
    """Return whole numbers a, b with a / b = numerator · 10**exponent / denominator."""
    if exponent >= 0:
        return numerator * 10**exponent, denominator
    return numerator, denominator * 10**-exponent


def quotient(numerator: int, denominator: int, exponent: int = 0) -> float:
    """Return numerator · 10**exponent / denominator as the nearest double; too large for one, the largest double.

    >>> quotient(1, 3), quotient(5, 1, -1)
    (0.3333333333333333, 0.5)
    """
    return _nearest(*power_of_ten_ratio(numerator, denominator, exponent))


def root(numerator: int, denominator: int, exponent: int = 0) -> float:
    """Return √(numerator · 10**exponent / denominator) as the nearest double; too large for one, the largest double.

    The root is taken in whole numbers with at least 70 bits and a sticky last bit, so that the one rounding is right.

    >>> root(2, 1), root(4, 1, -2)
    (1.4142135623730951, 0.2)
    """
    top, bottom = power_of_ten_ratio(numerator, denominator, exponent)
    if top == 0:
        return 0.0
    shift = max(0, 140 - top.bit_length() + bottom.bit_length()) // 2
    whole, rest = divmod(top << (2 * shift), bottom)
    floor = isqrt(whole)
    inexact = rest != 0 or floor * floor != whole
    return _nearest(2 * floor + inexact, 1 << (shift + 1))


def _nearest(top: int, bottom: int) -> float:
    try:
        return top / bottom
    except OverflowError:  # a ratio of the widest to the finest reading allowed has up to 640 digits
        return float_info.max if (top > 0) == (bottom > 0) else -float_info.max
