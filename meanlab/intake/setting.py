"""One number of one field (target, σ, U, E): the grammar of a reading, but one number and nothing else."""

import re

from meanlab.core.complaints import QuestionComplaint
from meanlab.core.numbers import exact
from meanlab.intake.characters import one_spelling, shown
from meanlab.intake.entry import Parsed, meant_by_letter, parse
from meanlab.intake.numerals import leaning, under

_AS_TYPED = re.compile(r"[+−–-]?(\d+([.,]\d*)?|[.,]\d+)([eE][+-]?\d{1,4})?", re.ASCII)


def read_number(text: str, decimal_sign: str | None = None) -> str:
    """Return the number of one field as typed, with its zeros and its decimal sign, ready for `core.numbers.exact`.

    ``decimal_sign`` is the one of the readings. Marks of thousands are taken away; a power of ten is written "1.2e-3".
    Raises QuestionComplaint for prose, two numbers, a limit ("<0.05"), a mark for no value, a number with a unit, and
    for one comma or point before three digits that could be a decimal sign or a thousands mark.

    >>> read_number(" 5,000 ", ","), read_number("1,234.50"), read_number("1.2×10⁻³")
    ('5,000', '1234.50', '1.2e-3')
    """
    typed = text.strip()
    found = parse(one_spelling(typed).strip(" \xa0"))
    if found.kind == "reading" and (slip := meant_by_letter(typed, found)):
        found = Parsed("unread", meant=slip)
    objection = _objection(found, decimal_sign)
    if objection:
        raise QuestionComplaint(f'"{shown(typed)}" {objection}')
    number = typed if _AS_TYPED.fullmatch(typed) else _without_marks(found)
    exact(number, "This number", QuestionComplaint)
    return number


def _objection(found: Parsed, sign: str | None) -> str:
    """Why an entry is no number of a field; "" where it is one."""
    meant = f" Did you mean {found.meant}?" if found.meant else ""
    if found.kind == "missing":
        return "is not a number: leave the field empty where there is none."
    if found.kind in ("below", "above"):
        return "is a limit, not a number: type the number without the sign."
    if found.kind == "unread" or leaning(found.numeral) == "malformed":
        return f"is not a number. Type one number with one decimal point or comma.{meant}"
    if found.unit:
        return f"is a number with a unit: type the number alone, in the unit of the readings, without {found.unit}."
    if found.sort not in ("", "gap"):
        return "is not a number alone: type the number without the remark."
    mark = "," if "," in found.numeral else "."
    if leaning(found.numeral) == "either" and not found.power and (sign or ".") != mark:
        one, other = under(found.numeral, mark), under(found.numeral, _OTHER[mark])
        return f"is not a number that can be told for sure: {one} or {other}? Type it without a thousands mark."
    return ""


_OTHER = {".": ",", ",": "."}


def _without_marks(found: Parsed) -> str:
    sign = leaning(found.numeral)
    sign = sign if sign in _OTHER else "," if sign == "either" and "," in found.numeral else "."
    plain = under(found.numeral, sign) or ""
    return f"{'-' if found.minus else ''}{plain.replace('.', sign)}{f'e{found.exponent}' if found.power else ''}"
