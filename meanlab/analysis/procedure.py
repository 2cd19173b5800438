"""One procedure, by its key, on the units of a question."""

from math import sqrt

from meanlab.core.question import PROCEDURES, Question
from meanlab.core.results import NotApplicable, Test
from meanlab.procedures.mean_tests import Further, guarded_t, known_sigma, students_t
from meanlab.procedures.sample import Sample, Spans
from meanlab.procedures.sign import count_sides, sign_test
from meanlab.procedures.sign import tails as sign_tails
from meanlab.procedures.signed_rank import Null, signed_rank
from meanlab.route import Look, cannot_run, nothing_compares

TAKES_FURTHER = ("z", "t")


def further_of(question: Question) -> Further:
    """Return the uncertainties beside the scatter that the question names."""
    return Further(
        question.number("target_uncertainty") or 0.0,
        float(question.target_uncertainty_df),
        question.number("measurement_uncertainty") or 0.0,
    )


def run(
    procedure: str,
    spans: Spans,
    sample: Sample | None,
    question: Question,
    alternative: str | None = None,
    alpha: float | None = None,
    chosen: bool = False,
) -> Test:
    """Run a procedure that can be run (see route.cannot_run); ``chosen`` where it is the route or fixed."""
    alternative = alternative or question.alternative
    alpha = alpha or question.alpha
    if procedure == "sign":
        return sign_test(spans, alternative, alpha)
    assert sample is not None, "only the sign test takes censored units"
    if procedure == "signed_rank":
        return signed_rank(sample, alternative, alpha, chosen)
    if procedure == "guarded_t":
        return guarded_t(sample, alternative, alpha)
    further = further_of(question)
    if procedure == "t":
        return students_t(sample, alternative, alpha, further)
    sigma = question.number("sigma")
    assert sigma is not None
    return known_sigma(sample, sigma, float(question.sigma_df), alternative, alpha, further)


def one_sided_p(procedure: str, spans: Spans, sample: Sample | None, question: Question, side: str) -> float:
    """Return the one-sided p-value of a procedure without computing its interval; ``side`` "greater" or "less"."""
    pick = 0 if side == "greater" else 1
    if procedure == "sign":
        return sign_tails(*count_sides(spans).worst(side))[pick]
    if procedure == "signed_rank":
        assert sample is not None
        return Null().tails(sample.differences)[pick]
    test = run(procedure, spans, sample, question)
    return test.p_greater if side == "greater" else test.p_less


def other_procedures(
    chosen: str | None, spans: Spans, sample: Sample | None, question: Question, look: Look
) -> tuple[Test | NotApplicable, ...]:
    """Return every procedure but the chosen one on the same units, in fixed order."""
    found: list[Test | NotApplicable] = []
    for procedure in PROCEDURES:
        if procedure == chosen:
            continue
        obstacle = nothing_compares(look) or cannot_run(procedure, look)
        found.append(NotApplicable(procedure, obstacle) if obstacle else run(procedure, spans, sample, question))
    return tuple(found)


def scatter_of(sample: Sample | None, question: Question) -> float | None:
    """Return the standard deviation of one unit: known σ where given, else s; None where there is none."""
    sigma = question.number("sigma")
    if sigma is not None:
        return sigma
    return sample.s if sample is not None and sample.n > 1 and sample.s > 0 else None


def scatter_error(sample: Sample, question: Question) -> float:
    """Return the standard uncertainty of the mean from scatter alone: σ/√n, else s/√n."""
    sigma = question.number("sigma")
    return sample.standard_error if sigma is None else sigma / sqrt(sample.n)
