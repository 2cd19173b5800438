"""Run order: whether neighbours are alike or the readings drift, where their order is that of measurement."""

from math import sqrt

import numpy as np
from scipy import special

from meanlab.checks.facts import Facts, at_most
from meanlab.core.results import Check
from meanlab.procedures.distributions import t_upper

FEWEST = 8
EACH_LEVEL = 0.025
# how often a correlation of 0.6 between neighbours, and a drift of 1 s over the run, are found; simulated here
CORRELATION_FOUND = {10: 0.42, 20: 0.77}
DRIFT_FOUND = {8: 0.12, 20: 0.25, 50: 0.54}
INFLATED = "a risk of 5 % is really 13 to 15 % (correlation 0.3) or 30 to 33 % (0.6), and no procedure repairs it"


def run_order_check(shifted: np.ndarray | None, facts: Facts) -> Check | None:
    """Return the von Neumann ratio (lower tail) and the slope against order, each at 0.025; None without an order.

    The statistic is the ratio with its p; figures: slope_p, runs about the median, lag1 correlation.
    """
    if shifted is None or not facts.question.run_order or not facts.scatters:
        return None
    if facts.n < FEWEST:
        said = f"With {facts.readings} in run order neither a drift nor a likeness of neighbours can be seen."
        return Check("run order", "note", None, None, said)
    ratio = von_neumann_ratio(shifted)
    p, slope_p = von_neumann_p(ratio, facts.n), slope_test(shifted)
    runs, expected = runs_about_median(shifted)
    figures = {"slope_p": slope_p, "runs": float(runs), "runs_expected": expected, "lag1": lag1(shifted)}
    seen = (
        f"von Neumann ratio {facts.text(ratio)} ({facts.p(p, EACH_LEVEL)}), slope against order "
        f"{facts.p(slope_p, EACH_LEVEL)}, {runs} runs about the median"
    )
    if min(p, slope_p) < EACH_LEVEL:
        what = "neighbours are alike" if p < EACH_LEVEL else "the readings drift"
        inflated = INFLATED.replace(".", facts.decimal_sign)
        return Check("run order", "caution", ratio, p, f"In run order {what} – {seen}: {inflated}.", figures)
    return Check("run order", "clear", ratio, p, f"{seen[0].upper()}{seen[1:]}: {_worth(facts)}.", figures)


def von_neumann_ratio(x: np.ndarray) -> float:
    """Return Σ(xᵢ₊₁ − xᵢ)²/Σ(xᵢ − x̄)² of one sample x of shape (n,), about 2 for readings without a pattern."""
    steps, away = np.diff(x), x - x.mean()
    return float(steps @ steps) / float(away @ away)


def von_neumann_p(ratio: float, n: int) -> float:
    """Return P(ratio or lower) for independent normal readings: mean 2, variance 4(n − 2)/(n² − 1), as a beta on 0…4.

    Source: von Neumann 1941 (moments); Durbin & Watson 1951 (beta distribution with these moments).

    >>> round(von_neumann_p(2.0, 10), 12)
    0.5
    """
    shape = ((n * n - 1) / (n - 2) - 1) / 2
    return float(special.betainc(shape, shape, min(1.0, ratio / 4)))


def slope_test(x: np.ndarray) -> float:
    """Return the two-sided p of the slope of x against its order, t = r√((n − 2)/(1 − r²))."""
    n = len(x)
    order = np.arange(n) - (n - 1) / 2
    away = x - x.mean()
    squares = float(order @ order) * float(away @ away)
    left = squares - float(order @ away) ** 2
    if left <= 1e-14 * squares:
        return 0.0
    return 2 * float(t_upper(abs(float(order @ away)) * sqrt((n - 2) / left), n - 2))


def lag1(x: np.ndarray) -> float:
    """Return the correlation of neighbours, Σ(xᵢ − x̄)(xᵢ₊₁ − x̄)/Σ(xᵢ − x̄)²."""
    away = x - x.mean()
    return float(away[:-1] @ away[1:]) / float(away @ away)


def runs_about_median(x: np.ndarray) -> tuple[int, float]:
    """Return how often the readings run above or below their median (those on it left out), and how many are expected.

    Expected 1 + 2ab/(a + b) with a above and b below. Source: NIST/SEMATECH e-Handbook 1.3.5.13.
    """
    sides = np.sign(x - np.median(x))
    sides = sides[sides != 0]
    if not len(sides):
        return 0, 0.0
    above, below = int(np.sum(sides > 0)), int(np.sum(sides < 0))
    return 1 + int(np.sum(sides[1:] != sides[:-1])), 1 + 2 * above * below / (above + below)


def _worth(facts: Facts) -> str:
    """Return what a silent check is worth at this n."""
    n, found = at_most(facts.n, CORRELATION_FOUND) or (10, CORRELATION_FOUND[10])
    drift_n, drift = at_most(facts.n, DRIFT_FOUND) or (FEWEST, DRIFT_FOUND[FEWEST])
    little = ", so a silent check means little" if facts.n < 50 else ""
    return (
        f"no pattern seen; a correlation of {facts.text(0.6, 1)} between neighbours is found in "
        f"{facts.percent(found)} of sets at n = {n}, a drift of 1 s over the run in {facts.percent(drift)} of sets at "
        f"n = {drift_n}{little}"
    )
