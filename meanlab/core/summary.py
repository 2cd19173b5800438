"""The readings in figures."""

from dataclasses import dataclass

from meanlab.core.plain import Facts


@dataclass(frozen=True)
class Preparation(Facts):
    """One preparation: label, count of readings, their mean and s (None for one reading or any censored one)."""

    label: str
    count: int
    mean: float | None
    s: float | None


@dataclass(frozen=True)
class Summary(Facts):
    """The readings in figures, all in the unit of the readings.

    n            independent units (preparations where labelled, else readings), censored ones included
    n_readings   readings they rest on
    mean, s      of the units; None with any censored unit; s None for n = 1
    median, minimum, maximum  of the units; None where they fall on a censored one
    decimals     most decimal places a reading was written with; None for computed spreadsheet numbers
    left_out, below, above    how many readings were left out, lie below or above a limit
    resolution   step r of the units, None where unknown
    skewness     g₁ = m₃/m₂^1.5 with divisor n; None for s = 0 or n < 3
    preparations one line a preparation, empty where each reading is a unit
    s_within, s_between  pooled within preparations; of the preparation means; None where not defined
    """

    n: int
    n_readings: int
    mean: float | None
    s: float | None
    median: float | None
    minimum: float | None
    maximum: float | None
    decimals: int | None
    left_out: int
    below: int
    above: int
    resolution: float | None = None
    skewness: float | None = None
    preparations: tuple[Preparation, ...] = ()
    s_within: float | None = None
    s_between: float | None = None
