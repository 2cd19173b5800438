"""Units: what one reading is a replicate of, and whether target and readings have the same unit of measurement."""

import re

from meanlab.checks.facts import Facts
from meanlab.core.results import Check
from meanlab.wording.numbers import plain_words

_LITRE = re.compile(r"(?<![A-Za-zµ])([mµndckh]?)l(?![A-Za-z])")
_OF_ONE = re.compile(r"\b(of|on|from) (one|the same) (preparation|portion)\b")
_SAME = str.maketrans({"μ": "µ", "⋅": "·", "∙": "·", "−": "-", "–": "-"})


def units_check(facts: Facts) -> Check:
    """Return what is known about the units; "stop" where target and readings are in different units."""
    of_readings, of_target = plain_words(facts.unit), plain_words(facts.question.unit)
    if of_readings and of_target and not same_unit(of_readings, of_target):
        said = (
            f'The readings are in "{of_readings}" and the target in "{of_target}": bring both to one unit before '
            "anything is compared."
        )
        return Check("units", "stop", None, None, said)
    described = plain_words(facts.question.units_are)
    unequal = facts.nested and len({len(places) for places in facts.places}) > 1
    if not described:
        said = (
            f"It is not said what one {facts.noun} is a replicate of (the same solution, new preparations, other "
            "days): s holds only what varied between them, and nine injections of three preparations taken as nine "
            f"readings raise {facts.percent(0.329)} false alarms."
        )
        return Check("units", "note", None, None, said)
    if _OF_ONE.search(described) and not facts.nested:
        said = (
            f"Stated of the {facts.noun}s: {described}; repeats of one preparation are no independent units, so the "
            "statement speaks of this one preparation and not of the material."
        )
        return Check("units", "caution", None, None, said)
    said = f"Stated of the {facts.noun}s: {described}."
    if "conditions" not in described:
        said = (
            f"Stated of the {facts.noun}s: {described}; whether s is a repeatability or an intermediate precision "
            "depends on what was changed between them."
        )
    if unequal:
        said = (
            said.removesuffix(".")
            + "; preparations with more readings weigh no more than the others, which is cautious."
        )
    return Check("units", "note" if unequal else "clear", None, None, said)


def same_unit(one: str, other: str) -> bool:
    """Return whether two texts write the same unit, whatever its spelling.

    >>> same_unit("mg / l", "mg/L"), same_unit("mg/L", "µg/L")
    (True, False)
    """
    return _spelling(plain_words(one)) == _spelling(plain_words(other))


def _spelling(unit: str) -> str:
    """Return a unit in one spelling: no blanks, one micro sign, litre as L.

    >>> _spelling("μg / l") == _spelling("µg/L"), _spelling("mol") == _spelling("moL")
    (True, False)
    """
    return _LITRE.sub(r"\1L", "".join(unit.split()).translate(_SAME))
