"""One column of entries: its decimal sign, its unit, and each entry as a number or as what it is instead."""

import re
from collections import Counter
from collections.abc import Callable, Hashable, Iterable, Sequence
from dataclasses import dataclass, field, replace
from itertools import compress
from typing import Any

from meanlab.core.complaints import ReadingsComplaint
from meanlab.core.numbers import exact, looks_computed
from meanlab.intake import sayings
from meanlab.intake.characters import one_spelling
from meanlab.intake.entry import Kind, Parsed, parse
from meanlab.intake.found import Special
from meanlab.intake.long_column import ODD_BY_COMMA, ODD_BY_POINT
from meanlab.intake.numerals import FARTHEST, DecimalSign, Sign, decimal_sign, leaning, under
from meanlab.intake.suffixes import settled
from meanlab.intake.units import same_unit

_SURE_COMMA = re.compile(r",(?!\d{3}$)|^[+-]?(?:0|\d{4,}),", re.ASCII | re.MULTILINE)
_SURE_POINT = re.compile(r"\.(?!\d{3}$)|^[+-]?(?:0|\d{4,})\.", re.ASCII | re.MULTILINE)
_BELOW_MARKS = ("<", "<=", "=<", "≤", "u", "nd")
_ABOVE_MARKS = (">", ">=", "=>", "≥")
_CODES = frozenset({"-9", "-99", "-999", "-9999", "-99999", "-999.9", "-999.99", "9999", "99999", "-999.0", "-9999.0"})


@dataclass(frozen=True)
class Given:
    """A column before it is read.

    texts       each entry as it stands in the text or cell
    kinds       the kind of each cell, None where all are text (`grid.Cell`)
    computed    places of stored numbers with more digits than an instrument shows
    qualifiers  "<", ">" or "" for each entry, from a column of their own
    decimal     the sign that was chosen, ``hint`` the one that other columns show
    place_of    the place of an entry in words
    """

    texts: Sequence[str]
    place_of: Callable[[int], str]
    kinds: Sequence[str] | None = None
    computed: frozenset[int] = frozenset()
    qualifiers: Sequence[str] | None = None
    decimal: Sign | None = None
    hint: Sign | None = None
    heading_unit: str | None = None


@dataclass
class Read:
    """What a column came to; ``refusal`` is the reason why nothing may be computed."""

    numbers: list[str] = field(default_factory=list)
    special: dict[int, Special] = field(default_factory=dict)
    sign: DecimalSign = field(default_factory=lambda: DecimalSign("."))
    unit: str | None = None
    warnings: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    refusal: str = ""
    computed: bool = False


def read_column(given: Given) -> Read:
    """Return what each entry of a column is; the decimal sign and the unit are decided over all of them."""
    return _read_plain(given) or _read_any(given)


def _read_plain(given: Given) -> Read | None:
    """The short way for a long column of numbers with one decimal sign and nothing else."""
    if given.kinds is not None or given.qualifiers is not None or not given.texts or given.decimal:
        return None
    text = "\n".join(given.texts)
    if not text.isascii() or text.count("\n") != len(given.texts) - 1:
        return None
    sign: Sign
    if not ODD_BY_POINT.search(text):
        if given.hint == "," and "." in text:
            return None
        if 0 < text.count(".") < len(given.texts) and not _SURE_POINT.search(text):
            return None  # 1.234 beside 987: perhaps thousands marks
        sign, numbers = ("." if "." in text or given.hint is None else given.hint), list(given.texts)
    elif _SURE_COMMA.search(text) and not ODD_BY_COMMA.search(text):
        sign, numbers = ",", text.replace(",", ".").split("\n")
    else:
        return None
    found = Read(numbers, sign=_plain_sign(given.texts, sign), unit=given.heading_unit)
    found.warnings.extend(_codes_among(given, Counter(numbers) if "9" in text else {}))
    return found


def _plain_sign(texts: Sequence[str], sign: Sign) -> DecimalSign:
    sure = next((text for text in texts[:1000] if leaning(text.lstrip("+-")) == sign), "")
    return DecimalSign(
        sign, f'decimal {"comma" if sign == "," else "point"}: "{sure}" cannot be read otherwise' if sure else ""
    )


def _read_any(given: Given) -> Read:
    keys: Sequence[Any] = given.texts if given.kinds is None else list(zip(given.texts, given.kinds, strict=True))
    known: dict[Hashable, Parsed] = {
        key: _parsed(*(key if given.kinds is not None else (key, "text"))) for key in dict.fromkeys(keys)
    }
    counts = Counter(keys)
    known = settled(known, counts, given.heading_unit)
    found = Read()
    found.sign = _sign(given, known)
    numbers = {key: _number_of(one, key, found.sign, given) for key, one in known.items()}
    typical = _typical(known, numbers, found.sign)
    for key, one in list(known.items()):
        known[key], numbers[key] = _checked(one, numbers[key], found.sign, typical, _is_text(key, given))
    each = _qualified([known[key] for key in keys], given)
    _collect(found, each, [numbers[key] for key in keys], given)
    found.refusal = _units(found, each, given) or _bullets(each)
    _remark(found, each, given, known.values())
    return found


def _is_text(key: Any, given: Given) -> bool:
    return given.kinds is None or key[1] == "text"


def _parsed(text: str, kind: str) -> Parsed:
    """One cell: its text by the grammar, unless the cell is of a kind that no text can have."""
    if kind in ("date", "formula", "boolean"):
        return Parsed("unread", sort={"date": "date", "formula": "no result", "boolean": "text"}[kind])
    if kind == "error":
        return Parsed("missing", sort="error")
    return parse(one_spelling(text).strip(" \t\xa0"))


def _sign(given: Given, known: dict[Hashable, Parsed]) -> DecimalSign:
    if given.decimal:
        return DecimalSign(given.decimal, "as chosen")
    return decimal_sign(
        ((one.numeral, one.power) for key, one in known.items() if one.numeral and _is_text(key, given)), given.hint
    )


def _number_of(one: Parsed, key: Any, sign: DecimalSign, given: Given) -> str | None:
    """Plain decimal text of the number in an entry; None where its numeral is malformed."""
    if not one.numeral:
        return ""
    plain = under(one.numeral, sign.sign if _is_text(key, given) else ".")
    if plain is None and not given.decimal and leaning(one.numeral) in (".", ","):
        plain = under(one.numeral, leaning(one.numeral))
    if plain is None:
        return None
    text = f"{'-' if one.minus else ''}{plain}{f'E{one.exponent}' if one.power else ''}"
    try:
        exact(text)
    except ReadingsComplaint:
        return None
    return text


def _typical(known: dict[Hashable, Parsed], numbers: dict[Hashable, str | None], sign: DecimalSign) -> float:
    """Size of the readings that no thousands mark has a part in."""
    sizes = sorted(
        abs(float(numbers[key] or 0))
        for key, one in known.items()
        if one.kind == "reading" and numbers[key] and leaning(one.numeral) != "either"
    )
    return sizes[len(sizes) // 2] if sizes and sign.thousands else 0.0


def _checked(
    one: Parsed, number: str | None, sign: DecimalSign, typical: float, is_text: bool
) -> tuple[Parsed, str | None]:
    """An entry whose numeral cannot be read, or only by a thousands mark that nothing supports, is not read."""
    if number is None:
        return Parsed("unread", sort="malformed" if leaning(one.numeral) == "malformed" else "range"), ""
    if typical and is_text and one.numeral and leaning(one.numeral) == "either":
        other = "," if sign.sign == "." else "."
        if other in one.numeral and not 1 / FARTHEST < abs(float(number)) / typical < FARTHEST:
            return Parsed("unread", sort="thousands", meant=under(one.numeral, other) or ""), ""
    return one, number


def _qualified(each: list[Parsed], given: Given) -> list[Parsed]:
    """Entries whose "<" or ">" stands in a column of its own."""
    if given.qualifiers is None:
        return each
    found = []
    for one, mark in zip(each, given.qualifiers, strict=True):
        word = one_spelling(mark).strip().casefold()
        kind: Kind | None = "below" if word in _BELOW_MARKS else "above" if word in _ABOVE_MARKS else None
        if not word or word == "=" or one.kind != "reading":
            found.append(one)
        elif kind:
            found.append(replace(one, kind=kind, sort=""))
        else:
            found.append(replace(one, remark=mark.strip(), sort="flag"))
    return found


def _collect(found: Read, each: list[Parsed], numbers: list[str | None], given: Given) -> None:
    plain = [one.kind == "reading" and not one.sort for one in each]
    reading = [one.kind == "reading" for one in each]
    found.numbers = [number or "" for number in compress(numbers, reading)]
    for i in compress(range(len(each)), (not one for one in plain)):
        one, number = each[i], numbers[i] or ""
        limit = sayings.as_written(number, found.sign.sign)
        found.special[i] = Special(one.kind, number, sayings.role(one, limit))
    found.computed = bool(given.computed) or any(
        looks_computed(exact(number)) for number in found.numbers if len(number) > 12
    )


def _units(found: Read, each: list[Parsed], given: Given) -> str:
    """Decide the unit; return the reason for a refusal where two units clash."""
    first: dict[str, int] = {}
    for i, one in enumerate(each):
        if one.unit and one.kind != "unread":
            first.setdefault(one.unit, i)
    units = list(first)
    if given.heading_unit:
        odd = next((unit for unit in units if not same_unit(unit, given.heading_unit)), None)
        found.unit = given.heading_unit
        return sayings.heading_clash(given, first[odd], odd) if odd else ""
    odd = next((unit for unit in units if not same_unit(unit, units[0])), None)
    if odd:
        return sayings.unit_clash(given, first[units[0]], units[0], first[odd], odd)
    found.unit = units[0] if units else None
    without = [i for i, one in enumerate(each) if one.kind == "reading" and not one.unit] if units else []
    if without:
        found.warnings.append(sayings.some_without_unit(given, without, units[0]))
    return ""


def _bullets(each: list[Parsed]) -> str:
    gaps = [one for one in each if one.kind == "reading"]
    if len(gaps) > 1 and all(one.sort == "gap" for one in gaps) and not any(one.unit for one in gaps):
        return (
            'Every line begins with "- ": a list mark or a minus sign? Take the marks away, or write the minus '
            "close to its number."
        )
    return ""


def _remark(found: Read, each: list[Parsed], given: Given, known: Iterable[Parsed]) -> None:
    """Say everything the technician must see about single entries."""
    groups: dict[str, list[int]] = {}
    for i in found.special:
        groups.setdefault(each[i].sort if each[i].kind != "unread" else "unread", []).append(i)
    found.warnings.extend(sayings.about_unread(given, groups.pop("unread", []), each))
    for sort, places in groups.items():
        sentence = sayings.about(sort, given, places, each)
        if sentence:
            (found.notes if sort in sayings.NEUTRAL else found.warnings).append(sentence)
    if found.sign.mixed:
        found.warnings.append(sayings.mixed_signs(given, each, found.sign.sign))
    if found.sign.thousands:
        found.warnings.extend(filter(None, [sayings.thousands(given, each, found.sign.sign)]))
    if any(" " in one.numeral for one in known):
        found.warnings.extend(sayings.blank_groups(given, each))
    found.warnings.extend(_codes_among(given, Counter(found.numbers)))


def _codes_among(given: Given, counts: Counter[str] | dict[str, int]) -> list[str]:
    """Numbers such as −999 that programs write for "no value", where they stand far from the others."""
    codes = [code for code in _CODES if code in counts]
    if not codes or len(counts) < 2:
        return []
    others = [abs(float(number)) for number in counts if number not in _CODES]
    far = [code for code in codes if others and abs(float(code)) > 5 * max(others)]
    return [sayings.code_for_nothing(given, code) for code in far]
