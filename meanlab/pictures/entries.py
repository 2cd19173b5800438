"""The entries of a question as a picture shows them: kept readings, left-out ones, below- and above-limit ones."""

from dataclasses import dataclass

import numpy as np

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
    """What there is to be drawn of the readings of one question.

    kept, left_out   readings in reading order, thinned where there are many
    count            how many were kept
    """

    kept: tuple[Entry, ...]
    left_out: tuple[Entry, ...]
    count: int
    at_limit: tuple[AtLimit, ...]
    unit: str
    sign: str

    def said(self, entry: Entry) -> str:
        """Return what is read when a reading is pointed at."""
        of = f" (preparation {entry.preparation})" if entry.preparation else ""
        return f"Entry {entry.place}{of}: {unit_text(entry.typed, self.unit)}"


def entries_of(analysis: Analysis) -> Entries:
    """Return the entries of an analysis; of more than 240 readings as many, evenly by rank, with both extremes."""
    readings = analysis.readings
    values = np.array([float(value) for value in readings.values])
    out = readings.left_out
    kept = [i for i, place in enumerate(readings.positions) if place not in out]
    left_out = [i for i, place in enumerate(readings.positions) if place in out]

    def entry(i: int) -> Entry:
        label = "" if readings.preparations is None else readings.preparations[i]
        return Entry(float(values[i]), readings.positions[i] + 1, readings.typed[i].strip(), label)

    return Entries(
        tuple(entry(kept[i]) for i in thinned(values[kept])),
        tuple(entry(left_out[i]) for i in thinned(values[left_out])),
        len(kept),
        _at_limits(readings),
        unit_of(analysis),
        readings.decimal_sign,
    )


def thinned(values: np.ndarray, most: int = MOST_DRAWN) -> list[int]:
    """Return the places of at most so many values, evenly by rank, the smallest and the largest among them.

    >>> thinned(np.array([5.0, 1.0, 2.0, 3.0, 4.0]), 3)
    [0, 1, 3]
    """
    if len(values) <= most:
        return list(range(len(values)))
    ranks = np.linspace(0, len(values) - 1, most).round().astype(int)
    return sorted(map(int, np.argsort(values, kind="stable")[ranks]))


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
