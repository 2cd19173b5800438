"""The number formats of a spreadsheet: what a cell shows for the number it stores.

The stored number counts; the format adds the zeros it shows (5.1 in format 0.00 is the reading 5.10), the percent sign,
a unit or a sign such as ``<`` written around the number, and tells a date from a number.

Source of the format codes: ECMA-376-1 §18.8.30 and §18.8.31 (number formats).
"""

import datetime
import re
from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal

from meanlab.intake.building import shown_text
from meanlab.intake.grid import Cell

GENERAL = "General"
BUILT_IN: Mapping[int, str] = {
    0: GENERAL, 1: "0", 2: "0.00", 3: "#,##0", 4: "#,##0.00", 9: "0%", 10: "0.00%", 11: "0.00E+00",
    12: "# ?/?", 13: "# ??/??", 14: "yyyy-mm-dd", 15: "d-mmm-yy", 16: "d-mmm", 17: "mmm-yy", 18: "h:mm AM/PM",
    19: "h:mm:ss AM/PM", 20: "h:mm", 21: "h:mm:ss", 22: "yyyy-mm-dd h:mm", 37: "#,##0;(#,##0)",
    38: "#,##0;(#,##0)", 39: "#,##0.00;(#,##0.00)", 40: "#,##0.00;(#,##0.00)", 41: "#,##0", 42: "#,##0",
    43: "#,##0.00", 44: "#,##0.00", 45: "mm:ss", 46: "[h]:mm:ss", 47: "mm:ss.0", 48: "##0.0E+0", 49: "@",
    **dict.fromkeys([*range(27, 37), *range(50, 59)], "yyyy-mm-dd"),
}  # fmt: skip

_TOKEN = re.compile(r'"[^"]*"?|\\.|[_*].|\[[^\]]*\]?|General|AM/PM|A/P|E[+-]|.', re.IGNORECASE | re.DOTALL)
_CONDITION = re.compile(r"\[(<=|>=|<>|<|>|=)\s*(-?\d+(?:\.\d+)?)\]")
_MOST_CODE = 255
_SHOWN_DIGITS = 15
_INSTRUMENT_DIGITS = 12


@dataclass(frozen=True)
class Section:
    """One part of a format between semicolons.

    decimals    zeros it shows after the decimal sign at least
    percent     how often the number is multiplied by 100
    before, after  literal text around the number
    """

    is_date: bool = False
    shows_number: bool = True
    plain: bool = True
    decimals: int = 0
    percent: int = 0
    exponent: bool = False
    before: str = ""
    after: str = ""
    condition: tuple[str, float] | None = None


class NumberFormat:
    """One format code, ready to show numbers.

    >>> NumberFormat("0.00").cell(5.1)
    Cell(text='5.10', kind='number', computed=False)
    >>> NumberFormat("0.00%").cell(0.0381).text
    '3.81%'
    """

    def __init__(self, code: str) -> None:
        self.sections = tuple(_section(tokens) for tokens in _split(shown_text(code[:_MOST_CODE])))

    def cell(self, number: float, since_1904: bool = False) -> Cell:
        """The cell that shows this stored number."""
        section = self._section_for(number)
        if section.is_date:
            return Cell(date_text(number, since_1904), "date")
        if not section.shows_number and section.before:
            return Cell(section.before)
        return number_cell(number, section)

    def _section_for(self, number: float) -> Section:
        numeric = self.sections[:3]
        if any(section.condition for section in numeric):
            return next((section for section in numeric if _holds(section.condition, number)), numeric[-1])
        if number < 0 and len(numeric) > 1:
            return numeric[1]
        if number == 0 and len(numeric) > 2:
            return numeric[2]
        return numeric[0]


def number_text(number: float) -> str:
    """The shortest decimal text of a stored number, without the dust of binary arithmetic.

    A spreadsheet shows 15 digits at most; where these end in zeros, what lies behind them is dust and not resolution.

    >>> number_text(0.1 + 0.2), number_text(5e-05), number_text(2 / 3)
    ('0.3', '0.00005', '0.6666666666666666')
    """
    shortest = repr(number)
    if len(shortest) <= _INSTRUMENT_DIGITS and "e" not in shortest:
        return shortest.removesuffix(".0") if number else "0"
    shown = f"{number:.{_SHOWN_DIGITS}g}"
    exact = Decimal(shown).normalize()
    if len(exact.as_tuple().digits) > _INSTRUMENT_DIGITS:
        exact = Decimal(shortest)
    return _decimal_text(exact)


def date_text(number: float, since_1904: bool = False) -> str:
    """A stored day number as ISO text: a date, a time of day, or both."""
    days, seconds = divmod(round(number * 86_400), 86_400)
    time = str(datetime.timedelta(seconds=seconds)).zfill(8)
    if days == 0 and not since_1904:
        return time
    # 1900 counts a 29 February that never was
    first = datetime.date(1904, 1, 1) if since_1904 else datetime.date(1899, 12, 30 if days > 59 else 31)
    try:
        date = first + datetime.timedelta(days=days)
    except OverflowError:
        return number_text(number)
    return date.isoformat() if seconds == 0 else f"{date.isoformat()} {time}"


def with_decimals(text: str, decimals: int) -> str:
    """The same number with zeros up to so many decimals; never fewer digits than it has."""
    missing = decimals - len(text.partition(".")[2])
    if missing <= 0 or "E" in text:
        return text
    return f"{text}{'' if '.' in text else '.'}{'0' * missing}"


def number_cell(number: float, section: Section) -> Cell:
    """The cell of a stored number shown as one section of a format says."""
    text = number_text(number)
    computed = len(text) > _INSTRUMENT_DIGITS and len(Decimal(text).as_tuple().digits) > _INSTRUMENT_DIGITS
    if section.percent:
        text = _decimal_text(Decimal(text).scaleb(2 * section.percent))
    if section.exponent:
        text = _in_powers(text, section.decimals)
    elif section.plain:
        text = with_decimals(text, section.decimals)
    return Cell(f"{section.before}{text}{section.after}", "number", computed)


def _in_powers(text: str, decimals: int) -> str:
    """5.1 with two decimals is 5.10E+00, where that is the whole number."""
    shown = f"{Decimal(text):.{decimals}E}"
    return shown if Decimal(shown) == Decimal(text) else text


def _decimal_text(exact: Decimal) -> str:
    exact = exact.normalize()
    return f"{exact:f}" if -20 < exact.adjusted() < 20 else f"{exact:E}"


def _holds(condition: tuple[str, float] | None, number: float) -> bool:
    if condition is None:
        return True
    sign, limit = condition
    return {
        "<": number < limit, "<=": number <= limit, ">": number > limit, ">=": number >= limit,
        "=": number == limit, "<>": number != limit,
    }[sign]  # fmt: skip


def _split(code: str) -> list[list[str]]:
    sections: list[list[str]] = [[]]
    for token in _TOKEN.findall(code):
        if token == ";":
            sections.append([])
        else:
            sections[-1].append(token)
    return sections[:4]


def _section(tokens: list[str]) -> Section:
    condition = None
    marks: list[str] = []
    literals = ["", ""]
    placed = False
    for token in tokens:
        if token[0] == "[":
            if found := _CONDITION.fullmatch(token):
                condition = (found[1], float(found[2]))
            elif token[1:2].lower() in ("h", "m", "s"):
                marks.append("h")
        elif token[0] in "_*":
            continue
        elif token[0] in '"\\' or token in "<>≤≥":
            literals[placed] += token.strip('"') if token[0] == '"' else token[-1]
        else:
            placed = placed or token.lower() in ("0", "#", "?", "@", "general")
            marks.append(token)
    return _described("".join(marks), literals, condition)


def _described(marks: str, literals: list[str], condition: tuple[str, float] | None) -> Section:
    lower = marks.lower()
    if "general" in lower:
        return Section(before=_telling(literals[0]), after=_telling(literals[1]), condition=condition)
    shows_number = any(mark in marks for mark in "0#?@")
    is_date = any(mark in lower.replace("e+", "").replace("e-", "") for mark in "ymdhs")
    percent = marks.count("%")
    fraction = re.search(r"\.(0*)", marks)
    before, after = (literals[0], literals[1]) if shows_number else (literals[0] + literals[1], "")
    return Section(
        is_date=is_date,
        shows_number=shows_number or is_date,
        plain="/" not in marks and not re.search(r"[0#?],+(?![0#?])", marks),
        decimals=len(fraction[1]) if fraction and "/" not in marks else 0,
        percent=percent,
        exponent="e+" in lower or "e-" in lower,
        before=_telling(before) if shows_number else before.strip(),
        after="%" * min(percent, 1) if percent else _telling(after),
        condition=condition,
    )


def _telling(literal: str) -> str:
    """A literal text that says something about the reading: a limit sign or a unit."""
    plain = literal.strip()
    telling = any(mark.isalpha() or mark in "<>≤≥%‰°" for mark in plain)
    return literal if telling else ""
