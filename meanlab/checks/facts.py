"""What the checks are told beside the readings themselves."""

from dataclasses import dataclass

from meanlab.core.question import Question
from meanlab.core.results import Check, Outcome
from meanlab.wording.numbers import decimal_text, p_text

PRETEST = 0.05


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
    places: tuple[tuple[int, ...], ...]
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

    def text(self, value: float, places: int = 2) -> str:
        """Return a figure with the decimal sign of the readings."""
        return decimal_text(value, places, self.decimal_sign)

    def p(self, value: float) -> str:
        """Return a p-value as text."""
        return p_text(value, PRETEST, self.decimal_sign)

    def nested(self) -> bool:
        """Whether a unit is a preparation of several readings."""
        return any(len(places) > 1 for places in self.places)


def coarse_limit(n: int) -> float:
    """Return the r/s above which rounding makes a test of normality meaningless (row 8 of the rule)."""
    return 0.3 if n <= 30 else 0.2 if n <= 60 else 0.1


__all__ = ["PRETEST", "Check", "Facts", "Outcome", "coarse_limit"]
