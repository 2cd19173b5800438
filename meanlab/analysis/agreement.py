"""Agreement within the limit, and the verdict."""

from meanlab.analysis.procedure import TAKES_FURTHER, one_sided_p, run
from meanlab.analysis.units import Units
from meanlab.core.question import Question
from meanlab.core.results import Equivalence, Test, Verdict


def equivalence_of(units: Units, question: Question, test: Test | None) -> Equivalence | None:
    """Return whether the procedure in force shows agreement; None where nothing is asked or can be said.

    Two-sided, with E: p_E is the larger of p(greater, at μ₀ − E) and p(less, at μ₀ + E), beside the 1 − 2α interval
    (Schuirmann 1987). One-sided: the opposite one-sided p at μ₀ + E ("greater") or μ₀ − E ("less"), E = 0 if none,
    beside the 1 − α bound. With an uncertain target only procedures that take its uncertainty in can show agreement.
    """
    two_sided = question.alternative == "two-sided"
    if test is None or not covers_target(test.procedure, question) or (two_sided and units.limit is None):
        return None
    limit, target, alpha = units.limit or 0, units.spans.target, question.alpha
    if two_sided:
        p = max(
            _p_at(units, question, test, "greater", target - limit),
            _p_at(units, question, test, "less", target + limit),
        )
        interval = run(test.procedure, units.spans, units.sample, question, "two-sided", 2 * alpha, True).interval
        level = 1 - 2 * alpha
    else:
        opposite, end = ("less", target + limit) if question.alternative == "greater" else ("greater", target - limit)
        p = _p_at(units, question, test, opposite, end)
        interval = run(test.procedure, units.spans, units.sample, question, opposite, alpha, True).interval
        level = 1 - alpha
    return Equivalence(
        limit=question.number("equivalence_limit") or 0.0,
        low=interval.low,
        high=interval.high,
        level=level,
        p_value=p,
        within=p < alpha,
    )


def _p_at(units: Units, question: Question, test: Test, side: str, target: int) -> float:
    sample = None if units.sample is None else units.sample.at(target)
    return one_sided_p(test.procedure, units.spans.at(target), sample, question, side)


def covers_target(procedure: str, question: Question) -> bool:
    """Tell whether a procedure takes the uncertainty of the target in, or there is none."""
    return procedure in TAKES_FURTHER or not question.number("target_uncertainty")


def verdict_of(question: Question, test: Test | None, equivalence: Equivalence | None) -> Verdict:
    """Return the verdict from rejection and agreement; each claim alone has a risk of at most α.

    Where the procedure cannot take the target's uncertainty in, or the decision rests on leaving out readings equal to
    the target, the verdict is at best "cannot tell".
    """
    if test is None:
        return "not testable"
    if not test.decided or not covers_target(test.procedure, question):
        return "cannot tell"
    within = equivalence is not None and equivalence.within
    if test.reject:
        claims_less = question.equivalence_limit is not None
        return "differs, within the limit" if within and claims_less else "differs"
    return "agrees" if within else "cannot tell"
