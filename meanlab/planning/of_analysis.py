"""What the readings of one analysis can show, for its procedure in force."""

from dataclasses import replace
from math import inf, sqrt

import numpy as np
from scipy import special

from meanlab.core.question import Question
from meanlab.core.results import Power
from meanlab.planning.detection import (
    COUNTING,
    Design,
    detection_power,
    direction,
    out_of_reach,
    power_at,
    readings_needed,
    smallest_detectable,
)
from meanlab.procedures.mean_tests import Further
from meanlab.wording.numbers import significant

USUAL_POWER, HIGH_POWER = 0.8, 0.9
CAUTIOUS_TAIL = 0.2
CURVE_POINTS = 81


def design_of(s: float, question: Question, procedure: str | None) -> Design:
    """Return the question in planning; without a procedure it is planned as z (known σ) or t."""
    further = Further(
        question.number("target_uncertainty") or 0.0,
        float(question.target_uncertainty_df),
        question.number("measurement_uncertainty") or 0.0,
    )
    planned = procedure or ("t" if question.sigma is None else "z")
    sigma_df = float(question.sigma_df)
    return Design(s, question.alternative, question.alpha, planned, sigma_df, further)


def analysis_power(n: int, s: float | None, question: Question, procedure: str | None) -> Power:
    """Return what n units with standard deviation s can show by a procedure (None: not testable).

    ``planning_s`` of the question goes before s. Everything that needs an input not given is None.
    Source: Owen 1965 (non-central t); methods of the operating characteristic.
    """
    given = question.number("difference_that_matters")
    used = question.number("planning_s") or s
    if not used:
        return Power(given, None, None, None, None, None, message="")
    design = design_of(used, question, procedure)
    side = direction(question.alternative)
    needed = None if given is None else readings_needed(side * given, USUAL_POWER, design)
    if procedure is None:
        return Power(given, None, None, None, None, needed, planning_s=used, kind=design.kind())
    usual, high = (smallest_detectable(n, power, design) for power in (USUAL_POWER, HIGH_POWER))
    found = None if given is None else detection_power(n, side * given, design)
    return Power(
        difference_that_matters=given,
        power=found,
        missed=None if found is None else 1 - found,
        smallest_detectable=usual,
        smallest_detectable_90=high,
        readings_needed=needed,
        smallest_detectable_cautious=_cautious(n, usual, design, question),
        planning_s=used,
        kind=design.kind(),
        message="",
    )


def upper_limit_of_s(s: float, df: float) -> float:
    """Return the one-sided 80 % upper limit of σ, s·√(df/χ²(0.20; df)).

    >>> round(upper_limit_of_s(1.0, 4), 2), round(upper_limit_of_s(1.0, 9), 2)
    (1.56, 1.29)
    """
    return s * sqrt(df / (2 * float(special.gammaincinv(df / 2, CAUTIOUS_TAIL))))


def _cautious(n: int, usual: float | None, design: Design, question: Question) -> float | None:
    if usual is None or question.sigma is not None or n < 2:
        return None
    s = upper_limit_of_s(design.s, n - 1)
    if design.u == 0:
        return usual * (s / design.s)
    return smallest_detectable(n, USUAL_POWER, design.with_s(s))


def operating_characteristic(
    n: int, s: float, question: Question, procedure: str, points: int = CURVE_POINTS
) -> tuple[np.ndarray, np.ndarray]:
    """Return true differences δ (unit of s) and 1 − power at each, from where nothing is missed to where all is."""
    design = design_of(s, question, procedure)
    found = power_at(n, design)
    reach = smallest_detectable(n, 0.99, design) or 4 * s
    low, high = {"greater": (-0.25, 1.1), "less": (-1.1, 0.25)}.get(question.alternative, (-1.1, 1.1))
    differences = np.linspace(low * reach, high * reach, points)
    return differences, np.array([1 - found(float(difference)) for difference in differences])
