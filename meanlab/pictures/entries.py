"""The entries of a question as a picture shows them: kept readings, left-out ones, below- and above-limit ones."""

from collections.abc import Sequence
from dataclasses import dataclass

from meanlab.core.numbers import places
from meanlab.core.readings import Censored, ReadingSet
from meanlab.core.results import Analysis
from meanlab.wording.names import unit_of
from meanlab.wording.numbers import decimal_text, unit_text

MOST_DRAWN = 240


@dataclass(frozen=True)
class Entry:
    """One plain reading: value in the unit, place among all entries (from 1), text as typed, preparation or ""."""

    value: float
    place: int
    typed: str
    preparation: str = ""


@dataclass(frozen=True)
class AtLimit:
    """All below- or above-limit entries with the same limit (None: without one), and whether they were left out."""

    kind: str
    limit: float | None
    count: int
    words: str
    left_out: bool


@dataclass(frozen=True)
class Entries:
    """What there is to be drawn of the readings of one question."""

    kept: tuple[Entry, ...]
    left_out: tuple[Entry, ...]
    at_limit: tuple[AtLimit, ...]
    unit: str
    sign: str

    def said(self, entry: Entry) -> str:
        """Return what is read when a reading is pointed at."""
        of = f" (preparation {entry.preparation})" if entry.preparation else ""
        return f"Entry {entry.place}{of}: {unit_text(entry.typed, self.unit)}"


def entries_of(analysis: Analysis) -> Entries:
    """Return the entries of an analysis, readings in reading order."""
    readings = analysis.readings
    plain = [
        Entry(float(value), place + 1, typed.strip(), "" if readings.preparations is None else readings.preparations[i])
        for i, (value, place, typed) in enumerate(zip(readings.values, readings.positions, readings.typed, strict=True))
    ]
    return Entries(
        tuple(entry for entry in plain if entry.place - 1 not in readings.left_out),
        tuple(entry for entry in plain if entry.place - 1 in readings.left_out),
        _at_limits(readings),
        unit_of(analysis),
        readings.decimal_sign,
    )


def thinned(entries: Sequence[Entry], most: int = MOST_DRAWN) -> tuple[Entry, ...]:
    """Return at most so many readings, evenly by rank, the smallest and the largest among them, in reading order."""
    if len(entries) <= most:
        return tuple(entries)
    by_size = sorted(range(len(entries)), key=lambda i: entries[i].value)
    chosen = sorted({by_size[round(i * (len(entries) - 1) / (most - 1))] for i in range(most)})
    return tuple(entries[i] for i in chosen)


def _at_limits(readings: ReadingSet) -> tuple[AtLimit, ...]:
    groups: dict[tuple[str, float | None, bool], list[Censored]] = {}
    for entry in readings.censored:
        limit = None if entry.limit is None else float(entry.limit)
        groups.setdefault((entry.kind, limit, entry.index in readings.left_out), []).append(entry)
    return tuple(
        AtLimit(kind, limit, len(group), _words(kind, group, left_out, readings.decimal_sign), left_out)
        for (kind, limit, left_out), group in groups.items()
    )


def _words(kind: str, group: list[Censored], left_out: bool, sign: str) -> str:
    limit = group[0].limit
    where = f"{kind} a limit not stated" if limit is None else f"{kind} {decimal_text(limit, places(limit), sign)}"
    return f"{len(group)} {where}{', left out' if left_out else ''}"
