"""Uncertainty of the difference from the target: components, combined, expanded, and what is shown beside the test."""

from math import hypot, inf

from meanlab.analysis.procedure import further_of, scatter_error
from meanlab.core.question import Question
from meanlab.core.results import Bound, Test, Uncertainty
from meanlab.procedures.distributions import normal_critical, t_critical
from meanlab.procedures.mean_tests import (
    NONE_FURTHER,
    Further,
    components_of,
    effective_df,
    known_sigma,
    students_t,
)
from meanlab.procedures.sample import Sample

FEW_FOR_WELCH = 5
SIMPLE_K = 2.0


def uncertainty_of(sample: Sample | None, question: Question, test: Test | None) -> Uncertainty | None:
    """Return the budget of the difference x̄ − μ₀; None for censored units or one without any known scatter.

    Combined u = √(scatter² + u₀² + u_B²), effective df by Welch–Satterthwaite, U = k·u with k = t(1 − α/2; df).
    ``of_mean`` leaves the target's part out. Source: JCGM 100:2008, 5.1, G.4.
    """
    if sample is None or (question.sigma is None and sample.n < 2):
        return None
    scatter_u = scatter_error(sample, question)
    further = further_of(question)
    if scatter_u == 0 and further.u == 0:
        return None
    scatter_df = float(question.sigma_df) if question.sigma is not None else sample.n - 1.0
    both = [(scatter_u, scatter_df), (further.own_u, inf)]
    df = effective_df([*both, (further.target_u, further.target_df)])
    mean_u = hypot(scatter_u, further.own_u)
    mean_df = effective_df(both) if mean_u > 0 else inf
    combined = hypot(mean_u, further.target_u)
    half = question.alpha / 2
    k, mean_k = float(t_critical(half, df)), float(t_critical(half, mean_df))
    testable = test is not None and further.u > 0 and scatter_u > 0
    return Uncertainty(
        components=tuple(components_of(scatter_u, scatter_df, further)),
        combined=combined,
        df=None if df == inf else df,
        k=k,
        expanded=k * combined,
        of_mean=mean_k * mean_u,
        of_mean_k=mean_k,
        of_mean_df=None if mean_df == inf else mean_df,
        scatter_only=_scatter_only(sample, question) if testable else None,
        bounds=_bounds(sample, question, further, combined) if testable and further.target_u > 0 else (),
    )


def _scatter_only(sample: Sample, question: Question) -> Test:
    """Return the test that looks at the scatter of the readings alone."""
    sigma = question.number("sigma")
    if sigma is None:
        return students_t(sample, question.alternative, question.alpha)
    return known_sigma(sample, sigma, float(question.sigma_df), question.alternative, question.alpha, NONE_FURTHER)


def _bounds(sample: Sample, question: Question, further: Further, combined: float) -> tuple[Bound, ...]:
    """Return the stricter bound at n ≤ 5 (scatter by t) and the comparison with k = 2; neither decides."""
    two_sided = question.alternative == "two-sided"
    each = question.alpha / 2 if two_sided else question.alpha
    size = {"greater": sample.difference, "less": -sample.difference}.get(question.alternative, abs(sample.difference))
    bounds = []
    if question.sigma is None and 2 <= sample.n <= FEW_FOR_WELCH:
        by_t = float(t_critical(each, sample.n - 1)) * sample.standard_error
        strict = hypot(by_t, float(normal_critical(each)) * further.u)
        bounds.append(
            Bound(
                "stricter bound",
                strict,
                size > strict,
                f"With {sample.n} readings the effective degrees of freedom are too generous (5 % is really up to 13 % "
                "at n = 2, 6.5 % at n = 4); the stricter bound takes the scatter by its own t.",
            )
        )
    bounds.append(
        Bound(
            "k = 2",
            SIMPLE_K * combined,
            abs(sample.difference) > SIMPLE_K * combined,
            "The comparison with k = 2 (ERM Application Note 1, from memory) is for about ten effective degrees of "
            "freedom or more; with fewer it rejects too often.",
        )
    )
    return tuple(bounds)
