"""The readings of one question, as they were typed."""

from collections.abc import Mapping, Sequence
from dataclasses import KW_ONLY, dataclass
from decimal import Decimal
from functools import cached_property
from typing import Any, Literal

from meanlab.core.complaints import ReadingsComplaint
from meanlab.core.numbers import as_typed, exact, finest_places, looks_computed, scaled_all
from meanlab.core.plain import plain


@dataclass(frozen=True)
class Censored:
    """An entry known only to lie below or above a limit ("<0.05", ">100").

    ``index`` is its place among all entries read, ``kind`` is "below" or "above", ``limit`` is None where the entry
    names none ("n.d."), ``preparation`` is the label of the preparation it belongs to, ``typed`` the text as typed.
    """

    index: int
    kind: Literal["below", "above"]
    limit: Decimal | None = None
    preparation: str | None = None
    typed: str = ""

    def to_dict(self) -> dict[str, Any]:
        """Return index, kind and limit as plain JSON values."""
        return {"index": self.index, "kind": self.kind, "limit": None if self.limit is None else float(self.limit)}


@dataclass(frozen=True)
class ReadingSet:
    """The readings of one quantity in reading order, with everything that was not a plain reading kept apart.

    values        numbers or number texts; kept as exact decimals with their trailing zeros
    unit, name    unit and name of the quantity, as the heading gave them
    preparations  label of the preparation each value belongs to (None: every reading is a unit of its own)
    censored      below- and above-limit entries: Censored or {"index", "kind", "limit", "preparation"}
    left_out      {index of the entry: cause} for the entries the technician left out
    positions     place of each value among all entries read; by default the places that ``censored`` leaves free
    typed         the text of each value as typed; by default the texts or shortest decimal texts given as ``values``
    decimal_sign  "." or ","; by default the one the typed texts use
    computed      True where a value is a computed spreadsheet number that says nothing of its resolution

    Raises ReadingsComplaint for a value that is no number, a missing label or position, a left-out entry without cause.
    """

    values: tuple[Decimal, ...]
    unit: str = ""
    name: str = ""
    preparations: tuple[str, ...] | None = None
    censored: tuple[Censored, ...] = ()
    left_out: Mapping[int, str] = None  # type: ignore[assignment]  # a mapping after __post_init__
    _: KW_ONLY
    positions: tuple[int, ...] = None  # type: ignore[assignment]
    typed: tuple[str, ...] = None  # type: ignore[assignment]
    decimal_sign: str = ""
    computed: bool = None  # type: ignore[assignment]

    def __post_init__(self) -> None:
        given = tuple(self.values)
        typed = tuple(as_typed(value) for value in given) if self.typed is None else tuple(self.typed)
        values = tuple(
            value
            if type(value) is Decimal and value.is_finite()
            else exact(value, f"Reading {place}", where="readings")
            for place, value in enumerate(given, 1)
        )
        if self.computed is None:
            computed = any(
                not isinstance(raw, (str, Decimal, int)) and looks_computed(value)
                for raw, value in zip(given, values, strict=True)
            )
            object.__setattr__(self, "computed", computed)
        censored = tuple(sorted(map(_as_censored, self.censored), key=lambda entry: entry.index))
        object.__setattr__(self, "values", values)
        object.__setattr__(self, "typed", typed)
        object.__setattr__(self, "censored", censored)
        object.__setattr__(self, "positions", self._places(censored, len(values)))
        object.__setattr__(self, "left_out", {int(k): str(v) for k, v in dict(self.left_out or {}).items()})
        if not self.decimal_sign:
            comma = any("," in text for text in typed)
            object.__setattr__(self, "decimal_sign", "," if comma else ".")
        if self.preparations is not None:
            self._label(tuple(map(str, self.preparations)))
        self._check()

    def _places(self, censored: Sequence[Censored], count: int) -> tuple[int, ...]:
        if self.positions is not None:
            return tuple(map(int, self.positions))
        taken = {entry.index for entry in censored}
        if not taken:
            return tuple(range(count))
        free = (place for place in range(count + max(taken) + 1) if place not in taken)
        return tuple(place for place, _ in zip(free, range(count), strict=False))

    def _label(self, labels: tuple[str, ...]) -> None:
        """Labels name the values, or all values and censored entries in reading order."""
        if len(labels) == len(self.values) + len(self.censored) and self.censored:
            order = sorted([*self.positions, *(entry.index for entry in self.censored)])
            by_place = dict(zip(order, labels, strict=True))
            labels = tuple(by_place[place] for place in self.positions)
            named = tuple(
                Censored(entry.index, entry.kind, entry.limit, by_place[entry.index], entry.typed)
                for entry in self.censored
            )
            object.__setattr__(self, "censored", named)
        object.__setattr__(self, "preparations", labels)

    def _check(self) -> None:
        count = len(self.values)
        if len(self.positions) != count or len(self.typed) != count:
            raise ReadingsComplaint(f"{count} readings need as many positions and texts.", "readings")
        if self.preparations is not None:
            if len(self.preparations) != count:
                raise ReadingsComplaint(
                    f"{len(self.preparations)} preparation labels for {count} readings: give each reading one label.",
                    "preparations",
                )
            if any(entry.preparation is None for entry in self.censored):
                raise ReadingsComplaint(
                    "Each below- or above-limit reading needs its preparation label too.", "preparations"
                )
        known = {*self.positions, *(entry.index for entry in self.censored)}
        if len(known) != count + len(self.censored):
            raise ReadingsComplaint("Two entries stand at the same position.", "readings")
        for index, cause in self.left_out.items():
            if index not in known:
                raise ReadingsComplaint(f"Entry {index + 1} is left out, but there is no such reading.", "left_out")
            if not cause.strip():
                raise ReadingsComplaint(f"Entry {index + 1} is left out without a cause: write the cause.", "left_out")

    @cached_property
    def decimals(self) -> int:
        """The most decimal places any reading was written with; negative where all were written in whole tens."""
        return finest_places(self.values)

    @cached_property
    def extremes(self) -> tuple[Decimal, ...]:
        """A number written with the most places, and the value of the greatest size; none without values."""
        if not self.values:
            return ()
        return Decimal((0, (0,), -self.decimals)), max(
            filter(None, self.values), key=Decimal.adjusted, default=Decimal()
        )

    @cached_property
    def whole(self) -> tuple[int, tuple[int, ...]]:
        """The finest power of ten among the values, and the values as whole numbers in units of it."""
        return -self.decimals, tuple(scaled_all(self.values, -self.decimals))

    def whole_at(self, exponent: int) -> list[int]:
        """Return the values as whole numbers in units of 10**exponent, which must not be coarser than any of them."""
        finest, whole = self.whole
        factor = 10 ** (finest - exponent)
        return [number * factor for number in whole] if factor > 1 else [*whole]

    def kept(self) -> "ReadingSet":
        """Return the readings without those left out; positions stay what they were."""
        if not self.left_out:
            return self
        stay = [i for i, place in enumerate(self.positions) if place not in self.left_out]
        return ReadingSet(
            tuple(self.values[i] for i in stay),
            self.unit,
            self.name,
            None if self.preparations is None else tuple(self.preparations[i] for i in stay),
            tuple(entry for entry in self.censored if entry.index not in self.left_out),
            positions=tuple(self.positions[i] for i in stay),
            typed=tuple(self.typed[i] for i in stay),
            decimal_sign=self.decimal_sign,
            computed=self.computed,
        )

    def to_dict(self) -> dict[str, Any]:
        """Return the readings as plain JSON values; numbers as numbers, and ``typed`` as the texts."""
        return plain(self)


def _as_censored(entry: Censored | Mapping[str, Any]) -> Censored:
    if isinstance(entry, Censored):
        return entry
    kind, limit = entry.get("kind"), entry.get("limit")
    if kind not in ("below", "above") or "index" not in entry:
        raise ReadingsComplaint('A censored entry needs "index", "kind" ("below" or "above") and "limit".', "readings")
    label = entry.get("preparation")
    return Censored(
        int(entry["index"]),
        kind,
        None if limit is None else exact(limit, "The limit of a censored entry", where="readings"),
        None if label is None else str(label),
        str(entry.get("typed", "")),
    )
