"""What was found in a text or a file: readings, everything that is no plain reading, and where each stood."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from decimal import Decimal
from functools import cached_property
from typing import Any, Literal, overload

from meanlab.core.complaints import IntakeComplaint
from meanlab.core.numbers import exact, looks_computed, places
from meanlab.core.readings import Censored, ReadingSet

Kind = Literal["reading", "below", "above", "missing", "unread"]


@dataclass(frozen=True, slots=True)
class Special:
    """An entry that is no plain number.

    kind     "reading" for a number with a remark, "below", "above", "missing", "unread"
    number   plain decimal text of the reading or of the limit, "" where there is none
    role     what it was taken for, in words
    """

    kind: Kind
    number: str = ""
    role: str = ""


@dataclass(frozen=True, slots=True)
class Entry:
    """One entry: its index among all entries, its place ("line 3", "B7"), its text as typed and its role in words.

    ``role`` is "reading" for a plain reading and says what the entry was taken for otherwise.
    """

    index: int
    place: str
    text: str
    role: str


class Entries(Sequence[Entry]):
    """All entries in reading order; each is built when it is looked at, so that a million cost little."""

    def __init__(
        self, texts: Sequence[str], special: Mapping[int, Special], place_of: Callable[[int], str] | None = None
    ) -> None:
        self._texts, self._special, self._place_of = texts, special, place_of

    def __len__(self) -> int:
        return len(self._texts)

    def _entry(self, index: int) -> Entry:
        special = self._special.get(index)
        place = self._place_of(index) if self._place_of else ""
        return Entry(index, place, self._texts[index], "reading" if special is None else special.role)

    @overload
    def __getitem__(self, where: int) -> Entry: ...
    @overload
    def __getitem__(self, where: slice) -> Sequence[Entry]: ...
    def __getitem__(self, where: int | slice) -> Entry | Sequence[Entry]:
        found = range(len(self._texts))[where]
        return [self._entry(i) for i in found] if isinstance(found, range) else self._entry(found)


@dataclass(frozen=True)
class Intake:
    """Everything that was read from one pasted text or one column of a file.

    texts         each entry as typed, in reading order (readings, censored, missing and unread together)
    special       {index: Special} of the entries that are no plain number
    numbers       plain decimal text ("-1234.50") of each reading, in reading order
    unit, name    as the heading or the entries give them; None where they do not
    decimal_sign  "." or ",", decided over the whole column; ``evidence`` says on which grounds
    warnings      what the technician must see; ``notes`` what is neutral
    refused       nothing may be computed, ``reason`` says why; ``needs_choice`` with ``choices`` where it must be asked
    computed      some numbers are computed spreadsheet numbers that say nothing of their resolution
    preparations  label of the preparation of each entry, None where none are named; they are proposed only and count
                  where ``preparations_chosen`` says so
    """

    texts: Sequence[str] = ()
    special: Mapping[int, Special] = field(default_factory=dict)
    numbers: Sequence[str] = ()
    unit: str | None = None
    name: str | None = None
    decimal_sign: str = "."
    evidence: str = ""
    warnings: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    refused: bool = False
    reason: str = ""
    needs_choice: bool = False
    choices: tuple[Mapping[str, Any], ...] = ()
    computed: bool = False
    preparations: tuple[str, ...] | None = None
    preparations_chosen: bool = False
    place_of: Callable[[int], str] | None = field(default=None, repr=False, compare=False)

    @property
    def entries(self) -> Entries:
        """All entries in reading order, each with index, place, text and role."""
        return Entries(self.texts, self.special, self.place_of)

    @property
    def has_readings(self) -> bool:
        """True where at least one reading or below- or above-limit reading was found and nothing has to be chosen."""
        return not self.refused and bool(self.numbers or self.censored)

    @cached_property
    def values(self) -> list[float]:
        """The readings in reading order, each rounded once to double."""
        values = list(map(float, self.numbers))
        return [value if value else 0.0 for value in values] if 0.0 in values else values

    @cached_property
    def exact_values(self) -> tuple[Decimal, ...]:
        """The readings as exact decimals with their trailing zeros."""
        return tuple(value if value else abs(value) for value in map(Decimal, self.numbers))

    @cached_property
    def positions(self) -> tuple[int, ...]:
        """The index of each reading among all entries."""
        special = self.special
        if not special:
            return tuple(range(len(self.texts)))
        return tuple(i for i in range(len(self.texts)) if i not in special or special[i].kind == "reading")

    @cached_property
    def censored(self) -> tuple[Censored, ...]:
        """The below- and above-limit readings."""
        return tuple(
            Censored(
                i,
                "below" if one.kind == "below" else "above",
                exact(one.number) if one.number else None,
                typed=self.texts[i],
            )
            for i, one in sorted(self.special.items())
            if one.kind in ("below", "above")
        )

    @cached_property
    def decimals(self) -> int | None:
        """The finest resolution as written; None without readings or with computed numbers alone."""
        distinct = set(self.numbers)
        if self.computed:
            distinct = {number for number in distinct if not (len(number) > 12 and looks_computed(Decimal(number)))}
        return max(0, *map(_places, distinct)) if distinct else None

    def count(self, kind: Kind) -> int:
        """Return how many entries that are no plain number are of one kind."""
        return sum(one.kind == kind for one in self.special.values())

    def counts_line(self) -> str:
        """Return one line of counts: what was read, kept apart and left unread, decimal sign and places."""
        if self.needs_choice:
            return "A choice is needed."
        parts = [f"{len(self.numbers):,} read".replace(",", " ")]
        for kind, words in (("below", "below a limit"), ("above", "above a limit"), ("missing", "missing")):
            if self.count(kind):  # type: ignore[arg-type]
                parts.append(f"{self.count(kind)} {words}")  # type: ignore[arg-type]
        parts.append(f"{self.count('unread')} refused")
        parts.append("decimal comma" if self.decimal_sign == "," else "decimal point")
        if self.decimals is not None:
            parts.append(f"{self.decimals} {'place' if self.decimals == 1 else 'places'}")
        return " · ".join(parts)

    def reading_set(
        self, left_out: Mapping[int, str] | None = None, preparations: Sequence[str] | None = None
    ) -> ReadingSet:
        """Return the readings for an analysis.

        ``left_out`` is {index of the entry: cause}; ``preparations`` labels each entry, or each reading; without them
        the labels of the preparation column that was chosen count.
        Raises IntakeComplaint where the intake was refused or a choice is open, ReadingsComplaint as ReadingSet does.
        """
        if self.refused:
            raise IntakeComplaint(self.reason, "readings")
        if self.needs_choice:
            raise IntakeComplaint(self.reason or "Several columns could be meant: choose one.", "readings")
        labels = self.preparations if preparations is None and self.preparations_chosen else preparations
        if labels is not None and len(labels) == len(self.texts):
            taken = sorted([*self.positions, *(one.index for one in self.censored)])
            labels = [labels[i] for i in taken]
        texts = self.texts
        return ReadingSet(
            self.exact_values,
            self.unit or "",
            self.name or "",
            None if labels is None else tuple(labels),
            self.censored,
            dict(left_out or {}),
            positions=self.positions,
            typed=tuple(texts) if len(self.positions) == len(texts) else tuple(texts[i] for i in self.positions),
            decimal_sign=self.decimal_sign,
            computed=self.computed,
        )

    def to_dict(self) -> dict[str, Any]:
        """Return what was found as plain JSON values, with the fixed names of the public face."""
        return {
            "values": list(self.values),
            "censored": [one.to_dict() for one in self.censored],
            "missing": self.count("missing"),
            "rejected": [
                {"index": i, "text": self.texts[i]} for i, one in sorted(self.special.items()) if one.kind == "unread"
            ],
            "unit": self.unit,
            "name": self.name,
            "decimals": self.decimals,
            "warnings": list(self.warnings),
            "notes": list(self.notes),
            "refused": self.refused,
            "reason": self.reason,
            "needs_choice": self.needs_choice,
            "choices": [dict(choice) for choice in self.choices],
        }


def _places(number: str) -> int:
    return places(Decimal(number)) if "E" in number else len(number.partition(".")[2])


@dataclass(frozen=True)
class Column:
    """A column that could be chosen: where it stands, what its heading says, and what it holds.

    column        the heading as written; column_index is counted from 0, empty columns included
    role          "readings", "counter", "time", "label", "qualifier", "unit", "summary", "text" or "empty"
    count, rows   readings in it; rows of the table
    first         its first three entries as typed
    """

    sheet: str
    column: str
    unit: str | None
    count: int
    column_index: int = 0
    role: str = "readings"
    rows: int = 0
    first: tuple[str, ...] = ()
    name: str | None = None

    def to_dict(self) -> dict[str, Any]:
        """Return the column as plain JSON values."""
        return {
            "sheet": self.sheet,
            "column": self.column,
            "column_index": self.column_index,
            "unit": self.unit,
            "name": self.name,
            "role": self.role,
            "count": self.count,
            "rows": self.rows,
            "first": list(self.first),
        }
