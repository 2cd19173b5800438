"""The short way for a long column: nothing but numbers with one decimal sign."""

import re
from collections.abc import Sequence

from meanlab.intake import sayings
from meanlab.intake.given import Given, Read, codes_among
from meanlab.intake.long_column import ODD_BY_COMMA, ODD_BY_POINT
from meanlab.intake.numerals import DecimalSign, Sign, leaning

_SURE_COMMA = re.compile(r",(?!\d{3}$)|^[+-]?(?:0|\d{4,}),", re.ASCII | re.MULTILINE)
_SURE_POINT = re.compile(r"\.(?!\d{3}$)|^[+-]?(?:0|\d{4,})\.", re.ASCII | re.MULTILINE)


def read_plain(given: Given) -> Read | None:
    """Return what a column of bare numbers comes to; None where any entry or the decimal sign needs a closer look."""
    if given.kinds is not None or given.qualifiers is not None or given.decimal or not given.texts:
        return None
    text = "\n".join(given.texts)
    sign = _sign_of(text, given)
    if sign is None:
        return None
    numbers = list(given.texts) if sign == "." or "," not in text else text.replace(",", ".").split("\n")
    found = Read(numbers, sign=_with_grounds(given.texts, sign), unit=given.heading_unit)
    found.warnings.extend(sayings.code_for_nothing(code) for code in codes_among(numbers))
    return found


def _sign_of(text: str, given: Given) -> Sign | None:
    if not given.plain and (not text.isascii() or text.count("\n") != len(given.texts) - 1):
        return None
    if given.plain == "." or (not given.plain and not ODD_BY_POINT.search(text)):
        points = text.count(".")
        whole_beside = 0 < points < len(given.texts)  # 1.234 beside 987: perhaps thousands marks
        if (given.hint == "," and points) or (whole_beside and not _SURE_POINT.search(text)):
            return None
        return "." if points or given.hint is None else given.hint
    sure = "," in text and _SURE_COMMA.search(text) is not None
    return "," if sure and (given.plain == "," or not ODD_BY_COMMA.search(text)) else None


def _with_grounds(texts: Sequence[str], sign: Sign) -> DecimalSign:
    sure = next((text for text in texts[:1000] if leaning(text.lstrip("+-")) == sign), "")
    name = "comma" if sign == "," else "point"
    return DecimalSign(sign, f'decimal {name}: "{sure}" cannot be read otherwise' if sure else "")
