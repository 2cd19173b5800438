"""Where the readings of an entry came from: the pasted text, or the file and the place in it, and the role of each."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from hashlib import sha256
from typing import Any

from meanlab.core.numbers import as_typed
from meanlab.core.plain import Facts
from meanlab.core.readings import ReadingSet

CENSORED_ROLES = {"below": "below-limit", "above": "above-limit"}


@dataclass(frozen=True)
class SourceEntry(Facts):
    """One entry that was read: its place in the order, where it stood ("line 4"), its text, its role, and the cause
    where it was left out ("" where it was not)."""

    index: int
    place: str
    text: str
    role: str
    left_out: str = ""


@dataclass(frozen=True)
class Source(Facts):
    """Where readings came from.

    text       the pasted text as it was, "" where a file was read
    file_name, checksum, size   of the file: its name, SHA-256 (hexadecimal) and bytes; "" and 0 where text was pasted
    selection  what was chosen in it: {"sheet": …, "column": …, …}, each as text
    entries    every entry read, readings and others, in order
    """

    text: str = ""
    file_name: str = ""
    checksum: str = ""
    size: int = 0
    selection: Mapping[str, str] = field(default_factory=dict)
    entries: tuple[SourceEntry, ...] = ()


def source_of(
    content: str | bytes, readings: ReadingSet, intake: Any = None, file_name: str = "", selection: Any = None
) -> Source:
    """Return the source of readings from the pasted text, or the bytes of the file and its name.

    ``intake`` is what was read from it (its entries name place, text and role); without it the entries are those of the
    readings. ``selection`` is what was chosen in the file, as `meanlab.read` takes it.

    >>> source_of("5,02 5,04", ReadingSet(["5,02", "5,04"])).entries[1].text
    '5,04'
    """
    chosen = {str(name): _in_words(given) for name, given in dict(selection or {}).items()}
    read = getattr(intake, "entries", None)
    entries = entries_of(readings) if read is None else _entries_of_intake(read, readings)
    if isinstance(content, str):
        return Source(text=content, file_name=file_name, selection=chosen, entries=entries)
    return Source("", file_name, sha256(content).hexdigest(), len(content), chosen, entries)


def entries_of(readings: ReadingSet) -> tuple[SourceEntry, ...]:
    """Return the entries of readings in order, where nothing else is known of where they stood."""
    found = [(place, text, "reading") for place, text in zip(readings.positions, readings.typed, strict=True)]
    found += [
        (one.index, one.typed or ("" if one.limit is None else as_typed(one.limit)), CENSORED_ROLES[one.kind])
        for one in readings.censored
    ]
    return tuple(
        SourceEntry(index, "", text, role, readings.left_out.get(index, "")) for index, text, role in sorted(found)
    )


def _entries_of_intake(read: Any, readings: ReadingSet) -> tuple[SourceEntry, ...]:
    return tuple(
        SourceEntry(int(one.index), str(one.place), str(one.text), str(one.role), readings.left_out.get(one.index, ""))
        for one in read
    )


def _in_words(given: Any) -> str:
    if isinstance(given, Mapping):
        return "; ".join(f"{name} = {value}" for name, value in given.items())
    if isinstance(given, (list, tuple)):
        return "; ".join(map(str, given))
    return str(given)
