"""The check of normality: what was seen, and what a silent check is worth at this n."""

import numpy as np

from meanlab.checks.facts import CHECK_LEVEL, Facts, at_most, coarse_limit
from meanlab.checks.normality import (
    FEWEST,
    MOST,
    anderson_darling,
    shapiro_wilk,
    skewness,
    skewness_error,
)
from meanlab.core.results import Check, Outcome

FEWEST_FOR_SECOND_OPINION = 8
MANY = 20
# how often a shape is noticed at 5 %, simulated for this project (20,000 samples)
LOGNORMAL_NOTICED = {5: 0.15, 8: 0.31, 12: 0.48}
EXPONENTIAL_MISSED = {3: 0.93, 6: 0.78}


def normality_check(shifted: np.ndarray | None, facts: Facts) -> Check | None:
    """Return Shapiro–Wilk with Anderson–Darling as second opinion and the skewness; None below 3 units or for s = 0.

    The statistic is W (None above 5,000 units, where it is not computed).
    """
    if shifted is None or facts.n < FEWEST or not facts.scatters:
        return None
    x = shifted[np.newaxis, :]
    W = p = None
    if facts.n <= MOST:
        W, p = (float(figure[0]) for figure in shapiro_wilk(x))
    figures = {"skewness": float(skewness(x)[0]), "skewness_error": skewness_error(facts.n)}
    if facts.n >= FEWEST_FOR_SECOND_OPINION:
        adjusted, second = anderson_darling(x)
        figures |= {"anderson_darling": float(adjusted[0]), "anderson_darling_p": float(second[0])}
    outcome, verdict = _judged(p, figures.get("anderson_darling_p"), facts)
    return Check("normality", outcome, W, p, f"{_seen(W, p, figures, facts)}: {verdict}.", figures)


def _seen(W: float | None, p: float | None, figures: dict[str, float], facts: Facts) -> str:
    first = (
        f"Shapiro–Wilk is not computed above {MOST:,} readings"
        if W is None or p is None
        else f"Shapiro–Wilk W = {facts.text(W, 3)}, {facts.p(p)}"
    )
    second = figures.get("anderson_darling_p")
    opinion = "" if second is None else f"; Anderson–Darling {facts.p(second)}"
    skew = f"; skewness g₁ = {facts.text(figures['skewness'])} ± {facts.text(figures['skewness_error'])}"
    return first + opinion + skew


def _judged(p: float | None, second: float | None, facts: Facts) -> tuple[Outcome, str]:
    step = facts.step_in_s
    if step is not None and step > coarse_limit(facts.n):
        return "note", (
            f"not to be relied on, because the readings have a step of {facts.text(step)} s and rounding alone sets "
            "this check off (12 % of normal sets at n = 10, 90 % at n = 100, for a step of half the scatter)"
        )
    if p is None:
        return "note", "with so many readings the smallest departure is noticed, and for the mean it hardly matters"
    if p <= CHECK_LEVEL:
        return "caution", (
            "these readings do not look normal; the check does not tell a skewed shape, heavy tails and one far "
            "reading apart, the normal probability plot does so better"
        )
    if second is not None and second <= CHECK_LEVEL:
        return "note", f"the two opinions differ, so the shape is in doubt; {_worth(facts)}"
    return "clear", f"no evidence against normality, which is not evidence for it; {_worth(facts)}"


def _worth(facts: Facts) -> str:
    """Return what a silent check is worth at this n."""
    noticed = at_most(facts.n, LOGNORMAL_NOTICED)
    if noticed is None:
        n, missed = at_most(facts.n, EXPONENTIAL_MISSED) or (FEWEST, EXPONENTIAL_MISSED[FEWEST])
        return f"at n = {n} even an exponential shape goes unnoticed {facts.percent(missed)} of the time"
    if facts.n >= MANY:
        return (
            f"among sets of {MANY} from an exponential shape in which this check notices nothing, t raises "
            f"{facts.percent(0.145)} false alarms instead of {facts.percent(0.05)}"
        )
    n, share = noticed
    width = facts.text(0.7, 1)
    return f"at n = {n} a log-normal shape (σ = {width}) is noticed in {facts.percent(share)} of sets only"
