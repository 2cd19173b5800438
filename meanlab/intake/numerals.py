"""Numerals as written, and the decimal sign of a whole column with the grounds for it."""

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from math import log10
from statistics import median
from typing import Literal

Sign = Literal[".", ","]

NUMERAL = r"(?:[1-9]\d{0,2}(?: \d{3})+(?!\d)(?:[.,]\d+)?|\d+[.,](?=\s*\Z)|\d(?:\d|[.,'\xa0](?=\d))*|[.,]\d+)"

_FRACTION = r"(?:\d{3}(?:\xa0\d{3})*(?:\xa0\d{1,3})?|\d*)"
_UNDER: Mapping[str, re.Pattern[str]] = {
    sign: re.compile(
        rf"(?:[1-9]\d{{0,2}}(?P<group>[{other}'\xa0 ])\d{{3}}(?:(?P=group)\d{{3}})*|\d+)(?:[{sign}]{_FRACTION})?"
        rf"|[{sign}]\d+",
        re.ASCII,
    )
    for sign, other in ((".", ","), (",", "."))
}
_GROUP_MARKS = {
    ".": str.maketrans("", "", ",'\xa0 "),
    ",": str.maketrans(",", ".", ".'\xa0 "),
}
FARTHEST = 20.0  # a thousands mark that nothing else supports may not put a reading farther off than this factor


def under(numeral: str, sign: str) -> str | None:
    """Return the plain decimal text of a numeral if ``sign`` is the decimal sign, None where it is malformed then.

    >>> under("1,234.5", "."), under("1,234.5", ","), under("1,234", ",")
    ('1234.5', None, '1.234')
    """
    return numeral.translate(_GROUP_MARKS[sign]) if _UNDER[sign].fullmatch(numeral) else None


def leaning(numeral: str) -> str:
    """Return which decimal sign a numeral can only have: "." or ","; "either", "none" or "malformed" otherwise.

    >>> leaning("0,412"), leaning("1,234"), leaning("12"), leaning("5,0,1")
    (',', 'either', 'none', 'malformed')
    """
    point, comma = under(numeral, "."), under(numeral, ",")
    if point is None:
        return "malformed" if comma is None else ","
    if comma is None:
        return "."
    return "none" if point == comma else "either"


@dataclass(frozen=True)
class DecimalSign:
    """The decimal sign of a column.

    sign      "." or ","
    grounds   one sentence, "" where nothing had to be decided
    open      True where the column can be read both ways and must be asked for
    mixed     True where some numerals can only have the other sign
    thousands True where a single comma or point is a thousands mark that no other numeral shows to be one
    """

    sign: Sign
    grounds: str = ""
    open: bool = False
    mixed: bool = False
    thousands: bool = False


def decimal_sign(numerals: Iterable[tuple[str, bool]], hint: Sign | None = None) -> DecimalSign:
    """Return the decimal sign of a column from all its numerals.

    ``numerals`` are pairs of a numeral and whether a power of ten follows, which no thousands mark precedes; ``hint``
    is the sign that other columns of the same table show beyond doubt.
    """
    sorts: dict[str, list[str]] = {".": [], ",": [], "either": [], "none": [], "malformed": []}
    for numeral, power in numerals:
        sort = leaning(numeral)
        if power and sort == "either":
            sort = "," if "," in numeral else "."
        sorts[sort].append(numeral)
    points, commas, either = sorts["."], sorts[","], sorts["either"]
    if points or commas:
        return _decided(points, commas, either)
    if not either:
        return DecimalSign(hint or ".")
    if hint:
        return DecimalSign(hint, f"decimal {_NAMES[hint]} as in the other columns of the table")
    return _by_size(either, sorts["none"])


def _decided(points: list[str], commas: list[str], either: list[str]) -> DecimalSign:
    sign: Sign = "." if len(points) >= len(commas) else ","
    sure, rest = (points, commas) if sign == "." else (commas, points)
    grounds = f'decimal {_NAMES[sign]}: "{sure[0]}" cannot be read otherwise'
    other = "," if sign == "." else "."
    grouped = [numeral for numeral in either if other in numeral]
    shows = any(other in numeral for numeral in sure)
    return DecimalSign(sign, grounds, mixed=bool(rest), thousands=bool(grouped) and not shows)


def _by_size(either: list[str], whole: list[str]) -> DecimalSign:
    """All numerals could be grouped thousands or have three decimals: "1,234"."""
    marks = {"." if "." in numeral else "," for numeral in either}
    mark = marks.pop()
    if marks:
        return DecimalSign(".", "a point and a comma both stand before three digits", open=True)
    other: Sign = "," if mark == "." else "."
    if whole and _thousands_by_size(either, whole, mark):
        return DecimalSign(
            other, f'"{mark}" is a thousands mark: "{whole[0]}" is of the same size then', thousands=True
        )
    if mark == "," or whole:
        return DecimalSign(
            ",", f'"{either[0]}" can be read with a decimal {_NAMES[mark]} or a thousands mark', open=True
        )
    return DecimalSign(".", f'decimal point: in "{either[0]}" it was not taken for a thousands mark')


def _thousands_by_size(either: list[str], whole: list[str], mark: str) -> bool:
    """Tell whether whole numbers beside show a thousands mark: 1,234 and 987 are of one size, 1.234 and 987 not."""
    plain = [float(under(numeral, mark) or 0) for numeral in whole]
    beside = [value for value in plain if value]
    if not beside:
        return False
    small = median(float(under(numeral, mark) or 0) for numeral in either)
    distance = log10(median(beside)) - log10(small or 1.0)
    return abs(distance - 3) < log10(FARTHEST) < abs(distance)


_NAMES = {".": "point", ",": "comma"}
