"""The sentence for the report: one template for each verdict, filled with the facts of one analysis."""

from meanlab.core.question import Question
from meanlab.core.results import Analysis, Without
from meanlab.wording.digits import estimate_of
from meanlab.wording.names import IN_TWO_UNITS, PROCEDURE_NAMES, counted, short_noun
from meanlab.wording.numbers import level_text, number_text, p_text, plain_words, statistic_text, unit_text
from meanlab.wording.phrases import (
    about_word,
    afterthoughts,
    bound_phrase,
    cause_of_no_decision,
    difference_phrase,
    excess_noun,
    figures_phrase,
    further_in_force,
    leaves_target_uncertainty_out,
    missed_phrase,
    of_subject,
    opening_phrase,
    parameter_of,
    probability_text,
    scatter_phrase,
    sides_phrase,
    units_phrase,
)
from meanlab.wording.shown import Shown, in_sign, shown, target_phrase
from meanlab.wording.templates import DECISION_RULES, FAMILIES, NOT_TESTABLE, TEMPLATES, VERDICT_WORDS


def conclusion(analysis: Analysis) -> str:
    """Return the sentence for the report, with what was set after the readings and the count of looks behind it."""
    numbers = shown(analysis)
    if analysis.verdict == "not testable" or analysis.test is None:
        sentence = _not_testable(analysis, numbers)
    else:
        question = analysis.question
        template = TEMPLATES[verdict_key(analysis), question.alternative, FAMILIES[analysis.test.procedure]]
        sentence = template.format(**_parts(analysis, numbers))
    return _filled(" ".join((sentence.strip(), *afterthoughts(analysis))))


def verdict_word(analysis: Analysis) -> str:
    """Return the verdict in a word or a short phrase: "differs", "agrees within ± 0.05 mg/L", "exceeds", …"""
    key = verdict_key(analysis)
    if key.startswith("cannot tell") or key == "undecided":
        return "cannot tell"
    if key == "differs, with a limit":
        key = "differs"
    if key == "not testable":
        return key
    noun = short_noun(analysis.question.target_kind)
    template = VERDICT_WORDS[key, analysis.question.alternative]
    return template.format(limit=shown(analysis).limit, noun=noun)


def verdict_key(analysis: Analysis) -> str:
    """Return the verdict as the table of templates knows it: with a limit or without, undecided told apart."""
    verdict, question = analysis.verdict, analysis.question
    limit = question.equivalence_limit is not None
    if verdict == "cannot tell":
        if analysis.test is not None and cause_of_no_decision(analysis, ".", 0.05):
            return "undecided"
        return "cannot tell, with a limit" if limit and analysis.equivalence is not None else "cannot tell"
    if verdict == "agrees" and question.alternative != "two-sided" and limit:
        return "agrees, beyond the target" if beyond_target(analysis) else "agrees, with a limit"
    if verdict == "differs" and limit and analysis.equivalence is not None:
        return "differs, with a limit"
    return verdict


def agreement_sentence(analysis: Analysis) -> str:
    """Return what was found about agreement within the limit, or about the side opposite to the one asked."""
    numbers, found, alternative = shown(analysis), analysis.equivalence, analysis.question.alternative
    target = target_phrase(analysis, numbers)
    if found is None:
        if analysis.test is not None and leaves_target_uncertainty_out(analysis):
            name = PROCEDURE_NAMES[analysis.test.procedure]
            return f"Agreement with {target} is not examined: {name} cannot take the uncertainty of the target in."
        if alternative == "two-sided" and analysis.question.equivalence_limit is None:
            return "Agreement is not examined: no equivalence limit E was set."
        return f"Agreement with {target} cannot be examined with these readings."
    state = "is shown" if found.within else "is not shown"
    if alternative == "two-sided":
        claim = f"Agreement within ± {numbers.limit} with {target}"
    else:
        claim = f"That the {parameter_of(analysis)} {_opposite_claim(analysis, target, numbers)}"
    what = "agreement" if alternative == "two-sided" else "that"
    bound = bound_phrase(analysis, numbers, verb=True)
    return _filled(f"{claim} {state}: {bound} ({numbers.p_agreement} for {what}, level {numbers.level}).")


def enough_sentence(analysis: Analysis) -> str:
    """Return what these readings could and could not have shown."""
    numbers, power, excess = shown(analysis), analysis.power, excess_noun(analysis)
    if power.planning_s is None or analysis.test is None:
        return power.message or "What these readings could have shown is not known: their scatter cannot be estimated."
    start = scatter_phrase(analysis, numbers)
    if numbers.detectable:
        larger = f", and one of {numbers.detectable_90} with 90 %" if numbers.detectable_90 else ""
        about = about_word(analysis)
        said = [f"{start} find a true {excess} of {about}{numbers.detectable} with a probability of 80 %{larger}."]
    else:
        said = [f"{start} do not find a true {excess} of any size with a probability of 80 %."]
    said += _difference_that_matters(analysis, numbers)
    return _filled(" ".join((*said, power.message)))


def _difference_that_matters(analysis: Analysis, numbers: Shown) -> list[str]:
    power, given = analysis.power, analysis.question.difference_that_matters
    if given is None or power.power is None:
        return []
    matters = unit_text(in_sign(given, numbers.sign), numbers.unit)
    found, missed = (probability_text(value, numbers.sign) for value in (power.power, 1 - power.power))
    said = [f"The difference that matters, {matters}, would be found with {found} and missed with {missed}."]
    if power.readings_needed is not None:
        noun = "preparation" if analysis.readings.preparations is not None else "reading"
        said.append(f"To find it with 80 % takes {counted(power.readings_needed, noun)}.")
    return said


def decision_rule(analysis: Analysis) -> str:
    """Return what must be shown, and with which risk, before something is said (decision rule, ISO/IEC 17025 7.8.6)."""
    numbers, question = shown(analysis), analysis.question
    template = DECISION_RULES[question.alternative, question.equivalence_limit is not None]
    return template.format(
        parameter=parameter_of(analysis),
        target=target_phrase(analysis, numbers),
        level=level_text(1 - question.alpha, numbers.sign),
        agreement_level=level_text(1 - 2 * question.alpha, numbers.sign),
        risk=numbers.level,
        limit=numbers.limit,
    )


def with_without_sentence(without: Without, question: Question | None = None, sign: str = ".") -> str:
    """Return what comes out without the far readings, or with the readings that were left out.

    ``question`` gives the limit and the kind of the target for the words of the verdict; without it they stay general.
    """
    numbered = [str(entry + 1) for entry in without.entries]
    listed = " and ".join(part for part in (", ".join(numbered[:-1]), *numbered[-1:]) if part)
    noun = "" if not numbered else "entry" if len(numbered) == 1 else "entries"
    start = plain_words(f"{without.label[:1].upper()}{without.label[1:]} {noun} {listed}")
    if without.test is None:
        return f"{start}: not testable."
    p = p_text(without.test.p_value, without.test.significance, sign)
    word = _word_of(without, question, sign)
    return f"{start}: {statistic_text(without.test, sign)}, {p}; verdict: {word}."


def _word_of(without: Without, question: Question | None, sign: str) -> str:
    alternative = without.test.alternative if without.test is not None else "two-sided"
    limit, noun = "E", "target"
    key: str = without.verdict
    if question is not None:
        noun = short_noun(question.target_kind)
        if question.equivalence_limit is not None:
            limit = unit_text(in_sign(question.equivalence_limit, sign), question.unit)
            key = "agrees, with a limit" if key == "agrees" and alternative != "two-sided" else key
    template = VERDICT_WORDS.get((key, alternative), key)
    return template.format(limit=limit, noun=noun)


def _parts(analysis: Analysis, numbers: Shown) -> dict[str, str]:
    two_sided = analysis.question.alternative == "two-sided"
    return {
        "opening": opening_phrase(analysis, numbers),
        "target": target_phrase(analysis, numbers),
        "difference": difference_phrase(numbers),
        "plain_difference": difference_phrase(numbers, bare=True),
        "figures": figures_phrase(analysis, numbers),
        "scatter": "the combined uncertainty" if further_in_force(analysis) else "scatter",
        "sides": sides_phrase(analysis, numbers),
        "missed": missed_phrase(analysis, numbers),
        "limit": numbers.limit,
        "bound": bound_phrase(analysis, numbers),
        "agreeing": f"{_p_of_claim(analysis, numbers)} for {'agreement' if two_sided else 'that'}",
        "cause": cause_of_no_decision(analysis, numbers.sign, analysis.question.alpha),
    }


def beyond_target(analysis: Analysis) -> bool:
    """Tell whether a one-sided question found the mean on the other side of the target itself, a limit E or not."""
    test, question = analysis.test, analysis.question
    if test is None or question.alternative == "two-sided" or analysis.equivalence is None:
        return False
    return (test.p_less if question.alternative == "greater" else test.p_greater) < question.alpha


def _p_of_claim(analysis: Analysis, numbers: Shown) -> str:
    test = analysis.test
    if test is None or verdict_key(analysis) != "agrees, beyond the target":
        return numbers.p_agreement
    p = test.p_less if analysis.question.alternative == "greater" else test.p_greater
    return p_text(p, analysis.question.alpha, numbers.sign)


def _opposite_claim(analysis: Analysis, target: str, numbers: Shown) -> str:
    greater = analysis.question.alternative == "greater"
    if analysis.question.equivalence_limit is None:
        return f"lies {'below' if greater else 'above'} {target}"
    return f"does not {'exceed' if greater else 'fall below'} {target} by {numbers.limit} or more"


def not_testable_cause(analysis: Analysis) -> str:
    """Return the cause as the table knows it, from the row of the rule that decided."""
    causes = {IN_TWO_UNITS: "two units", -1: "one preparation", 0: "undecided", 3: "one reading", 4: "identical"}
    if analysis.route.row == 1:
        return "fixed"
    return causes.get(analysis.route.row, "other")


def _not_testable(analysis: Analysis, numbers: Shown) -> str:
    cause = not_testable_cause(analysis)
    units, readings = units_phrase(analysis), counted(analysis.summary.n_readings, "reading")
    if cause == "one reading" and analysis.readings.preparations is not None:
        cause = "one preparation"
    estimate = numbers.estimate or "not defined"
    return NOT_TESTABLE[cause].format(
        of_subject=of_subject(analysis),
        estimate=estimate,
        target=target_phrase(analysis, numbers),
        units=units,
        Units=units,
        Readings=readings,
        The_parameter=f"The {parameter_of(analysis)}",
        value=f", {numbers.estimate}," if numbers.estimate else "",
        reason=_reason(analysis),
        beside=_beside(analysis, numbers),
    )


def _reason(analysis: Analysis) -> str:
    reasons = analysis.route.reasons
    return plain_words(reasons[0]).removesuffix(".") if reasons else "no procedure can be run"


def _beside(analysis: Analysis, numbers: Shown) -> str:
    """Return the difference that is shown beside a question that cannot be tested, and half a step of the readings."""
    if not numbers.difference or estimate_of(analysis) is None:
        return ""
    step = analysis.summary.resolution
    beside = ""
    if not_testable_cause(analysis) == "identical" and step:
        beside = f"; half a step of the readings is {unit_text(number_text(step / 2, numbers.sign), numbers.unit)}"
    return f"The difference is {difference_phrase(numbers)}{beside}."


def _filled(sentence: str) -> str:
    """Return a sentence without the gaps that parts without text leave."""
    return " ".join(sentence.split())
