"""The cells of the readings: stored numbers as they are, texts by the grammar of the intake over the whole column."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field, replace
from datetime import date, time
from decimal import Decimal
from functools import cached_property
from numbers import Number
from typing import Any

import numpy as np
import pandas as pd

from meanlab.core.complaints import ReadingsComplaint
from meanlab.core.numbers import MOST_COMPUTED_DIGITS, as_typed, exact
from meanlab.core.readings import Censored
from meanlab.intake.column import Given, Read, read_column
from meanlab.intake.found import Special
from meanlab.intake.numerals import Sign

MOST_PLACES = 15
MOST_DIGITS = 15  # that a double always carries
PLAIN, MISSING, LONG, ODD = 0, 1, 2, 3
WIDE = 99
AT_A_TIME = 2**16  # numbers that stay in the processor's cache


@dataclass(frozen=True)
class Cells:
    """The entries of a table, one after the other.

    kind      PLAIN for a number of at most 15 significant digits, LONG for one of more, MISSING, or ODD for all else
    numbers   the plain and long numbers as doubles; what the others hold has no meaning
    places    decimal places of each plain number, WIDE for a long one
    computed  True for a stored number with more digits than an instrument shows
    given     the entries as they stand in the table
    special   what the texts are that are no plain numbers; ``texts`` the plain decimal text of those that are numbers
    sign      decimal sign of the texts
    unit      the unit that stands with the texts, "" where none does
    remarks   what must be seen about the texts
    """

    kind: np.ndarray
    numbers: np.ndarray
    places: np.ndarray
    computed: np.ndarray
    given: Sequence[Any]
    special: dict[int, Special] = field(default_factory=dict)
    texts: dict[int, str] = field(default_factory=dict)
    sign: Sign = "."
    unit: str = ""
    remarks: tuple[str, ...] = ()

    def decimal(self, place: int) -> Decimal:
        """Return a plain or long number exactly."""
        return Decimal(self.texts.get(place) or repr(float(self.numbers[place])))

    def reading(self, place: int) -> Decimal | Censored:
        """Return one entry that is not missing; raises ReadingsComplaint, with the entry, where it is no reading."""
        entry, special = self.given[place], self.special.get(place)
        shown = as_typed(entry).strip()
        if special is None or special.kind == "reading":
            return exact(self.texts.get(place, entry), "An entry", where="readings")
        if special.kind == "below" or special.kind == "above":
            return Censored(place, special.kind, exact(special.number) if special.number else None, typed=shown)
        raise ReadingsComplaint(f'"{shown[:40]}" {special.role}', "readings")


def cells_of(columns: Sequence[pd.Series], place_of: Callable[[int], str], decimal: Sign | None = None) -> Cells:
    """Return the entries of one column, or of several read across each row; ``decimal`` where the sign is known."""
    if all(is_numeric(column) for column in columns):
        return _stored([_as_doubles(column) for column in columns], columns)
    entries = [entry for row in zip(*(column.tolist() for column in columns), strict=True) for entry in row]
    return _written(entries, place_of, decimal)


def is_numeric(column: pd.Series) -> bool:
    """Tell whether a column holds stored numbers and nothing else."""
    kind = column.dtype
    return pd.api.types.is_numeric_dtype(kind) and not (
        pd.api.types.is_bool_dtype(kind) or pd.api.types.is_complex_dtype(kind)
    )


def _as_doubles(column: pd.Series) -> np.ndarray:
    if column.dtype == np.float32:  # its own shortest text, not that of the wider double
        return column.to_numpy().astype(str).astype(float)
    return column.to_numpy(dtype=float, na_value=np.nan)


def _stored(doubles: Sequence[np.ndarray], columns: Sequence[pd.Series]) -> Cells:
    numbers = doubles[0] if len(doubles) == 1 else np.column_stack(doubles).reshape(-1)
    missing = np.isnan(numbers)
    places, whole = decimal_places(np.where(missing, 0.0, numbers))
    whole_numbers = all(pd.api.types.is_integer_dtype(column.dtype) for column in columns)
    long = ODD if whole_numbers else LONG  # a double cannot hold a long whole number
    kind = np.where(missing, MISSING, np.where(places == WIDE, long, PLAIN)).astype(np.int8)
    kind[np.isinf(numbers)] = ODD
    computed = np.zeros(len(numbers), dtype=bool) if whole_numbers else _computed(whole, places)
    return Cells(kind, numbers, places, computed, _Across(columns))


class _Across(Sequence[Any]):
    """The cells of several columns, row by row; they are fetched when one is looked at."""

    def __init__(self, columns: Sequence[pd.Series]) -> None:
        self._columns = columns

    def __len__(self) -> int:
        return len(self._columns) * len(self._columns[0])

    def __getitem__(self, place: Any) -> Any:
        row, column = divmod(place, len(self._columns))
        return self._entries[column][row]

    @cached_property
    def _entries(self) -> list[list[Any]]:
        return [list(one.to_numpy()) if one.dtype == np.float32 else one.tolist() for one in self._columns]


def decimal_places(numbers: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """Return the decimal places of the shortest text of each double, WIDE above 15 digits, and its digits as a double.

    A decimal number k/10^d of at most 15 digits is the only one so short that its double can have.

    >>> decimal_places(np.array([5.02, 12.0, 0.1 + 0.2]))[0].tolist()
    [2, 0, 99]
    """
    parts = [_places_of_some(numbers[start : start + AT_A_TIME]) for start in range(0, len(numbers), AT_A_TIME)]
    if not parts:
        return np.zeros(0, dtype=np.int8), np.zeros(0)
    places, whole = (np.concatenate(side) for side in zip(*parts, strict=True))
    return places, whole


def _places_of_some(numbers: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    places = np.full(len(numbers), WIDE, dtype=np.int8)
    whole = np.zeros(len(numbers))
    rest, left = np.arange(len(numbers)), numbers
    for d in range(MOST_PLACES + 1):
        with np.errstate(over="ignore", invalid="ignore"):
            digits = np.rint(left * 10.0**d)
            fits = (digits / 10.0**d == left) & (np.abs(digits) < 10.0**MOST_DIGITS)
        if d == 0 and fits.all():
            return np.zeros(len(numbers), dtype=np.int8), digits
        places[rest[fits]], whole[rest[fits]] = d, digits[fits]
        rest, left = rest[~fits], left[~fits]
        if not len(rest):
            break
    return places, whole


def _computed(whole: np.ndarray, places: np.ndarray) -> np.ndarray:
    """Tell which stored numbers have more significant digits than an instrument shows."""
    computed = places == WIDE
    for place in np.flatnonzero(np.abs(whole) >= 10.0**MOST_COMPUTED_DIGITS):
        computed[place] = len(str(int(abs(whole[place]))).rstrip("0")) > MOST_COMPUTED_DIGITS
    return computed


def _written(entries: list[Any], place_of: Callable[[int], str], decimal: Sign | None) -> Cells:
    """Texts, or texts and stored numbers mixed, by the grammar of an entry."""
    both = list(map(_text_and_kind, entries))
    texts, kinds = [text for text, _ in both], [kind for _, kind in both]
    given = Given(texts, place_of, kinds if set(kinds) - {"text"} else None, decimal=decimal)
    found = read_column(given)
    if found.sign.open:  # all of them could be grouped thousands: read as single numbers are
        comma = any("," in text for text in texts)
        found = read_column(replace(given, decimal="," if comma else "."))
    if found.refusal:
        raise ReadingsComplaint(found.refusal, "readings")
    return _from_read(entries, texts, kinds, found)


def sign_of(column: pd.Series) -> Sign | None:
    """Return the decimal sign of a column of texts, None where it holds stored numbers alone."""
    if is_numeric(column):
        return None
    return cells_of([column.drop_duplicates()], lambda place: f"entry {place + 1}").sign


def _text_and_kind(entry: Any) -> tuple[str, str]:
    if isinstance(entry, str):
        return entry.strip(), "text"
    if entry is None or entry is pd.NaT or entry is pd.NA or entry != entry:
        return "", "text"
    if isinstance(entry, bool | np.bool_):
        return str(entry), "boolean"
    if isinstance(entry, date | time):
        return str(entry), "date"
    return as_typed(entry), "number" if isinstance(entry, Number) else "text"


def _from_read(entries: list[Any], texts: Sequence[str], kinds: Sequence[str], found: Read) -> Cells:
    count = len(entries)
    kind = np.full(count, PLAIN, dtype=np.int8)
    for place, special in found.special.items():
        kind[place] = PLAIN if special.kind == "reading" else MISSING if special.kind == "missing" else ODD
    numbers, readings = np.zeros(count), np.flatnonzero(kind == PLAIN)
    numbers[readings] = np.array(found.numbers, dtype=str).astype(float) if found.numbers else 0.0
    places, whole = decimal_places(numbers)
    long = [i for i, text in zip(readings.tolist(), found.numbers, strict=True) if len(text) > MOST_DIGITS]
    for place in long:
        if places[place] != WIDE and sum(map(str.isdigit, texts[place])) > MOST_DIGITS:
            places[place] = WIDE
    kind[(kind == PLAIN) & (places == WIDE)] = LONG
    stored = np.array([one == "number" for one in kinds], dtype=bool)
    computed = _computed(whole, places) & stored & np.array([isinstance(one, float) for one in entries], dtype=bool)
    plain_texts = dict(zip(readings.tolist(), found.numbers, strict=True))
    said = (found.sign.sign, found.unit or "", tuple(found.warnings))
    return Cells(kind, numbers, places, computed, entries, found.special, plain_texts, *said)
