"""One column of entries: its decimal sign, its unit, and each entry as a number or as what it is instead."""

from collections import Counter
from collections.abc import Hashable, Iterator, Sequence
from dataclasses import replace
from typing import Any

from meanlab.core.complaints import ReadingsComplaint
from meanlab.core.numbers import exact, looks_computed
from meanlab.intake import sayings
from meanlab.intake.characters import one_spelling
from meanlab.intake.entry import Kind, Parsed, parse
from meanlab.intake.found import Special
from meanlab.intake.given import Given, Read, codes_among
from meanlab.intake.numerals import FARTHEST, DecimalSign, decimal_sign, leaning, under
from meanlab.intake.plain_column import read_plain
from meanlab.intake.suffixes import settled
from meanlab.intake.units import same_unit

FEW_APART = 200
MOST_SURE = 30  # characters of a number without a power of ten that cannot pass any limit
_BELOW_MARKS = ("<", "<=", "=<", "≤", "u", "nd")
_ABOVE_MARKS = (">", ">=", "=>", "≥")


def read_column(given: Given) -> Read:
    """Return what each entry of a column is; the decimal sign and the unit are decided over all of them."""
    return read_plain(given) or _read_any(given)


class _Each(Sequence[Parsed]):
    """What each entry of a column is, by the different entries that stand in it."""

    def __init__(self, keys: Sequence[Hashable], known: dict[Hashable, Parsed]) -> None:
        self.keys, self.known = keys, known

    def __len__(self) -> int:
        return len(self.keys)

    def __getitem__(self, i: Any) -> Any:
        return self.known[self.keys[i]]

    def __iter__(self) -> Iterator[Parsed]:
        return map(self.known.__getitem__, self.keys)


def _read_any(given: Given) -> Read:
    keys: Sequence[Any] = given.texts
    if given.kinds is not None:
        keys = list(zip(given.texts, given.kinds, strict=True))
    if given.qualifiers is not None:
        keys = list(zip(keys, map(str.strip, given.qualifiers), strict=True))
    counts = Counter(keys)
    known = {key: _parsed(*_text_and_kind(key, given)) for key in counts}
    known = settled(known, counts, given.heading_unit)
    found = Read()
    found.sign = _sign(given, known)
    numbers = {key: _number_of(one, key, found.sign, given) for key, one in known.items()}
    typical = _typical(known, numbers, found.sign)
    for key, one in list(known.items()):
        known[key], numbers[key] = _checked(one, numbers[key], found.sign, typical, _is_text(key, given))
    if given.qualifiers is not None:
        known = {key: _qualified(one, key[1]) for key, one in known.items() if isinstance(key, tuple)}
    each = _Each(keys, known)
    _collect(found, each, numbers, given)
    found.refusal = _units(found, each, given) or _bullets(known)
    _remark(found, each, given)
    return found


def _text_and_kind(key: Any, given: Given) -> tuple[str, str]:
    plain = key if given.qualifiers is None else key[0]
    return (plain, "text") if given.kinds is None else plain


def _is_text(key: Any, given: Given) -> bool:
    return _text_and_kind(key, given)[1] == "text"


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
    if len(text) > MOST_SURE or one.power:
        try:
            exact(text)
        except ReadingsComplaint:
            return None
    return text


def _typical(known: dict[Hashable, Parsed], numbers: dict[Hashable, str | None], sign: DecimalSign) -> float:
    """Size of the readings that no thousands mark has a part in; 0 where it is not needed."""
    if not sign.thousands:
        return 0.0
    sizes = sorted(
        abs(float(numbers[key] or 0))
        for key, one in known.items()
        if one.kind == "reading" and numbers[key] and leaning(one.numeral) != "either"
    )
    return sizes[len(sizes) // 2] if sizes else 0.0


def _why_no_number(numeral: str, sign: DecimalSign) -> str:
    if leaning(numeral) == "malformed":
        return "malformed"
    fits_other = under(numeral, sign.sign) is None and under(numeral, "," if sign.sign == "." else ".") is not None
    return "other sign" if fits_other else "range"


def _checked(
    one: Parsed, number: str | None, sign: DecimalSign, typical: float, is_text: bool
) -> tuple[Parsed, str | None]:
    """An entry whose numeral cannot be read, or only by a thousands mark that nothing supports, is not read."""
    if number is None:
        return Parsed("unread", sort=_why_no_number(one.numeral, sign)), ""
    if typical and is_text and one.numeral and leaning(one.numeral) == "either":
        other = "," if sign.sign == "." else "."
        if other in one.numeral and not 1 / FARTHEST < abs(float(number)) / typical < FARTHEST:
            return Parsed("unread", sort="thousands", meant=under(one.numeral, other) or ""), ""
    return one, number


def _qualified(one: Parsed, mark: str) -> Parsed:
    """An entry whose "<" or ">" stands in a column of its own."""
    word = one_spelling(mark).strip().casefold()
    kind: Kind | None = "below" if word in _BELOW_MARKS else "above" if word in _ABOVE_MARKS else None
    if not word or word == "=" or one.kind != "reading":
        return one
    return replace(one, kind=kind, sort="") if kind else replace(one, remark=mark, sort="flag")


def _collect(found: Read, each: _Each, numbers: dict[Any, str | None], given: Given) -> None:
    roles = {
        key: _special(one, numbers[key] or "", found.sign.sign)
        for key, one in each.known.items()
        if one.kind != "reading" or one.sort
    }
    places = [i for i, key in enumerate(each.keys) if key in roles] if roles else []
    found.special = {i: roles[each.keys[i]] for i in places}
    found.numbers = [numbers[key] or "" for key in each.keys]
    apart = [i for i in places if found.special[i].kind != "reading"]
    if len(apart) < FEW_APART:
        for i in reversed(apart):
            del found.numbers[i]
    else:
        gone = set(apart)
        found.numbers = [number for i, number in enumerate(found.numbers) if i not in gone]
    different = [numbers[key] or "" for key, one in each.known.items() if one.kind == "reading"]
    found.computed = bool(given.computed) or any(looks_computed(exact(one)) for one in different if len(one) > 12)


def _special(one: Parsed, number: str, sign: str) -> Special:
    return Special(one.kind, number, sayings.role(one, sayings.as_written(number, sign)))


def _units(found: Read, each: _Each, given: Given) -> str:
    """Decide the unit; return the reason for a refusal where two units clash."""
    first: dict[str, int] = {}
    if any(one.unit for one in each.known.values()):
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


def _bullets(known: dict[Any, Parsed]) -> str:
    readings = [one for one in known.values() if one.kind == "reading"]
    if len(readings) < 2 or any(one.sort != "gap" or one.unit for one in readings):
        return ""
    return (
        'Every line begins with "- ": a list mark or a minus sign? Take the marks away, or write the minus close to '
        "its number."
    )


def _remark(found: Read, each: _Each, given: Given) -> None:
    """Say everything the technician must see about single entries."""
    groups: dict[str, list[int]] = {}
    for i in found.special:
        groups.setdefault(each[i].sort if each[i].kind != "unread" else "unread", []).append(i)
    found.unread = sayings.about_unread(given, groups.pop("unread", []), each)
    for sort, places in groups.items():
        sentence = sayings.about(sort, given, places, each)
        if sentence:
            (found.notes if sort in sayings.NEUTRAL else found.warnings).append(sentence)
    if found.sign.mixed:
        found.warnings.append(sayings.mixed_signs(given, each, found.sign.sign))
    if found.sign.thousands:
        found.warnings.extend(filter(None, [sayings.thousands(given, each, found.sign.sign)]))
    if any(" " in one.numeral for one in each.known.values()):
        found.warnings.extend(sayings.blank_groups(given, each))
    found.warnings.extend(sayings.code_for_nothing(code) for code in codes_among(found.numbers))
