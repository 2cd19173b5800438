"""Known σ: whether the scatter of the readings agrees with it."""

from math import isfinite

from scipy import special

from meanlab.checks.facts import Facts
from meanlab.core.results import Check, Outcome
from meanlab.wording.numbers import df_text

CAUTION_LEVEL = 0.01
LARGEST = 1e300


def known_sigma_check(facts: Facts) -> Check | None:
    """Return χ² = (n − 1)s²/σ² with the p of its upper tail; None without a known σ or below 2 units.

    With degrees of freedom ν of σ the statistic is F = s²/σ² on (n − 1, ν). An upper tail below 0.01 is a caution, a
    lower one a note; the route stays z. Figures: p_lower.
    """
    sigma = facts.question.number("sigma")
    if sigma is None or facts.s is None or facts.n < 2:
        return None
    df, sigma_df = facts.n - 1, float(facts.question.sigma_df)
    ratio = min((facts.s / sigma) * (facts.s / sigma), LARGEST)
    upper, lower = scatter_tails(ratio, df, sigma_df)
    statistic = ratio if isfinite(sigma_df) else df * ratio
    outcome, verdict = _judged(upper, lower, facts, noticed_ratio(df, sigma_df))
    return Check("sigma", outcome, statistic, upper, f"{_seen(statistic, facts)}, {verdict}.", {"p_lower": lower})


def _seen(statistic: float, facts: Facts) -> str:
    sigma_df = float(facts.question.sigma_df)
    degrees = f"{facts.n - 1}, {df_text(sigma_df, facts.decimal_sign)}" if isfinite(sigma_df) else f"{facts.n - 1}"
    name = f"F({degrees})" if isfinite(sigma_df) else f"χ²({degrees})"
    values = f"s = {facts.with_unit(facts.s or 0.0)} against the known σ = {facts.typed(facts.question.sigma)}"
    return f"{values}: {name} = {facts.text(statistic)}"


def _judged(upper: float, lower: float, facts: Facts, noticed: float) -> tuple[Outcome, str]:
    if upper < CAUTION_LEVEL:
        return "caution", (
            f"{facts.p(upper, CAUTION_LEVEL)}; these readings scatter more than the known σ explains, and z is then "
            "too sure; Student's t stands beside it"
        )
    if lower < CAUTION_LEVEL:
        return "note", (
            f"lower tail {facts.p(lower, CAUTION_LEVEL)}; they scatter far less than the known σ, so they may not be "
            "replicates of the same kind as those σ comes from"
        )
    return "clear", (
        f"{facts.p(upper, CAUTION_LEVEL)}; no evidence against the known σ, and with {facts.readings} only a "
        f"scatter of {facts.text(noticed)} times σ would be noticed in four sets of five"
    )


def scatter_tails(ratio: float, df: float, sigma_df: float) -> tuple[float, float]:
    """Return P(s²/σ² above the ratio) and below it: χ²(df)/df, or F(df, sigma_df) where σ itself was estimated."""
    if isfinite(sigma_df):
        return float(special.fdtrc(df, sigma_df, ratio)), float(special.fdtr(df, sigma_df, ratio))
    return float(special.chdtrc(df, df * ratio)), float(special.chdtr(df, df * ratio))


def noticed_ratio(df: float, sigma_df: float) -> float:
    """Return the true ratio to σ that the upper tail at 0.01 notices in four sets of five."""
    if isfinite(sigma_df):
        critical = float(special.fdtri(df, sigma_df, 1 - CAUTION_LEVEL))
        return (critical / float(special.fdtri(df, sigma_df, 0.2))) ** 0.5
    return float((special.chdtri(df, CAUTION_LEVEL) / special.chdtri(df, 0.8)) ** 0.5)
