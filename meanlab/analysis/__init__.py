"""One question on one set of readings: the one door, analyse(readings, question) → Analysis."""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Any

from meanlab.analysis.agreement import equivalence_of, verdict_of
from meanlab.analysis.procedure import other_procedures, run, scatter_of
from meanlab.analysis.provenance import provenance_of
from meanlab.analysis.uncertainty import uncertainty_of
from meanlab.analysis.units import Units, summary_of, units_of
from meanlab.checks import Facts, all_checks
from meanlab.checks.censored_fit import censored_fit_of
from meanlab.checks.units import units_that_differ
from meanlab.core.complaints import IntakeComplaint
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import (
    Analysis,
    Check,
    Difference,
    Equivalence,
    Route,
    Test,
    Verdict,
    Without,
)
from meanlab.intake import Intake
from meanlab.planning import analysis_power
from meanlab.route import Look, route_of
from meanlab.wording import cautions, conclusion, with_without_sentence

__all__ = ["Decided", "analyse", "decide"]


def analyse(readings: Intake | ReadingSet | Iterable[Any], question: Question) -> Analysis:
    """Return everything found about one question on one set of readings.

    ``readings`` is an Intake, a ReadingSet, or a sequence of numbers or number texts in reading order.
    Raises Complaint where there is no reading, or readings and question contradict each other; readings that cannot be
    tested (one without σ, identical ones, one preparation) give an Analysis whose verdict is "not testable".

    >>> found = analyse(["5.02", "5.04", "4.98", "5.01", "5.03"], Question("5.00"))
    >>> found.route.procedure, round(found.test.statistic, 3), found.verdict
    ('t', 1.554, 'cannot tell')
    """
    given = as_reading_set(readings)
    decided = decide(given, question)
    units, test = decided.units, decided.test
    sample = units.sample
    checks = _checks(decided, question)
    draft = Analysis(
        readings=given,
        question=question,
        route=decided.route,
        summary=summary_of(units, given),
        test=test,
        difference=_difference(decided, question),
        others=other_procedures(decided.route.procedure, units.spans, sample, question, decided.look),
        checks=checks,
        equivalence=decided.equivalence,
        power=analysis_power(units.n, scatter_of(sample, question), question, decided.route.procedure),
        verdict=decided.verdict,
        conclusion="",
        cautions=(),
        provenance=provenance_of(given, question),
        uncertainty=uncertainty_of(sample, question, test),
        censored_fit=censored_fit_of(units.readings, question) if units.censored and not units.preparations else None,
        withouts=_withouts(given, question, decided, checks),
    )
    draft = replace(draft, cautions=cautions(draft))
    return replace(draft, conclusion=conclusion(draft))


def as_reading_set(readings: Intake | ReadingSet | Iterable[Any]) -> ReadingSet:
    """Return readings of any welcome form as a ReadingSet."""
    if isinstance(readings, ReadingSet):
        return readings
    if isinstance(readings, Intake):
        if readings.refused:
            raise IntakeComplaint(readings.reason, "readings")
        if readings.needs_choice:
            raise IntakeComplaint("Several columns could be meant: choose one.", "readings")
        return readings.reading_set()
    if isinstance(readings, str):
        readings = [readings]
    return ReadingSet(tuple(readings))


@dataclass(frozen=True)
class Decided:
    """The heart of an analysis: units, route, test, agreement, verdict."""

    units: Units
    look: Look
    route: Route
    test: Test | None
    equivalence: Equivalence | None
    verdict: Verdict


def decide(readings: ReadingSet, question: Question) -> Decided:
    """Return units, route, test, agreement and verdict: what a table of many samples needs of each."""
    units = units_of(readings, question)
    look = Look(
        question=question,
        sample=units.sample,
        n=units.n,
        censored=units.censored,
        resolution=units.resolution,
        one_preparation=units.one_preparation,
        decimal_sign=readings.decimal_sign,
        noun="preparations" if units.preparations else "readings",
        in_two_units=units_that_differ(readings.unit, question.unit),
    )
    route = route_of(look)
    test = None
    if route.procedure is not None:
        test = run(route.procedure, units.spans, units.sample, question, chosen=True)
        if test.p_range is not None and not test.reject and test.p_range[0] < question.alpha:
            route, test = _left_open(route, test), None
    equivalence = equivalence_of(units, question, test)
    return Decided(units, look, route, test, equivalence, verdict_of(question, test, equivalence))


def _left_open(route: Route, test: Test) -> Route:
    """Return the route of readings below a limit that leave the decision open."""
    smallest, largest = test.p_range or (test.p_value, test.p_value)
    reason = (
        "readings below or above a limit leave the decision open: depending on which side of the target they lie, "
        f"p is anything from {smallest:.2g} to {largest:.2g}"
    )
    return replace(route, procedure=None, reasons=(reason, *route.reasons))


def _difference(decided: Decided, question: Question) -> Difference | None:
    """Return estimate − target; without a test the difference of the mean is shown, without an interval."""
    test, sample = decided.test, decided.units.sample
    if decided.look.in_two_units is not None:
        return None
    value, low, high = (sample.difference if sample else None, None, None) if test is None else test.offsets
    target = abs(float(question.exact_target))
    if value is None:
        return None
    return Difference(value, low, high, 100 * value / target if target else None)


def _checks(decided: Decided, question: Question) -> tuple[Check, ...]:
    units = decided.units
    sample = units.sample
    facts = Facts(
        question=question,
        n=units.n,
        s=sample.s if sample is not None and units.n > 1 else None,
        resolution=units.resolution,
        places=units.places,
        decimal_sign=units.readings.decimal_sign,
        unit=units.readings.unit,
        smallest_p=None if decided.test is None else decided.test.smallest_p,
    )
    return all_checks(None if sample is None else sample.shifted, facts)


def _withouts(
    given: ReadingSet, question: Question, decided: Decided, checks: tuple[Check, ...]
) -> tuple[Without, ...]:
    """Return the same question without the far readings, and with the readings that were left out."""
    found = []
    far = next((check for check in checks if check.name == "far readings" and check.entries), None)
    if far is not None:
        causes = {**given.left_out, **dict.fromkeys(far.entries, "far reading")}
        found.append(_other_readings("without", far.entries, given, causes, question))
    if given.left_out:
        found.append(_other_readings("with", tuple(given.left_out), given, {}, question))
    return tuple(one for one in found if one is not None)


def _other_readings(
    label: str, entries: tuple[int, ...], given: ReadingSet, left_out: dict[int, str], question: Question
) -> Without | None:
    kept = replace(given, left_out=left_out)
    if len(left_out) >= len(given.values) + len(given.censored):
        return None
    other = decide(kept, question)
    draft = Without(label, entries, other.test, other.verdict, "")
    return replace(draft, sentence=with_without_sentence(draft, question, given.decimal_sign))
