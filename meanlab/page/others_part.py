"""Same readings, other procedures: in a fixed order, none of them preferred."""

from meanlab.core.question import PROCEDURES
from meanlab.core.results import Analysis, NotApplicable, Test
from meanlab.page import tables
from meanlab.page.cache import Outcome
from meanlab.wording.names import PROCEDURE_NAMES, unit_of
from meanlab.wording.numbers import (
    decimal_text,
    interval_text,
    level_text,
    p_text,
    significant,
    statistic_text,
    unit_text,
)
from meanlab.wording.phrases import further_in_force

DECISIONS = {
    "two-sided": ("differs", "not shown to differ"),
    "greater": ("exceeds", "not shown to exceed"),
    "less": ("falls below", "not shown to fall below"),
}
DIGITS_OF_FIT = 4
HEADINGS = ("Procedure", "Speaks of the", "Estimate", "Interval", "Statistic", "p", "At the level asked")


def draw(found: Outcome | None) -> None:
    """Draw the table of the other procedures and the line on what they would change."""
    if found is None:
        tables.sentences(["There is no result yet to hold beside other procedures."])
        return
    analysis = found.analysis
    others = {other.procedure: other for other in analysis.others}
    rows = [_row(analysis, found.texts.numbers.places, others[name]) for name in PROCEDURES if name in others]
    tables.sentences([_in_force(analysis)])
    tables.draw(HEADINGS, rows)
    tables.sentences([*_remarks(analysis), censored_line(analysis), change_line(analysis)])


def change_line(analysis: Analysis) -> str:
    """Return which other procedures would decide otherwise at the level asked."""
    if analysis.test is None:
        return ""
    ran = [other for other in analysis.others if isinstance(other, Test)]
    if not ran:
        return "No other procedure can be run on these readings."
    otherwise = [PROCEDURE_NAMES[other.procedure] for other in ran if other.reject != analysis.test.reject]
    if not otherwise:
        return "Every other procedure that can be run decides alike at this level."
    return (
        f"Decides otherwise at this level: {', '.join(otherwise)}. {scatter_only_line(analysis)}"
        "The procedure was chosen by its rule before any "
        "p-value was looked at; choosing the one that suits afterwards makes more false alarms than the level says."
    )


def scatter_only_line(analysis: Analysis) -> str:
    """Return which uncertainties the other procedures leave out that the one in force takes in; "" where none."""
    further = further_in_force(analysis)
    if not further:
        return ""
    return (
        f"Guarded t, signed rank and sign look at scatter only and leave out {' and '.join(further)}, "
        "so they decide too easily here. "
    )


def censored_line(analysis: Analysis) -> str:
    """Return what the normal model fitted to all readings gives, those below or above a limit included; "" without."""
    fit, sign = analysis.censored_fit, analysis.readings.decimal_sign
    if fit is None:
        return ""
    mean, s = (unit_text(significant(value, DIGITS_OF_FIT, sign), unit_of(analysis)) for value in (fit.mean, fit.s))
    ends = " to ".join(
        unit_text(significant(end, DIGITS_OF_FIT, sign), unit_of(analysis))
        for end in (fit.interval.low, fit.interval.high)
        if end is not None
    )
    return (
        f"Normal model fitted to all {fit.n} readings, {fit.censored} of them below or above a limit (maximum "
        f"likelihood): mean {mean}, s {s}, {level_text(fit.interval.level, sign)} interval {ends} "
        f"(profile likelihood), {p_text(fit.p_value, analysis.question.alpha, sign)} "
        "against the target. It holds only if the readings are "
        "normal, which readings below a limit cannot show; it decides nothing here."
    )


def _in_force(analysis: Analysis) -> str:
    if analysis.test is None:
        return "No procedure is in force; these are the ones that were tried on the same readings."
    name = PROCEDURE_NAMES[analysis.test.procedure]
    return f"In force, and in the panel: {name}. The same question asked of the same readings by the others:"


def _row(analysis: Analysis, places: int, other: Test | NotApplicable) -> tuple[str, ...]:
    name = PROCEDURE_NAMES[other.procedure]
    if isinstance(other, NotApplicable):
        return (name, "", "", "", "", "", f"does not apply: {other.not_applicable}")
    sign = analysis.readings.decimal_sign
    estimate = "–" if other.estimate is None else decimal_text(other.estimate, places, sign)
    bounds = interval_text(other.interval, places, sign, target=analysis.question.exact_target)
    p = p_text(other.p_value, other.significance, sign) + (" (approximate)" if other.approximate else "")
    decision = DECISIONS[other.alternative][0 if other.reject else 1]
    return (name, other.parameter, estimate, bounds, statistic_text(other, sign), p, decision)


def _remarks(analysis: Analysis) -> list[str]:
    return [
        f"{PROCEDURE_NAMES[other.procedure]}: {note}"
        for other in analysis.others
        if isinstance(other, Test)
        for note in other.notes
    ]
