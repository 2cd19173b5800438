"""Analysis objects built straight from the frozen facts, with figures from scipy, for tests of the wording alone."""

from dataclasses import replace
from decimal import Decimal
from math import inf, sqrt

import numpy as np
from scipy import stats

from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import (
    Analysis,
    Difference,
    Equivalence,
    Interval,
    Power,
    Provenance,
    Route,
    Summary,
    Test,
    Uncertainty,
)

NITRATE = ["5.012", "5.043", "5.028", "5.009", "5.051", "5.017", "5.026", "5.033", "4.998", "5.021", "5.034", "4.987"]
PARAMETERS = {"signed_rank": "centre of symmetry", "sign": "median"}
MINUTE = "2026-12-01T05:30:12+00:00"
FINGERPRINT = "3f9a61c022be" + "0" * 52


def built(readings=NITRATE, question=None, procedure="t", verdict=None, **parts):
    """Return the analysis of readings by a procedure; ``verdict`` and any other part can be set against the figures."""
    question = question or Question("5.000")
    given = readings if isinstance(readings, ReadingSet) else ReadingSet(tuple(readings), unit="mg/L")
    x = np.array([float(value) for value in given.values])
    test = None if procedure is None else test_of(x, question, procedure)
    found = parts.pop("equivalence", equivalence_of(x, question, test))
    target = float(question.exact_target)
    value = None if test is None else test.estimate - target
    percent = None if value is None or target == 0 else 100 * value / abs(target)
    analysis = Analysis(
        readings=given,
        question=question,
        route=Route(procedure, PARAMETERS.get(procedure, "mean"), ("12 readings, a reason",), False, 9),
        summary=summary_of(x, given),
        test=test,
        difference=None if value is None else Difference(value, None, None, percent),
        others=(),
        checks=(),
        equivalence=found,
        power=Power(None, None, None, 0.0153, 0.0178, None, planning_s=0.0183),
        verdict=verdict or verdict_of(test, found, question),
        conclusion="",
        cautions=(),
        provenance=Provenance({"meanlab": "1.0"}, MINUTE, FINGERPRINT),
        uncertainty=uncertainty_of(x, question),
    )
    return replace(analysis, **parts)


def test_of(x, question, procedure):
    """Return a test with figures from scipy; intervals of the counting procedures are plausible, not exact."""
    target, alpha, alternative, n = float(question.exact_target), question.alpha, question.alternative, len(x)
    estimate, error, df, critical = float(x.mean()), float(x.std(ddof=1)) / sqrt(n), n - 1.0, (None, None)
    if procedure == "z":
        error, df = question.number("sigma") / sqrt(n), None
    if procedure in ("t", "z", "guarded_t"):
        law = stats.norm() if df is None else stats.t(df)
        statistic = (estimate - target) / error
        tails = float(law.sf(statistic)), float(law.cdf(statistic))
        edge = float(law.isf(alpha / (2 if alternative == "two-sided" else 1)))
        critical, width = (-edge, edge), edge * error
    else:
        estimate, error, df, width = float(np.median(x)), None, None, float(np.ptp(x)) / 4
        above, below = int((x > target).sum()), int((x < target).sum())
        if procedure == "sign":
            statistic, critical = float(above), (2.0, n - 2.0)
            tails = tuple(
                stats.binomtest(above, above + below, alternative=side).pvalue for side in ("greater", "less")
            )
        else:
            ranks = stats.rankdata(np.abs(x - target))
            statistic, critical = float(ranks[x > target].sum()), (13.0, 65.0)
            tails = tuple(
                stats.wilcoxon(x - target, alternative=side, method="approx").pvalue for side in ("greater", "less")
            )
    p = {"greater": tails[0], "less": tails[1]}.get(alternative, min(1.0, 2 * min(tails)))
    low, high = estimate - width, estimate + width
    low, high = (None if alternative == "less" else low), (None if alternative == "greater" else high)
    attained = 0.9785 if procedure in ("sign", "signed_rank") else 1 - alpha
    critical = (None if alternative == "greater" else critical[0]), (None if alternative == "less" else critical[1])
    return Test(
        procedure, PARAMETERS.get(procedure, "mean"), alternative, alpha, n, n, statistic, df, float(p), tails[0],
        tails[1], critical, bool(p < alpha), estimate, error, Interval(low, high, 1 - alpha, attained), 0.0,
    )  # fmt: skip


def equivalence_of(x, question, test):
    """Return agreement by two one-sided t tests (Schuirmann 1987), also for the counting procedures here."""
    limit = question.number("equivalence_limit")
    if test is None or (limit is None and question.alternative == "two-sided"):
        return None
    target, alpha, n, mean = float(question.exact_target), question.alpha, len(x), float(x.mean())
    error = float(x.std(ddof=1)) / sqrt(n)
    edge = float(stats.t.isf(alpha, n - 1)) * error
    p_low = float(stats.t.sf((mean - target + (limit or 0)) / error, n - 1))
    p_high = float(stats.t.cdf((mean - target - (limit or 0)) / error, n - 1))
    p = {"greater": p_high, "less": p_low}.get(question.alternative, max(p_low, p_high))
    low = None if question.alternative == "greater" else mean - edge
    high = None if question.alternative == "less" else mean + edge
    level = 1 - 2 * alpha if question.alternative == "two-sided" else 1 - alpha
    return Equivalence(limit or 0.0, low, high, level, p, p < alpha)


def verdict_of(test, found, question):
    """Return the verdict by the table of methods: rejection against agreement."""
    if test is None:
        return "not testable"
    within = found is not None and found.within
    if test.reject:
        return "differs, within the limit" if within and question.equivalence_limit is not None else "differs"
    return "agrees" if within else "cannot tell"


def summary_of(x, given):
    """Return the readings in figures."""
    s = float(x.std(ddof=1)) if len(x) > 1 else None
    return Summary(
        len(x), len(x), float(x.mean()), s, float(np.median(x)), x.min(), x.max(), given.decimals,
        len(given.left_out), 0, 0, 10.0**-given.decimals,
    )  # fmt: skip


def uncertainty_of(x, question):
    """Return the budget of the difference from scatter alone, or None for one reading."""
    if len(x) < 2:
        return None
    u, df = float(x.std(ddof=1)) / sqrt(len(x)), len(x) - 1.0
    sigma = question.number("sigma")
    if sigma is not None:
        u, df = sigma / sqrt(len(x)), inf
    k = float(stats.t.isf(question.alpha / 2, df)) if df != inf else float(stats.norm.isf(question.alpha / 2))
    own = None if df == inf else df
    return Uncertainty((), u, own, k, k * u, k * u, k, own)


def exactly(number):
    """Return a number text as an exact decimal."""
    return Decimal(number)
