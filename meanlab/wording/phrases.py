"""The parts of a sentence: what was measured, the value with its interval, the figures, what could be missed."""

from math import isfinite

from meanlab.core.results import Analysis
from meanlab.wording.names import AFTERTHOUGHT_NAMES, PROCEDURE_NAMES, counted, subject_of
from meanlab.wording.numbers import level_text, p_text, plain_words, significant, unit_text
from meanlab.wording.shown import DIGITS_OF_S, INCLUDES_FURTHER, Shown

LONGEST_CAUSES = 90
WITH_UNCERTAINTY = ("certified value", "historical level")


def opening_phrase(analysis: Analysis, numbers: Shown) -> str:
    """Return "The mean of 12 readings of Nitrate in NC-7, 5.022 mg/L (95 % interval …)"."""
    counted_units = f"{units_phrase(analysis)}{of_subject(analysis)}"
    return f"The {parameter_of(analysis)} of {counted_units}{value_and_interval(analysis, numbers)}"


def sides_phrase(analysis: Analysis, numbers: Shown) -> str:
    """Return "9 of 10 lie above it" for the sign procedure, "" for another."""
    if analysis.test is None or analysis.test.procedure != "sign":
        return ""
    verb = "lies" if analysis.test.statistic == 1 else "lie"
    return f"{numbers.statistic.removesuffix(' above')} {verb} above it"


def parameter_of(analysis: Analysis) -> str:
    """Return what the statement speaks of: mean, centre of symmetry or median."""
    return analysis.test.parameter if analysis.test is not None else analysis.route.parameter


def units_phrase(analysis: Analysis) -> str:
    """Return n and what a unit is: "12 readings (weighings on one day; 1 left out: air bubble)".

    Independence is the technician's to know: where nothing was said about the units, the sentence says what it takes
    for granted.
    """
    summary, nested = analysis.summary, analysis.readings.preparations is not None
    remarks = [counted(summary.n_readings, "reading")] if nested else []
    described = plain_words(analysis.question.units_are)
    remarks += [described or "taken as independent"] if summary.n > 1 or described else []
    remarks += [left_out_phrase(analysis)] if summary.left_out else []
    text = counted(summary.n, "preparation" if nested else "reading")
    return f"{text} ({'; '.join(remarks)})" if remarks else text


def left_out_phrase(analysis: Analysis) -> str:
    """Return how many readings were left out and why: "1 left out: air bubble"."""
    causes = "; ".join(dict.fromkeys(map(plain_words, analysis.readings.left_out.values())))
    causes = causes if len(causes) <= LONGEST_CAUSES else f"{causes[: LONGEST_CAUSES - 1].rstrip()}…"
    return f"{analysis.summary.left_out} left out: {causes}"


def of_subject(analysis: Analysis) -> str:
    """Return " of Nitrate in NC-7", "" where nothing was named."""
    subject = subject_of(analysis)
    return f" of {subject}" if subject else ""


def value_and_interval(analysis: Analysis, numbers: Shown) -> str:
    """Return the estimate with its interval, or with its one bound for a one-sided question, as an apposition."""
    attained = f", attained {numbers.attained}" if numbers.attained else ""
    side = {"greater": "lower bound", "less": "upper bound"}.get(analysis.question.alternative, "interval")
    ends = numbers.interval if side == "interval" else without_side(numbers.interval)
    interval = f"{numbers.interval_level} {side} {ends or 'none'}{attained}"
    if numbers.estimate:
        return f", {numbers.estimate} ({interval})"
    return f", which lies among the readings below or above a limit ({interval})"


def difference_phrase(numbers: Shown, bare: bool = False) -> str:
    """Return "+0.022 mg/L (+0.43 %)"; ``bare``, for a place beside other brackets, "+0.022 mg/L, +0.43 %"."""
    if not numbers.difference:
        return "not defined"
    relative = numbers.percent
    if relative and numbers.unit == "%":
        relative = f"{relative} of the target"
    if not relative:
        return numbers.difference
    return f"{numbers.difference}, {relative}" if bare else f"{numbers.difference} ({relative})"


def scatter_phrase(analysis: Analysis, numbers: Shown) -> str:
    """Return "12 readings with a standard deviation of 0.0183 mg/L"."""
    s = significant(analysis.power.planning_s or 0.0, DIGITS_OF_S, numbers.sign)
    return f"{units_phrase(analysis)} with a standard deviation of {unit_text(s, numbers.unit)}"


def figures_phrase(analysis: Analysis, numbers: Shown) -> str:
    """Return "t(11) = 4.08, p = 0.0018, level 5 %; scatter of these readings only"."""
    test = analysis.test
    assert test is not None
    named = {
        "z": f"known σ {numbers.sigma}, {numbers.statistic}",
        "guarded_t": f"guarded {numbers.statistic}",
        "signed_rank": f"signed rank {numbers.statistic}",
        "sign": "sign",
    }
    approximate = " approximately" if test.approximate else ""
    first = named.get(test.procedure, numbers.statistic)
    return f"{first}, {numbers.p}{approximate}, level {numbers.level}; {scatter_clause(analysis)}"


def scatter_clause(analysis: Analysis) -> str:
    """Return which uncertainties the statement rests on, and what of the target is left out.

    "scatter of these readings only, target treated as exact"; "scatter of these readings and uncertainty of the
    target".
    """
    question, test = analysis.question, analysis.test
    start = "scatter by the known σ" if test is not None and test.procedure == "z" else "scatter of these readings"
    further = further_in_force(analysis)
    included = f"{start} and {' and '.join(further)}" if further else f"{start} only"
    if question.number("target_uncertainty"):
        return included if "uncertainty of the target" in further else f"{included}, target uncertainty not included"
    return f"{included}, target treated as exact" if question.target_kind in WITH_UNCERTAINTY else included


def further_in_force(analysis: Analysis) -> tuple[str, ...]:
    """Return the uncertainties beside scatter that the procedure in force takes in."""
    question, test = analysis.question, analysis.test
    if test is None or test.procedure not in INCLUDES_FURTHER:
        return ()
    named = {
        "measurement_uncertainty": "the laboratory's own uncertainty",
        "target_uncertainty": "uncertainty of the target",
    }
    return tuple(name for field, name in named.items() if question.number(field))


def excess_noun(analysis: Analysis) -> str:
    """Return the word for a true difference to the side that is asked."""
    return {"greater": "excess", "less": "shortfall"}.get(analysis.question.alternative, "difference")


def about_word(analysis: Analysis) -> str:
    """Return "about " where the power is not exact."""
    return "" if analysis.power.kind == "exact" else "about "


def missed_phrase(analysis: Analysis, numbers: Shown) -> str:
    """Return the true difference that could have been missed, and how likely."""
    if numbers.detectable:
        least = " or more" if analysis.power.kind == "upper bound" else ""
        return (
            f"a true {excess_noun(analysis)} of {about_word(analysis)}{numbers.detectable} would have been missed "
            f"with a probability of {level_text(0.2, numbers.sign)}{least}"
        )
    if analysis.power.planning_s is None:
        return f"which true {excess_noun(analysis)} could have been missed is not known"
    return f"even a very large true {excess_noun(analysis)} would have been missed with a probability above 20 %"


def bound_phrase(analysis: Analysis, numbers: Shown, verb: bool = False) -> str:
    """Return the interval held against the limits, named by its use; ``verb`` for a sentence of its own."""
    joint = " is " if verb else ", "
    side = {"greater": "upper bound", "less": "lower bound"}.get(analysis.question.alternative)
    if side is None:
        return f"its {numbers.agreement_level} interval for agreement{joint}{numbers.agreement}"
    if not without_side(numbers.agreement):
        return f"it has no {numbers.agreement_level} {side}"
    return f"its {numbers.agreement_level} {side}{joint}{without_side(numbers.agreement)}"


def without_side(bounds: str) -> str:
    """Return the number of a one-sided interval; "" where it has no bound.

    >>> without_side("at least 5.01 mg/L"), without_side("no bounds")
    ('5.01 mg/L', '')
    """
    return bounds.removeprefix("at most ").removeprefix("at least ").removeprefix("no bounds")


def leaves_target_uncertainty_out(analysis: Analysis) -> bool:
    """Tell whether the target is uncertain and the procedure cannot take that in."""
    uncertain = bool(analysis.question.number("target_uncertainty"))
    return uncertain and analysis.test is not None and analysis.test.procedure not in INCLUDES_FURTHER


def cause_of_no_decision(analysis: Analysis, sign: str, alpha: float) -> str:
    """Return why a procedure that could be run still decides nothing; "" where it decides."""
    test = analysis.test
    if test is None:
        return ""
    if not test.decided and not test.reject and test.p_range is not None:
        undecided = "what the readings below or above a limit really are decides the outcome"
        return undecided + p_range_phrase(analysis, sign)
    if not test.decided and test.p_ties_against is not None:
        against = p_text(test.p_ties_against, alpha, sign)
        return f"the outcome rests on leaving out readings equal to the target ({against} with them)"
    if leaves_target_uncertainty_out(analysis):
        return f"{PROCEDURE_NAMES[test.procedure]} cannot take the uncertainty of the target in"
    return ""


def p_range_phrase(analysis: Analysis, sign: str) -> str:
    """Return the smallest and largest p that undecided readings allow."""
    test = analysis.test
    if test is None or test.p_range is None:
        return ""
    ends = (p_text(p, analysis.question.alpha, sign) for p in test.p_range)
    return f" (from {' to '.join(ends)})"


def afterthoughts(analysis: Analysis) -> tuple[str, ...]:
    """Return "set after the readings were seen" and "test no. k on this question", where they are due."""
    question, said = analysis.question, []
    names = [AFTERTHOUGHT_NAMES.get(part, plain_words(part)) for part in question.set_after]
    if names:
        listed = names[0] if len(names) == 1 else f"{', '.join(names[:-1])} and {names[-1]}"
        said.append(f"Set after the readings were seen: {listed}.")
    if question.look >= 2:
        said.append(f"This is test no. {question.look} on this question.")
    return tuple(said)


def probability_text(value: float, sign: str) -> str:
    """Return a probability in %: whole per cents, one place near 0 and 100 %."""
    if not isfinite(value):
        return "an unknown probability"
    if value > 0.999:
        return "more than 99.9 %".replace(".", sign)
    if value < 0.001:
        return "less than 0.1 %".replace(".", sign)
    return f"{100 * value:.0f} %" if 0.01 <= value <= 0.99 else f"{100 * value:.1f} %".replace(".", sign)
