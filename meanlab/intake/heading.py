"""Headings: the name of a quantity and its unit, as people write them over a column."""

import re
from dataclasses import dataclass

from meanlab.intake.characters import one_spelling
from meanlab.intake.units import is_qualified_unit, is_unit, is_unmistakable

_BRACKETED = re.compile(r"[(\[]([^()\[\]]*(?:\([^()]*\)[^()\[\]]*)?)[)\]]")
_BEHIND_A_MARK = re.compile(r"^(.*\S)\s*(?:,|;|:|\s/|/(?=\()|\s-|\s–|_|\bin)\s*(\S.*)$")
_LETTER = re.compile(r"[^\W\d_]")
_UNITS_OF_SYMBOLS = {
    "T": "°C K",
    "t": "°C s min h",
    "ϑ": "°C",
    "θ": "°C",
    "m": "g mg kg µg",
    "V": "mL ml L l µL",
    "p": "bar mbar Pa hPa kPa",
    "λ": "nm µm",
    "U": "V mV",
    "I": "A mA",
    "w": "%",
    "φ": "%",
    **dict.fromkeys("dlhb", "mm cm µm m nm"),
    **dict.fromkeys("cβρ", "mg/L mg/l g/L g/l µg/L µg/l mol/L mol/l mmol/L mmol/l g/cm³ kg/m³"),
}
_NO_UNIT = frozenset({"-", "–", "1", "—", "dimensionless", "no unit", "ohne einheit"})
_OPEN_WORDS = re.compile(r"[a-zA-ZµμΩ%°]{1,8}(?:/[a-zA-Z0-9 µμ%°.]{1,10})?")


@dataclass(frozen=True)
class Heading:
    """A heading as written (blanks and line breaks made one blank), with the name and unit it gives."""

    text: str = ""
    name: str | None = None
    unit: str | None = None


def heading_of(text: str) -> Heading:
    """Return name and unit of a heading.

    >>> heading_of("Nitrate (as N) [mg/L]").name, heading_of("Nitrate, mg/L").unit, heading_of("c / (mg/L)").unit
    ('Nitrate (as N)', 'mg/L', 'mg/L')
    """
    flat = " ".join(one_spelling(text).replace("\xa0", " ").split()).strip("\"'").strip()
    if not _has_words(flat):
        return Heading(flat)
    bare = flat.rstrip(":=* ").strip()
    for read in (_symbol_and_unit, _in_brackets, _behind_a_mark, _whole, _last_words):
        found = read(bare)
        if found:
            name, unit = found
            return Heading(flat, name.strip(" ,;:/=") or None, unit or None)
    return Heading(flat, bare or None, None)


def _has_words(text: str) -> bool:
    return bool(_LETTER.search(text)) or is_unit(text)


def _symbol_and_unit(text: str) -> tuple[str, str] | None:
    """A symbol divided by its unit, "T/°C" (ISO 80000-1), where the unit suits the symbol."""
    symbol, mark, unit = text.partition("/")
    symbol, unit = symbol.strip(), unit.strip()
    suits = is_unit(unit) and unit in _UNITS_OF_SYMBOLS.get(symbol, "").split()
    return (symbol, unit) if mark and suits else None


def _in_brackets(text: str) -> tuple[str, str] | None:
    for found in reversed(list(_BRACKETED.finditer(text))):
        inside = found[1].strip()
        unit = _unit_in(inside, square=found[0][0] == "[")
        if unit is not None:
            around = f"{text[: found.start()].rstrip()} {text[found.end() :].lstrip()}"
            return around.strip().removesuffix(" in").removesuffix(" /"), unit
    return None


def _unit_in(inside: str, square: bool) -> str | None:
    if inside.casefold() in _NO_UNIT and square:
        return ""
    inside = inside.removeprefix("in ").strip()
    if is_qualified_unit(inside) and not (len(inside) == 1 and inside in "abcefijknopqrwxyz"):
        return inside
    last = inside.rpartition(",")[2].strip()
    if last != inside and is_unit(last) and ("/" in last or "%" in last):
        return last
    return inside if square and _OPEN_WORDS.fullmatch(inside) and len(inside) > 1 else None


def _behind_a_mark(text: str) -> tuple[str, str] | None:
    found = _BEHIND_A_MARK.match(text)
    if not found:
        return None
    unit = found[2].strip()
    if unit.startswith("(") and unit.endswith(")"):
        unit = unit[1:-1].strip()
    letters = sum(map(str.isalpha, found[1]))
    return (
        (found[1], unit) if is_qualified_unit(unit) and (len(unit) > 1 or not unit.isalpha() or letters > 2) else None
    )


def _whole(text: str) -> tuple[str, str] | None:
    if is_unit(text) and (len(text) > 1 or text in "%°‰") and is_unmistakable(text):
        return "", text
    return None


def _last_words(text: str) -> tuple[str, str] | None:
    """A unit at the end without any mark: "Nitrate mg/L"; single letters and words are no units there."""
    words = text.split(" ")
    for first in range(max(1, len(words) - 3), len(words)):
        unit = " ".join(words[first:])
        if is_unit(unit) and is_unmistakable(unit):
            return " ".join(words[:first]), unit
    if words[0] == "%" and len(words) > 1:
        return " ".join(words[1:]), "%"
    return None
