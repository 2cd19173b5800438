"""Known σ: whether the scatter of the readings agrees with it."""

from math import isfinite

from scipy import special

from meanlab.checks.facts import Facts
from meanlab.core.results import Check
from meanlab.wording.numbers import df_text

CAUTION_LEVEL = 0.01


def known_sigma_check(facts: Facts) -> Check | None:
    """Return χ² = (n − 1)s²/σ² with the p of its upper tail; None without a known σ or below 2 units.

    With degrees of freedom ν of σ the statistic is F = s²/σ² on (n − 1, ν). An upper tail below 0.01 is a caution, a
    lower one a note; the route stays z. Figures: p_lower.
    """
    sigma = facts.question.number("sigma")
    if sigma is None or facts.s is None or facts.n < 2:
        return None
    df, sigma_df = facts.n - 1, float(facts.question.sigma_df)
    ratio = (facts.s / sigma) ** 2
    upper, lower = scatter_tails(ratio, df, sigma_df)
    known = isfinite(sigma_df)
    statistic = ratio if known else df * ratio
    sign = facts.decimal_sign
    name = f"F({df}, {df_text(sigma_df, sign)})" if known else f"χ²({df})"
    seen = f"s = {facts.with_unit(facts.s)} against the known σ = {facts.with_unit(sigma)}, {name} = {facts.text(statistic)}"
    figures = {"p_lower": lower}
    if upper < CAUTION_LEVEL:
        said = (
            f"{seen}, {facts.p(upper, CAUTION_LEVEL)}: these readings scatter more than the known σ explains, and z is "
        )
        said += "then too sure; Student's t stands beside it."
        return Check("sigma", "caution", statistic, upper, said, figures)
    if lower < CAUTION_LEVEL:
        said = f"{seen}, lower tail {facts.p(lower, CAUTION_LEVEL)}: far less scatter than the known σ; are these "
        said += "replicates of the same kind as those σ comes from?"
        return Check("sigma", "note", statistic, upper, said, figures)
    said = (
        f"{seen}, {facts.p(upper, CAUTION_LEVEL)}: no evidence against the known σ, and with {facts.n} readings only a "
    )
    said += f"scatter of more than {facts.text(noticed_ratio(df, sigma_df))} times σ would mostly be noticed."
    return Check("sigma", "clear", statistic, upper, said, figures)


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
