"""From the readings as typed to independent units on one whole-number scale, and their summary."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property, reduce
from itertools import pairwise
from math import gcd, inf, lcm, sqrt
from typing import Any

import numpy as np

from meanlab.checks.facts import OwnPlaces
from meanlab.core.complaints import ReadingsComplaint
from meanlab.core.numbers import common_exponent, quotient, scaled
from meanlab.core.question import Question
from meanlab.core.readings import Censored, ReadingSet
from meanlab.core.results import Preparation, Summary
from meanlab.procedures.sample import Sample, Spans, whole_array

FEWEST_FOR_STEP = 8


@dataclass(frozen=True)
class Units:
    """The independent units of a question.

    spans      every unit between its bounds, target included; plain units have equal bounds
    sample     the same as a Sample; None where any unit is censored
    limit      equivalence limit E on the same whole-number scale, None where not given
    places     for each unit the places of its readings among all entries read
    resolution step r of the units in their unit, None where unknown
    preparations  one line a preparation, empty where each reading is a unit
    """

    readings: ReadingSet
    spans: Spans
    sample: Sample | None
    limit: int | None
    places: Sequence[tuple[int, ...]]
    resolution: float | None
    preparations: tuple[Preparation, ...] = ()
    s_within: float | None = None

    @property
    def n(self) -> int:
        """How many independent units."""
        return self.spans.n

    @cached_property
    def censored(self) -> int:
        """How many units are known only to lie between bounds."""
        return 0 if self.spans.plain else int(np.sum(self.spans.lows != self.spans.highs))

    @property
    def one_preparation(self) -> bool:
        """Whether all readings come from a single labelled preparation."""
        return len(self.preparations) == 1


@dataclass(frozen=True)
class _Group:
    """One unit in the making: its label, whole numbers, censored entries, and the places of both."""

    label: str
    whole: list[int]
    censored: list[Censored]
    places: tuple[int, ...]


def units_of(readings: ReadingSet, question: Question) -> Units:
    """Return the independent units of the kept readings.

    Injections are averaged within each preparation first, exactly: units of scale / lcm of the counts, equal weights.
    Raises ReadingsComplaint where there is no reading at all or the numbers span too many digits.
    """
    kept = readings.kept()
    if not kept.values and not kept.censored:
        left = " All of them were left out." if readings.left_out else " Paste a column of readings."
        raise ReadingsComplaint(f"There is no reading to test.{left}", "readings")
    target, limit = question.exact_target, question.exact_number("equivalence_limit")
    settings = [target] if limit is None else [target, limit]
    bounds = [entry.limit for entry in kept.censored if entry.limit is not None]
    known = [*kept.extremes, *bounds, *settings]
    exponent = common_exponent(known, "Readings, target and limits", len(kept.values) + len(bounds) + len(settings))
    whole = kept.whole_at(exponent)
    groups = _groups(kept, whole)
    divisor = lcm(*(len(group.whole) + len(group.censored) for group in groups)) if groups else 1
    scaled_target = scaled(target, exponent) * divisor
    spans = _spans(kept, groups, whole, exponent, divisor, scaled_target)
    plain = not kept.censored
    lines = tuple(_line(group, exponent) for group in groups)
    fewest = min((line.count for line in lines), default=1)
    step = _step(kept, question, whole, exponent)
    return Units(
        readings=kept,
        spans=spans,
        sample=Sample(spans.lows, scaled_target, exponent, divisor) if plain else None,
        limit=None if limit is None else scaled(limit, exponent) * divisor,
        places=tuple(group.places for group in groups) or OwnPlaces(_entry_places(kept)),
        resolution=None if step is None else step / fewest,
        preparations=lines,
        s_within=_pooled(lines) if plain else None,
    )


def _entry_places(kept: ReadingSet) -> Sequence[int]:
    return sorted([*kept.positions, *(entry.index for entry in kept.censored)]) if kept.censored else kept.positions


def _groups(kept: ReadingSet, whole: list[int]) -> list[_Group]:
    """Return the preparations in the order of their first reading; none where the readings are not labelled."""
    if kept.preparations is None:
        return []
    members: dict[str, tuple[list[int], list[Censored], list[int]]] = {}
    entries: list[tuple[int, str, Any]] = [
        *zip(kept.positions, kept.preparations, whole, strict=True),
        *((entry.index, entry.preparation or "", entry) for entry in kept.censored),
    ]
    for place, label, content in sorted(entries, key=lambda entry: entry[0]):
        numbers, censored, places = members.setdefault(label, ([], [], []))
        (censored if isinstance(content, Censored) else numbers).append(content)
        places.append(place)
    return [_Group(label, numbers, cens, tuple(places)) for label, (numbers, cens, places) in members.items()]


def _spans(kept: ReadingSet, groups: list[_Group], whole: list[int], exponent: int, divisor: int, target: int) -> Spans:
    if not kept.censored:
        if groups:
            whole = [sum(group.whole) * (divisor // len(group.whole)) for group in groups]
        array = whole_array(whole, target)
        return Spans(array, array, target, exponent, divisor)
    parts = groups or [_Group("", content[0], content[1], ()) for content in _single_entries(kept, whole)]
    ends = [_mean_bounds(group, exponent, divisor) for group in parts]
    lows, highs = (np.array(side, dtype=object) for side in zip(*ends, strict=True))
    return Spans(lows, highs, target, exponent, divisor)


def _single_entries(kept: ReadingSet, whole: list[int]) -> list[tuple[list[int], list[Censored]]]:
    entries: list[tuple[int, tuple[list[int], list[Censored]]]] = [
        *((place, ([number], [])) for place, number in zip(kept.positions, whole, strict=True)),
        *((entry.index, ([], [entry])) for entry in kept.censored),
    ]
    return [content for _, content in sorted(entries, key=lambda entry: entry[0])]


def _mean_bounds(group: _Group, exponent: int, divisor: int) -> tuple[Any, Any]:
    """Return the bounds of a unit's mean: whole numbers, or ±infinity where a censored entry leaves an end open."""
    share = divisor // (len(group.whole) + len(group.censored))
    limits = [entry.limit for entry in group.censored if entry.limit is not None]
    end = (sum(group.whole) + sum(scaled(limit, exponent) for limit in limits)) * share
    kinds = {entry.kind if entry.limit is not None else "open" for entry in group.censored}
    low = end if kinds <= {"above"} else -inf
    high = end if kinds <= {"below"} else inf
    return low, high


def _line(group: _Group, exponent: int) -> Preparation:
    count = len(group.whole) + len(group.censored)
    if group.censored:
        return Preparation(group.label, count, None, None)
    part = Sample(whole_array(group.whole), 0, exponent)
    return Preparation(group.label, count, part.mean, part.s if count > 1 else None)


def _pooled(lines: Sequence[Preparation]) -> float | None:
    """Return the pooled standard deviation within preparations, √(Σ(m − 1)s²/Σ(m − 1))."""
    spread = [(line.count - 1, line.s) for line in lines if line.s is not None]
    degrees = sum(count for count, _ in spread)
    if not degrees:
        return None
    largest = max(s for _, s in spread)
    if largest == 0:
        return 0.0
    return largest * sqrt(sum(count * (s / largest) ** 2 for count, s in spread) / degrees)


def _step(kept: ReadingSet, question: Question, whole: list[int], exponent: int) -> float | None:
    """Return the step of the readings: declared, else 10^(−most decimals), or from 8 readings their coarser grid."""
    declared = question.number("resolution")
    if declared is not None:
        return declared
    if kept.computed or not kept.values:
        return None
    typed = 10 ** max(0, -kept.decimals - exponent)
    if len(whole) >= FEWEST_FOR_STEP:
        typed = max(typed, _grid(whole_array(whole)))
    return quotient(typed, 1, exponent)


def _grid(whole: np.ndarray) -> int:
    """Return the greatest common divisor of the differences; 0 where there are none."""
    if whole.dtype == object:
        return reduce(gcd, (b - a for a, b in pairwise(whole)))
    return int(np.gcd.reduce(np.diff(whole)))


def summary_of(units: Units, readings: ReadingSet) -> Summary:
    """Return the readings in figures; what a censored unit makes unknown is None."""
    sample, spans = units.sample, units.spans
    lows, highs = spans.rising
    n = units.n

    def known(place: int, other: int) -> float | None:
        if lows[place] != highs[place] or lows[other] != highs[other]:
            return None
        return spans.value(lows[place], lows[other])

    counts = [entry.kind for entry in units.readings.censored]
    scatters = sample is not None and sample.s > 0
    return Summary(
        n=n,
        n_readings=len(units.readings.values) + len(units.readings.censored),
        mean=sample.mean if sample else None,
        s=sample.s if sample and n > 1 else None,
        median=known((n - 1) // 2, n // 2),
        minimum=known(0, 0),
        maximum=known(n - 1, n - 1),
        decimals=None if readings.computed else readings.decimals,
        left_out=len(readings.left_out),
        below=counts.count("below"),
        above=counts.count("above"),
        resolution=units.resolution,
        skewness=sample.skewness if sample and scatters and n >= 3 else None,
        preparations=units.preparations,
        s_within=units.s_within,
        s_between=sample.s if sample and n > 1 and units.preparations else None,
    )
