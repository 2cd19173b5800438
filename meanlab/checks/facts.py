"""What the checks are told beside the readings themselves."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

from meanlab.core.numbers import as_typed
from meanlab.core.question import Question
from meanlab.wording.names import counted
from meanlab.wording.numbers import decimal_text, level_text, number_text, p_text, significant, unit_text

CHECK_LEVEL = 0.05


@dataclass(frozen=True)
class OwnPlaces(Sequence[tuple[int, ...]]):
    """The places of units that are one reading each, made when asked for: a million of them would take a while."""

    positions: Sequence[int]

    def __len__(self) -> int:
        return len(self.positions)

    def __getitem__(self, unit: Any) -> Any:
        return (self.positions[unit],)


@dataclass(frozen=True)
class Facts:
    """The facts of one analysis that checks look at.

    n           independent units
    s           their standard deviation in their unit; None for one unit or any censored one
    resolution  step r of the units in their unit, None where unknown
    places      for each unit the places of its readings among all entries read
    unit        unit of the readings, as their heading gave it
    smallest_p  smallest p-value the procedure in force could attain; None where nothing can be tested
    """

    question: Question
    n: int
    s: float | None
    resolution: float | None
    places: Sequence[tuple[int, ...]]
    decimal_sign: str
    unit: str
    smallest_p: float | None

    @property
    def scatters(self) -> bool:
        """Whether there is a standard deviation above 0."""
        return self.s is not None and self.s > 0

    @property
    def step_in_s(self) -> float | None:
        """r/s, None where the step is unknown or the units do not scatter."""
        return self.resolution / self.s if self.resolution is not None and self.s else None

    @cached_property
    def nested(self) -> bool:
        """Whether any unit is a preparation of several readings."""
        return not isinstance(self.places, OwnPlaces) and any(len(places) > 1 for places in self.places)

    @property
    def noun(self) -> str:
        """What a unit is called."""
        return "preparation" if self.nested else "reading"

    def text(self, value: float, places: int = 2) -> str:
        """Return a figure with the decimal sign of the readings."""
        return decimal_text(value, places, self.decimal_sign)

    def p(self, value: float, level: float = CHECK_LEVEL) -> str:
        """Return a p-value as text."""
        return p_text(value, level, self.decimal_sign)

    def percent(self, share: float) -> str:
        """Return a share in %."""
        return level_text(share, self.decimal_sign)

    @property
    def readings(self) -> str:
        """How many units, in words: "8 readings", "3 preparations"."""
        return counted(self.n, self.noun)

    def with_unit(self, value: float, digits: int = 3) -> str:
        """Return a value with so many significant digits and the unit of the readings."""
        return unit_text(significant(value, digits, self.decimal_sign), self.question.unit or self.unit)

    def typed(self, setting: object) -> str:
        """Return a setting as typed, with the decimal sign and the unit of the readings."""
        text = as_typed(setting).strip().replace(",", ".").replace(".", self.decimal_sign)
        return unit_text(text, self.question.unit or self.unit)

    def step_text(self, step: float) -> str:
        """Return the step of the units: of single readings as it is, of preparation means with two digits."""
        text = significant(step, 2, self.decimal_sign) if self.nested else number_text(step, self.decimal_sign)
        return unit_text(text, self.question.unit or self.unit)


def at_most(n: int, figures: Mapping[int, float]) -> tuple[int, float] | None:
    """Return the entry of a table by n whose n is the largest not above ``n``; None below the first.

    >>> at_most(9, {5: 0.15, 8: 0.31, 12: 0.48})
    (8, 0.31)
    """
    known = [row for row in figures if row <= n]
    return (max(known), figures[max(known)]) if known else None


def coarse_limit(n: int) -> float:
    """Return the r/s above which rounding makes a test of normality meaningless, as in row 8 of the rule."""
    return 0.3 if n <= 30 else 0.2 if n <= 60 else 0.1
