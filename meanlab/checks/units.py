"""Units: what one reading is a replicate of, and whether target and readings have the same unit of measurement."""

import re

from meanlab.checks.facts import Facts
from meanlab.core.results import Check
from meanlab.intake.units import same_unit
from meanlab.wording.numbers import plain_words

_OF_ONE = re.compile(r"\b(of|on|from) (one|the same) (preparation|portion)\b")


def units_check(facts: Facts) -> Check:
    """Return what is known about the units; "stop" where target and readings are in different units."""
    two = units_that_differ(facts.unit, facts.question.unit)
    if two is not None:
        said = (
            f'The readings are in "{two[0]}" and the target in "{two[1]}": bring both to one unit before anything is '
            "compared."
        )
        return Check("units", "stop", None, None, said)
    described = plain_words(facts.question.units_are)
    unequal = facts.nested and len({len(places) for places in facts.places}) > 1
    if not described:
        said = (
            f"It is not said what one {facts.noun} is a replicate of (the same solution, new preparations, other "
            "days): s holds only what varied between them, and nine injections of three preparations taken as nine "
            f"readings raise the false alarms to {facts.percent(0.329)}."
        )
        return Check("units", "note", None, None, said)
    if _OF_ONE.search(described) and not facts.nested:
        said = (
            f"Stated of the readings: {described}; repeats of one preparation are no independent units, so the "
            "statement speaks of this one preparation and not of the material."
        )
        return Check("units", "caution", None, None, said)
    said = f"Stated of the readings: {described}."
    if "conditions" not in described:
        said = (
            f"Stated of the readings: {described}; whether s is a repeatability or an intermediate precision "
            "depends on what was changed between them."
        )
    if unequal:
        said = (
            said.removesuffix(".")
            + "; preparations with more readings weigh no more than the others, which is cautious."
        )
    return Check("units", "note" if unequal else "clear", None, None, said)


def units_that_differ(of_readings: str, of_target: str) -> tuple[str, str] | None:
    """Return the two units where readings and target are not in the same one, None where they are or one is not said.

    >>> units_that_differ("mg / l", "mg/L"), units_that_differ("mg/L", "µg/L")
    (None, ('mg/L', 'µg/L'))
    """
    one, other = plain_words(of_readings), plain_words(of_target)
    return (one, other) if one and other and not same_unit(one, other) else None
