"""Sentences about entries: what was found, where, and what to do."""

import re
from collections.abc import Sequence
from typing import TYPE_CHECKING

from meanlab.intake.characters import shown
from meanlab.intake.entry import Parsed
from meanlab.intake.numerals import leaning

if TYPE_CHECKING:
    from meanlab.intake.given import Given

MOST_NAMED = 5
NEUTRAL = frozenset({"open unit", "gap grouped"})
_WHY = {
    "date": "a date",
    "time": "a time",
    "formula": "a formula",
    "no result": "a formula without a stored result",
    "width": "a cell too narrow to show its number",
    "infinite": "not finite",
    "two numbers": "more than one number",
    "brackets": "a number in brackets",
    "span": "a range of numbers",
    "malformed": "not a number",
    "lost power": "a power of ten without its exponent",
    "range": "out of range",
    "thousands": "a comma or point that could be either",
    "long": "a text",
    "text": "not a number",
}


def as_written(number: str, sign: str) -> str:
    """Return a plain number with the decimal sign of the column."""
    return number.replace(".", sign).replace("E", "e")


def role(one: Parsed, limit: str) -> str:
    """Return what an entry was taken for, in words."""
    if one.kind in ("below", "above"):
        return f"{one.kind} the limit {limit}" if limit else f"{one.kind} a limit that is not named"
    if one.kind == "missing":
        return "missing (cell in error)" if one.sort == "error" else "missing"
    if one.kind == "unread":
        return f"could not be read: {_WHY.get(one.sort, 'not a number')}"
    if one.sort == "uncertainty":
        return f'reading; "{shown(one.remark)}" beside it is not used'
    return f'reading, marked "{shown(one.remark)}"' if one.sort == "flag" else "reading"


def quoted(given: "Given", i: int) -> str:
    """Return place and text of an entry: 'Line 4: "12,3O"'."""
    place = given.place_of(i)
    return f'{place[:1].upper()}{place[1:]}: "{shown(given.texts[i])}"'


def named(given: "Given", places: Sequence[int]) -> str:
    """Return up to five places with their texts, and how many more there are."""
    parts = [f'{given.place_of(i)} "{shown(given.texts[i])}"' for i in places[:MOST_NAMED]]
    more = len(places) - MOST_NAMED
    return ", ".join(parts) + (f" and {more:,} more" if more > 0 else "")


def about_unread(given: "Given", places: Sequence[int], each: Sequence[Parsed]) -> list[str]:
    """Return one sentence for each entry that could not be read, at most five, and how many more there are."""
    found = [f"{quoted(given, i)} {_unread(each[i])}" for i in places[:MOST_NAMED]]
    if len(places) > MOST_NAMED:
        found.append(f"{len(places) - MOST_NAMED:,} more entries could not be read.")
    return found


def _unread(one: Parsed) -> str:
    meant = f" Did you mean {one.meant}?" if one.meant else ""
    return {
        "date": "is a date, not a reading; spreadsheets turn numbers into dates. Type the number again." + meant,
        "time": "is a time, not a reading.",
        "formula": "is a formula; formulas are never calculated here. Type its result." + meant,
        "no result": "is a formula whose result was never calculated and stored: open it in a spreadsheet program, "
        "let it calculate, save it, and read it again.",
        "width": "was copied from a cell too narrow to show its number: widen the column and copy again.",
        "infinite": "is not finite, so it is no reading.",
        "brackets": "stands in brackets, which can mean a negative or a doubtful number: type it without them.",
        "span": "is a range of numbers, not one reading.",
        "two numbers": "holds more than one number: write one reading a line.",
        "range": "is outside what is computed exactly: 1e-300 to 1e300, at most 40 significant digits.",
        "thousands": f"could be {one.meant} or have a thousands mark: type it without one.",
        "lost power": "has lost the raised exponent of its power of ten: write it like 1.2e3.",
        "malformed": "is not a number: check its points and commas.",
        "other sign": "does not fit the decimal sign of this column: choose the other one, or correct it.",
        "long": "is a text, not a number.",
    }.get(one.sort, f"is not a number.{meant}" if meant else "is not a number: correct it, or it stays out.")


def about(sort: str, given: "Given", places: Sequence[int], each: Sequence[Parsed]) -> str:
    """Return the sentence about all entries that share something beside their number; "" where there is none."""
    where, count = named(given, places), len(places)
    word = f'"{shown(given.texts[places[0]])}"'
    return {
        "uncertainty": f"The uncertainty written beside {count} of the readings is not used ({where}).",
        "flag": f"Marked readings are kept and counted; leave one out by hand, with its cause: {where}.",
        "trailing minus": f"A minus sign behind the number was read as negative: {where}.",
        "gap": f"A minus sign with a blank behind it was read as negative: {where}.",
        "unclear": f"{word} was taken for a reading {each[places[0]].kind} a limit that is not named ({where}). "
        "If it stands for something else, such as not determined, write NA instead.",
        "word and limit": f"The number behind the word was taken for the limit: {where}.",
        "word": f"Kept apart as {each[places[0]].kind} a limit or range, without a number: {where}.",
        "error": f"Cells in error count as missing: {where}.",
        "open unit": f'"{each[places[0]].unit}" behind every reading was taken for the unit.',
    }.get(sort, "")


def heading_clash(given: "Given", place: int, unit: str) -> str:
    """Return why a heading in one unit over an entry in another stops the reading."""
    return (
        f"The heading gives the unit {given.heading_unit}, but {quoted(given, place)} is in {unit}. "
        "Two units cannot be read together: correct the heading or the entry."
    )


def unit_clash(given: "Given", first: int, unit: str, second: int, other: str) -> str:
    """Return why entries in two units stop the reading."""
    return (
        f"Two units in one column: {quoted(given, first)} is in {unit}, {quoted(given, second)} in {other}. "
        "Write all readings in one unit."
    )


def some_without_unit(given: "Given", places: Sequence[int], unit: str) -> str:
    """Return the warning for readings without the unit that the others carry."""
    return f"{len(places)} of the readings carry no unit and were taken to be in {unit}: {named(given, places)}."


def mixed_signs(given: "Given", each: Sequence[Parsed], sign: str) -> str:
    """Return the warning for numbers that can only have the other decimal sign."""
    other = "," if sign == "." else "."
    odd = [i for i, one in enumerate(each) if one.numeral and leaning(one.numeral) == other]
    mark = "comma" if other == "," else "point"
    return f"The decimal sign is mixed: read with a decimal {mark} as nothing else is possible: {named(given, odd)}."


def thousands(given: "Given", each: Sequence[Parsed], sign: str) -> str:
    """Return the warning for thousands marks that no other entry shows to be such."""
    grouped = [i for i, one in enumerate(each) if one.numeral and leaning(one.numeral) == "either"]
    mark = "point" if sign == "," else "comma"
    if not grouped:
        return ""
    return f"The {mark} was taken for a thousands mark, not a decimal sign: {named(given, grouped)}."


_BLANK_GROUP = re.compile(r"\d \d{3}(?!\d)(?![.,])")


def blank_groups(given: "Given", each: Sequence[Parsed]) -> list[str]:
    """Return the warning for whole numbers whose thousands are parted by an ordinary blank."""
    places = [i for i, one in enumerate(each) if one.numeral and _BLANK_GROUP.search(one.numeral)]
    return [f"The blank was taken for a thousands mark: {named(given, places)}."] if places else []


def code_for_nothing(code: str) -> str:
    """Return the warning for a number that programs write where there is no value."""
    return (
        f"{code} stands far from the other readings and is what some programs write for no value: "
        "if it is no reading, replace it by NA."
    )


def passed_over(places: Sequence[tuple[str, str]]) -> str:
    """Return the warning for numbers that stand in the text but were not read."""
    parts = [f'{place} "{shown(text)}"' for place, text in places[:MOST_NAMED]]
    more = f" and {len(places) - MOST_NAMED:,} more" if len(places) > MOST_NAMED else ""
    return f"Numbers that belong to no column of readings were not read: {', '.join(parts)}{more}."
