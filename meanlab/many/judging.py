"""Samples of equal size, judged together: procedure, figures, agreement and verdict of each."""

from dataclasses import dataclass

import numpy as np

from meanlab.analysis.agreement import covers_target
from meanlab.analysis.procedure import further_of
from meanlab.core.question import Question
from meanlab.many.looks import Looks, procedures_for
from meanlab.procedures.counted_groups import Counted, sign_p, sign_tests, signed_rank_p, signed_rank_tests
from meanlab.procedures.decision import p_value
from meanlab.procedures.group import Group
from meanlab.procedures.mean_tests import Figures, guarded_figures, t_figures, z_figures
from meanlab.procedures.signed_rank import EXACT_UP_TO, Null

UNTESTED = "not testable"


@dataclass(frozen=True)
class Judged:
    """The columns of a result for some samples, each of shape (samples,); nan and None where there is nothing.

    numbers     mean, s, low, high, difference, statistic, df, p by name
    procedure   key, None where nothing can be tested
    verdict     one of the five outcomes
    beyond      samples that cannot be judged together and have to be analysed one by one
    """

    numbers: dict[str, np.ndarray]
    procedure: np.ndarray
    verdict: np.ndarray
    beyond: np.ndarray


def judge(group: Group, question: Question, step_known: np.ndarray, limit: int | None, null: Null) -> Judged:
    """Return what an analysis of each sample finds; ``limit`` is E on the scale of the group.

    ``step_known`` is False for samples with computed numbers, which say nothing of their resolution.
    """
    count = len(group)
    numbers = {name: np.full(count, np.nan) for name in ("low", "high", "statistic", "df", "p")}
    numbers |= {"mean": group.mean, "difference": group.difference.copy()}
    numbers["s"] = group.s if group.n > 1 else np.full(count, np.nan)
    procedure, verdict = np.full(count, None, dtype=object), np.full(count, UNTESTED, dtype=object)
    beyond = np.zeros(count, dtype=bool)
    for places, name in procedures_for(Looks(question, group, step_known)):
        if name is None:
            continue
        procedure[places] = name
        if name == "signed_rank" and group.n > EXACT_UP_TO:
            beyond[places] = True
            continue
        found, verdicts = _tested(name, group.rows(places), question, limit, null)
        verdict[places] = verdicts
        for column, values in found.items():
            numbers[column][places] = values
    return Judged(numbers, procedure, verdict, beyond)


def _tested(
    name: str, group: Group, question: Question, limit: int | None, null: Null
) -> tuple[dict[str, np.ndarray], np.ndarray]:
    """Return the figures of one procedure on samples that it can be run on, and their verdicts."""
    alternative, alpha = question.alternative, question.alpha
    if name in ("sign", "signed_rank"):
        counted = (
            sign_tests(group, alternative, alpha)
            if name == "sign"
            else signed_rank_tests(group, alternative, alpha, null)
        )
        found, p, decided = _columns_of(counted), counted.p, counted.decided
    else:
        figures = _figures(name, group, question)
        p, decided = p_value(alternative, figures.p_greater, figures.p_less), np.ones(len(group), dtype=bool)
        low, high = (np.asarray(np.nan if end is None else end) for end in figures.ends(group.mean, alternative))
        degrees = np.where(np.isfinite(figures.df), figures.df, np.nan)
        found = {"statistic": figures.statistic, "df": degrees, "p": p, "low": low, "high": high}
    if not covers_target(name, question):
        return found, np.full(len(group), "cannot tell", dtype=object)
    within = _within(name, group, question, limit, null)
    return found, _verdicts(p < alpha, within, decided, question)


def _columns_of(counted: Counted) -> dict[str, np.ndarray]:
    return {
        "statistic": counted.statistic,
        "p": counted.p,
        "low": counted.low,
        "high": counted.high,
        "difference": counted.difference,
    }


def _figures(name: str, group: Group, question: Question) -> Figures:
    alternative, alpha = question.alternative, question.alpha
    if name == "t":
        return t_figures(group, alternative, alpha, further_of(question))
    if name == "guarded_t":
        return guarded_figures(group, alternative, alpha)
    sigma = question.number("sigma")
    assert sigma is not None
    return z_figures(group, sigma, float(question.sigma_df), alternative, alpha, further_of(question))


def _within(name: str, group: Group, question: Question, limit: int | None, null: Null) -> np.ndarray:
    """Tell of each sample whether agreement is shown; see `analysis.agreement.equivalence_of`."""
    if question.alternative == "two-sided":
        if limit is None:
            return np.zeros(len(group), dtype=bool)
        p = np.maximum(
            _one_sided(name, group.at(group.target - limit), question, "greater", null),
            _one_sided(name, group.at(group.target + limit), question, "less", null),
        )
    else:
        side, away = ("less", limit or 0) if question.alternative == "greater" else ("greater", -(limit or 0))
        p = _one_sided(name, group.at(group.target + away), question, side, null)
    return p < question.alpha


def _one_sided(name: str, group: Group, question: Question, side: str, null: Null) -> np.ndarray:
    if name == "sign":
        return sign_p(group, side)
    if name == "signed_rank":
        return signed_rank_p(group, side, null)
    figures = _figures(name, group, question)
    return np.asarray(figures.p_greater if side == "greater" else figures.p_less)


def _verdicts(reject: np.ndarray, within: np.ndarray, decided: np.ndarray, question: Question) -> np.ndarray:
    """Return the verdicts from rejection and agreement; see `analysis.agreement.verdict_of`."""
    rejected = np.full(len(reject), "differs", dtype=object)
    if question.equivalence_limit is not None:
        rejected[within] = "differs, within the limit"
    kept = np.where(within, "agrees", "cannot tell").astype(object)
    verdict = np.where(reject, rejected, kept)
    verdict[~decided] = "cannot tell"
    return verdict
