"""What meanlab answers to each kind of published case: one function a topic, named figures out."""

from collections.abc import Callable, Mapping
from decimal import Decimal
from math import hypot, sqrt
from typing import Any

import numpy as np

from meanlab import Question, ReadingSet, analyse, plan_detection, plan_interval, power
from meanlab.checks.censored_fit import Entries, fit
from meanlab.checks.far_readings import grubbs_critical
from meanlab.procedures.distributions import normal_critical, t_critical
from meanlab.procedures.mean_tests import effective_df

Case = Mapping[str, Any]
Figures = dict[str, Any]
ALTERNATIVES = {"two-sided": "p_two", "greater": "p_greater", "less": "p_less"}

# targets of interval cases whose t is that of a test against a value the source names elsewhere; others: 0
TARGETS = {"nist_7221_ci_particles": "50", "gum_temperature_ci": "100", "gum_443_temperature": "100"}


def readings_of(case: Case) -> list[str]:
    """Return the readings of a case as typed; pairs as exact differences, summaries of one mean as equal readings."""
    data = case["data"]
    if isinstance(data, list):
        return data
    if "values" in data:
        return data["values"]
    if "x" in data:
        return [str(Decimal(x) - Decimal(y)) for x, y in zip(data["x"], data["y"], strict=True)]
    if "counts" in data:
        return ["-1"] * int(data["counts"]["below"]) + ["1"] * int(data["counts"]["above"])
    return [data["summary"]["mean"]] * int(data["summary"]["n"])


def analysis_of(case: Case, procedure: str, **more: Any) -> Any:
    """Return the analysis of a case by one procedure, with the target, alternative and level of its settings."""
    settings = case["settings"]
    target = settings.get("mu0") or settings.get("target") or TARGETS.get(case["id"], "0")
    level = settings.get("alpha") or str(1 - Decimal(settings.get("conf", "0.95")))
    alternative = settings.get("alternative", "two-sided").split(" ")[0].split("/")[0]
    question = {"alternative": alternative, "significance": level, "procedure": procedure} | more
    return analyse(readings_of(case), Question(target, **question))


def mean_figures(case: Case) -> Figures:
    """t on the readings: mean, s, standard error, T, p, interval, and the p of the opposite side."""
    found = analysis_of(case, "t")
    test = found.test
    side = {"greater": test.p_less, "less": test.p_greater}.get(test.alternative)
    upper, lower = test.critical[1], test.critical[0]
    return {
        "n": found.summary.n,
        "mean": found.summary.mean,
        "sd": found.summary.s,
        "median": found.summary.median,
        "se": test.standard_error,
        "t": test.statistic,
        "df": test.df,
        "t_crit": upper if upper is not None else lower,
        "p": test.p_value,
        "one_minus_p": side,
        "ci_low": test.interval.low,
        "ci_high": test.interval.high,
    }


def z_figures(case: Case) -> Figures:
    """z with the σ of the case; the table of critical values by the shared quantile."""
    if "sigma" not in case["settings"]:
        return {f"a={tail}": float(normal_critical(float(tail))) for tail in case["settings"]["upper_tail"]}
    test = analysis_of(case, "z", sigma=case["settings"]["sigma"], sigma_origin="of the source").test
    return {
        "mean": test.estimate,
        "se": test.standard_error,
        "z": test.statistic,
        "p": test.p_value,
        "ci_low": test.interval.low,
        "ci_high": test.interval.high,
    }


def signed_rank_figures(case: Case) -> Figures:
    """The signed rank, zeros by Pratt; tables of critical sums by the ranks 1…n."""
    settings = case["settings"]
    if "two_tail_alpha" in settings:
        sums = []
        for n in case["data"]["n"]:
            ranks = ReadingSet(tuple(range(1, int(n) + 1)))
            question = Question("0", significance=settings["two_tail_alpha"], procedure="signed_rank")
            sums.append(analyse(ranks, question).test.critical[0])
        return {"crit_p05": sums, "crit": sums}
    by_side = {side: analysis_of(case, "signed_rank", alternative=side).test for side in ALTERNATIVES}
    test = by_side["two-sided"]
    other = sum(test.null_ranks) / 2 - test.statistic
    smaller = min(test.statistic, other)
    figures = {name: by_side[side].p_value for side, name in ALTERNATIVES.items()}
    figures |= {"n_used": test.n_used, "w_plus": test.statistic, "w_minus": other, "w_min": smaller}
    return figures | {"pratt_T": smaller, "pratt_exact_p": test.p_value}


def rank_interval_figures(case: Case) -> Figures:
    """Hodges–Lehmann and the interval of the signed rank; the attained level of untied ranks 1…n."""
    if not isinstance(case["data"], list) and "n" in case["data"]:
        attained = {}
        for n in case["data"]["n"]:
            found = analyse(tuple(range(1, int(n) + 1)), Question("0", procedure="signed_rank"))
            attained[f"cov(n={n})"] = found.test.interval.attained
        return attained
    test = analysis_of(case, "signed_rank").test
    interval = test.interval
    return {"hl": test.estimate, "ci_low": interval.low, "ci_high": interval.high, "achieved": interval.attained}


def sign_figures(case: Case) -> Figures:
    """The sign test by all three alternatives."""
    by_side = {side: analysis_of(case, "sign", alternative=side).test for side in ALTERNATIVES}
    test = by_side["two-sided"]
    below = test.n_used - test.statistic
    figures = {name: by_side[side].p_value for side, name in ALTERNATIVES.items()}
    figures |= {"n": test.n_used, "n_pos": test.statistic, "n_neg": below, "M": (test.statistic - below) / 2}
    return figures


def median_figures(case: Case) -> Figures:
    """The median with its interval; the attained level of n readings."""
    if not isinstance(case["data"], list):
        attained = {}
        for n in case["data"]["n"]:
            interval = analyse(tuple(range(1, int(n) + 1)), Question("0", procedure="sign")).test.interval
            # where there is no 95 % interval none is given; the widest there is would have this level
            attained[f"n={n}"] = interval.attained if interval.low is not None else 1 - 2 * 0.5 ** int(n)
        return attained
    test = analysis_of(case, "sign").test
    interval = test.interval
    return {"median": test.estimate, "ci_low": interval.low, "ci_high": interval.high, "achieved": interval.attained}


def normality_figures(case: Case) -> Figures:
    """Shapiro–Wilk and Anderson–Darling as the check of normality gives them."""
    if not isinstance(case["data"], list):
        return {f"W({tail})": _third_reading(float(tail), case) for tail in case["settings"]["lower_tail"]}
    check = analysis_of(case, "t").check("normality")
    n, adjusted = len(case["data"]), check.figures.get("anderson_darling")
    figures = {"W": check.statistic, "p": check.p_value, "A2_star": adjusted}
    return figures | {"A2": adjusted / (1 + 0.75 / n + 2.25 / n**2) if adjusted else None}


def _third_reading(tail: float, case: Case) -> float:
    """Return W of readings 0, m, 1 if their p is the tail that belongs to the W of the case: W = ¾/(1 − m + m²)."""
    W = float(case["computed"][f"W({tail:.2f})"])
    m = (1 - sqrt(1 - 4 * (1 - 0.75 / W))) / 2
    check = analyse(["0", f"{m:.17f}", "1"], Question("0")).check("normality")
    return check.statistic if abs(check.p_value - tail) < 1e-9 else check.p_value


def far_figures(case: Case) -> Figures:
    """G and Grubbs's critical values."""
    if not isinstance(case["data"], list):
        sizes = case["data"].get("n") or case["data"]["p"]  # ISO 5725-2 has p laboratories
        return {f"n={n}": grubbs_critical(int(n), 0.025) for n in sizes}
    found = analysis_of(case, "t")
    check, n = found.check("far readings"), len(case["data"])
    return {
        "mean": found.summary.mean,
        "sd": found.summary.s,
        "G": check.statistic,
        "G6": check.statistic,
        "p_two": check.p_value,
        "crit_one_sided": grubbs_critical(n, 0.05),
        "crit_two_sided": grubbs_critical(n, 0.025),
    }


def run_order_figures(case: Case) -> Figures:
    """The figures of the check of the run order."""
    check = analysis_of(case, "t", run_order=True).check("run order")
    named = {"von_neumann": check.statistic, "lag1": check.figures["lag1"]}
    return named | {"runs": check.figures["runs"], "expected": check.figures["runs_expected"]}


def power_figures(case: Case) -> Figures:
    """Power of t for a difference in units of s."""
    settings = case["settings"]
    asked = (int(settings["n"]), settings["d"], "1", settings["alternative"], settings["alpha"])
    return {"power": power(*asked)}


def size_figures(case: Case) -> Figures:
    """How many readings: for a power, or for the half-width of an interval."""
    settings = case["settings"]
    if "conf" in settings:
        widths = [name[len("n(E/s=") : -1] for name in case["computed"] if name.startswith("n(")]
        return {f"n(E/s={width})": plan_interval(width, "1", settings["conf"]).readings for width in widths}
    difference = settings.get("d") or settings["delta_over_sigma"]
    wanted = settings.get("power") or str(1 - Decimal(settings["beta"]))
    asked = (difference, "1", settings["alternative"], settings["alpha"], wanted)
    plan, known = plan_detection(*asked), plan_detection(*asked, sigma_known=True)
    return {
        "n": plan.readings,
        "n_exact": plan.readings,
        "n_t": plan.readings,
        "n_z": known.readings,
        "power_at_n": plan.achieved,
    }


def agreement_figures(case: Case) -> Figures:
    """Two one-sided t tests at the limits, and the interval of twice the level."""
    margin, target = Decimal(case["settings"]["margin"]), Decimal(case["settings"]["target"])
    found = analysis_of(case, "t", equivalence_limit=str(margin))
    lower, upper = (
        analyse(readings_of(case), Question(str(end), alternative=side, procedure="t")).test
        for end, side in ((target - margin, "greater"), (target + margin, "less"))
    )
    agreement = found.equivalence
    return {
        "t_lower": lower.statistic,
        "t_upper": upper.statistic,
        "p_lower": lower.p_value,
        "p_upper": upper.p_value,
        "p": agreement.p_value,
        "ci90_low": agreement.low,
        "ci90_high": agreement.high,
        "equivalent": agreement.within,
    }


def uncertainty_figures(case: Case) -> Figures:
    """Effective degrees of freedom of components; t against a certified value with its uncertainty."""
    data, settings = case["data"], case["settings"]
    if "components" in data:
        parts = [(float(u), float(df)) for u, df in data["components"]]
        combined, effective = hypot(*(u for u, _ in parts)), effective_df(parts)
        k = float(t_critical(0.025, round(effective)))  # the source rounds ν_eff to a whole number
        return {"uc": combined, "veff": effective, "t95": k, "U95": k * combined}
    if "certified" not in settings:
        found = analysis_of(case, "t")
        return {"mean": found.summary.mean, "u": found.test.standard_error}
    u = Decimal(settings["U_certified"]) / Decimal(settings["k"])
    question = Question(settings["certified"], procedure="t", target_uncertainty=str(u))
    found = analyse(data, question)
    test, budget = found.test, found.uncertainty
    by_name = {part.name: part.u for part in budget.components}
    twice = next(bound for bound in budget.bounds if bound.name == "k = 2")
    return {
        "delta": found.difference.value,
        "u_m": by_name["scatter"],
        "u_ref": by_name["target"],
        "u_delta": budget.combined,
        "U_delta": twice.bound,
        "ratio": found.difference.value / twice.bound,
        "veff": test.df,
        "t": test.statistic,
        "zeta": test.statistic,
        "p_welch": test.p_value,
        "significant": twice.rejects,
    }


def censored_figures(case: Case) -> Figures:
    """The normal model fitted to readings with below-limit entries."""
    if case["id"] == "epa_cohen_sulfate":
        known, limits = case["data"]["observed"], case["data"]["lod"]
        censored = [{"index": place, "kind": "below", "limit": limit} for place, limit in enumerate(limits)]
        found = analyse(ReadingSet(tuple(known), censored=tuple(censored)), Question("1700")).censored_fit
        detected = analyse(known, Question("1700")).summary
        figures = {"mle_mean": found.mean, "mle_sd": found.s}
        return figures | {"detect_mean": detected.mean, "detect_var": detected.s**2}
    known = np.array([float(value) for value in case["data"] if float(value) > 0])
    at_limit = len(case["data"]) - len(known)
    mean, s, _ = fit(Entries(known, np.zeros(at_limit), np.ones(at_limit)))
    return {"mean": mean, "sd": s, "n_censored": at_limit}


ANSWERS: Mapping[str, Callable[[Case], Figures]] = {
    "descriptive": mean_figures,
    "t_test": mean_figures,
    "interval_mean": mean_figures,
    "z_test": z_figures,
    "signed_rank": signed_rank_figures,
    "rank_interval": rank_interval_figures,
    "sign_test": sign_figures,
    "median_interval": median_figures,
    "normality": normality_figures,
    "outlier": far_figures,
    "run_order": run_order_figures,
    "power": power_figures,
    "sample_size": size_figures,
    "equivalence": agreement_figures,
    "reference_value_uncertainty": uncertainty_figures,
    "censored": censored_figures,
}
