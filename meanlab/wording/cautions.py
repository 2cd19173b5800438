"""What belongs beside the sentence, the weightiest first; the general line is always the last."""

from math import sqrt

from meanlab.core.results import Analysis, Test
from meanlab.wording.names import PROCEDURE_NAMES, target_noun
from meanlab.wording.numbers import plain_words
from meanlab.wording.phrases import WITH_UNCERTAINTY
from meanlab.wording.shown import INCLUDES_FURTHER

FEW = 8
FEW_FOR_ONE_SIDE = 15
SYMBOLS = "nstzpk"  # a sentence may begin with one of these, which stays small
FAR_END = 5.0  # critical value, in standard errors, from which an interval is said to be wide

FURTHER_NAMES = {
    "target_uncertainty": "the uncertainty of the target",
    "measurement_uncertainty": "the laboratory's own uncertainty",
}
FEW_READINGS = (
    "With fewer than 8 readings the shape cannot be verified: for skewed readings a risk of 5 % can really be 11 to "
    "12 %."
)


def cautions(analysis: Analysis) -> tuple[str, ...]:
    """Return the cautions of an analysis by weight, without repeats.

    Stopped checks, cautions of checks, uncertainties left out, decisions that another bound would not share, where the
    method is known to be weak, remarks of the procedure, what was set after the readings, the general line.
    """
    found = (
        *_from_checks(analysis, "stop"),
        *_from_checks(analysis, "caution"),
        *_left_out_uncertainties(analysis),
        *_disagreeing_bounds(analysis),
        *_known_weakness(analysis),
        *(analysis.test.notes if analysis.test is not None else ()),
        *_afterthoughts(analysis),
        *_exact_target(analysis),
        general_line(analysis),
    )
    return tuple(dict.fromkeys(text for text in map(as_sentence, found) if text))


def general_line(analysis: Analysis) -> str:
    """Return the line that stands beside every statement: what it speaks of, and who decides where harm is possible."""
    parameter = analysis.test.parameter if analysis.test is not None else analysis.route.parameter
    return (
        f"The statement speaks of the {parameter} only; where a decision can harm someone (health, safety, release of "
        "a product), the laboratory's own procedure, the local rules and a qualified person decide."
    )


def _from_checks(analysis: Analysis, outcome: str) -> tuple[str, ...]:
    return tuple(check.message for check in analysis.checks if check.outcome == outcome)


def _left_out_uncertainties(analysis: Analysis) -> tuple[str, ...]:
    test, question = analysis.test, analysis.question
    if test is None or test.procedure in INCLUDES_FURTHER:
        return ()
    named = {
        "target_uncertainty": "uncertainty of the target",
        "measurement_uncertainty": "laboratory's own uncertainty",
    }
    missing = [f"the {name}" for field, name in named.items() if question.number(field)]
    if not missing:
        return ()
    verb = "are" if len(missing) > 1 else "is"
    return (f"{' and '.join(missing)} {verb} not included: {PROCEDURE_NAMES[test.procedure]} looks at scatter only.",)


def _disagreeing_bounds(analysis: Analysis) -> tuple[str, ...]:
    test, budget = analysis.test, analysis.uncertainty
    if test is None or budget is None:
        return ()
    return tuple(
        f"The {bound.name} comparison would decide otherwise. {bound.message}"
        for bound in budget.bounds
        if bound.rejects != test.reject
    )


def _known_weakness(analysis: Analysis) -> tuple[str, ...]:
    """Return where the procedure in force is known to be weak on readings like these."""
    test, n = analysis.test, analysis.summary.n
    if test is None or test.procedure in ("z", "sign"):
        return ()
    found = []
    if test.procedure == "t" and 3 <= n < FEW:
        found.append(FEW_READINGS)
    if test.procedure in ("t", "guarded_t") and _thin_side(analysis, test):
        found.append(
            "The question is asked on the thin side of a skewed shape: with fewer than 15 readings the risk of a false "
            "alarm there is higher than the level says."
        )
    if (
        test.procedure == "guarded_t"
        and max((abs(end) for end in test.critical if end is not None), default=0) > FAR_END
    ):
        found.append("The interval is wide because one reading dominates.")
    if test.procedure == "signed_rank":
        found.append("The centre of symmetry is the mean only if the shape is symmetric.")
    return tuple(found)


def _thin_side(analysis: Analysis, test: Test) -> bool:
    """Tell whether a one-sided question looks at the thin side of a shape skewed by more than its standard error.

    Standard error of the skewness √(6n(n − 1)/((n − 2)(n + 1)(n + 3))) (common practice).
    """
    n, skewness = analysis.summary.n, analysis.summary.skewness
    if skewness is None or not 3 <= n < FEW_FOR_ONE_SIDE:
        return False
    error = sqrt(6 * n * (n - 1) / ((n - 2) * (n + 1) * (n + 3)))
    return (test.alternative == "less" and skewness > error) or (test.alternative == "greater" and skewness < -error)


def _afterthoughts(analysis: Analysis) -> tuple[str, ...]:
    question, found = analysis.question, []
    if "alternative" in question.set_after and question.alternative != "two-sided":
        found.append("A side chosen after the readings were seen doubles the risk of a false alarm.")
    if question.look >= 2:
        found.append("Each further test on the same question adds to the risk of a false alarm.")
    return tuple(found)


def _exact_target(analysis: Analysis) -> tuple[str, ...]:
    question = analysis.question
    if question.target_kind not in WITH_UNCERTAINTY or question.number("target_uncertainty"):
        return ()
    return (f"The {target_noun(question.target_kind)} is treated as exact: no uncertainty was given for it.",)


def as_sentence(text: str) -> str:
    """Return a remark as a sentence: first letter large, a full stop at the end."""
    text = plain_words(text)
    if not text:
        return ""
    symbol = len(text) > 1 and text[1] == " " and text[0] in SYMBOLS
    return (text if symbol else text[0].upper() + text[1:]) + ("" if text[-1] in ".!?" else ".")
