"""What the readings of one analysis can show, for its procedure in force."""

from math import sqrt

import numpy as np
from scipy import special

from meanlab.core.numbers import as_typed
from meanlab.core.question import Question
from meanlab.core.results import Power
from meanlab.planning.detection import COUNTING, Design, detection_power, power_at
from meanlab.planning.searches import MOST_READINGS, out_of_reach, readings_needed, smallest_detectable
from meanlab.procedures.mean_tests import Further
from meanlab.wording.numbers import significant, unit_text

USUAL_POWER, HIGH_POWER, CURVE_POWER = 0.8, 0.9, 0.995
CAUTIOUS_TAIL = 0.2
CURVE_POINTS = 81
OTHER_SIDE = 0.25


def design_of(s: float, question: Question, procedure: str | None) -> Design:
    """Return the question in planning; without a procedure it is planned as z (known σ) or t."""
    further = Further(
        question.number("target_uncertainty") or 0.0,
        float(question.target_uncertainty_df),
        question.number("measurement_uncertainty") or 0.0,
    )
    planned = procedure or ("t" if question.sigma is None else "z")
    return Design(s, question.alternative, question.alpha, planned, float(question.sigma_df), further)


def analysis_power(n: int, s: float | None, question: Question, procedure: str | None) -> Power:
    """Return what n units with standard deviation s can show by a procedure (None: nothing could be tested).

    ``planning_s`` of the question goes before s. What needs an input that is not given is None; so is everything that
    speaks of these n readings where nothing could be tested. Source: see planning.detection.power_at.
    """
    given = question.number("difference_that_matters")
    used = question.number("planning_s") or s
    if not used:
        return Power(given, None, None, None, None, None)
    design = design_of(used, question, procedure)
    needed = None if given is None else readings_needed(design.side * given, USUAL_POWER, design)
    if procedure is None:
        return Power(given, None, None, None, None, needed, planning_s=used, kind=design.kind)
    usual, high = (smallest_detectable(n, power, design) for power in (USUAL_POWER, HIGH_POWER))
    estimated = question.planning_s is None and question.sigma is None and n >= 2
    cautious = _cautious(n, usual, design) if usual is not None and estimated else None
    found = None if given is None else detection_power(n, design.side * given, design)
    return Power(
        difference_that_matters=given,
        power=found,
        missed=None if found is None else 1 - found,
        smallest_detectable=usual,
        smallest_detectable_90=high,
        readings_needed=needed,
        smallest_detectable_cautious=cautious,
        planning_s=used,
        kind=design.kind,
        message=" ".join(_remarks(n, usual, cautious, needed, design, question)),
    )


def upper_limit_of_s(s: float, df: float) -> float:
    """Return the one-sided 80 % upper limit of σ, s·√(df/χ²(0.20; df)).

    >>> round(upper_limit_of_s(1.0, 4), 2), round(upper_limit_of_s(1.0, 9), 2)
    (1.56, 1.29)
    """
    return s * sqrt(df / (2 * float(special.gammaincinv(df / 2, CAUTIOUS_TAIL))))


def _cautious(n: int, usual: float, design: Design) -> float | None:
    s = upper_limit_of_s(design.s, n - 1)
    if design.u == 0:
        return usual * (s / design.s)
    return smallest_detectable(n, USUAL_POWER, design.with_s(s))


def _remarks(
    n: int, usual: float | None, cautious: float | None, needed: int | None, design: Design, question: Question
) -> list[str]:
    """Return what has to be said beside the figures."""
    sign = "," if "," in as_typed(question.target) else "."
    said = []
    if usual is None and design.procedure in COUNTING:
        said.append(f"With {n} readings no outcome of this procedure could be significant.")
    if cautious is not None and usual:
        factor = significant(cautious / usual, 3, sign)
        said.append(
            f"The standard deviation of {n} readings is itself uncertain: at its one-sided 80 % upper limit the "
            f"difference found with 80 % is {factor} times as large."
        )
    said += _out_of_reach(needed, design, question, sign)
    if design.procedure == "guarded_t":
        said.append("Planned as Student's t for normal readings: the guarded t finds less than that.")
    elif design.procedure == "signed_rank":
        said.append("Approximate: normal readings, relative efficiency 3/π against t.")
    if design.procedure not in ("z", "t") and question.number("target_uncertainty"):
        said.append("The uncertainty of the target is not included.")
    return said


def _out_of_reach(needed: int | None, design: Design, question: Question, sign: str) -> list[str]:
    given = question.number("difference_that_matters")
    least = out_of_reach(USUAL_POWER, design)
    said = []
    if least > 0:
        source = "uncertainty of the target" if design.further.own_u == 0 else "uncertainties beside the scatter"
        said.append(
            f"Differences up to {unit_text(significant(least, 3, sign), question.unit)} "
            f"({significant(least / design.u, 3, sign)} standard uncertainties) are out of reach for every "
            f"number of readings because of the {source}."
        )
    if given is not None and needed is None and given > least:
        said.append(f"More than {MOST_READINGS:,} readings would be needed to find the difference that matters.")
    return said


def operating_characteristic(
    n: int, s: float, question: Question, procedure: str, points: int = CURVE_POINTS
) -> tuple[np.ndarray, np.ndarray]:
    """Return true differences δ (true − target, in the unit of s) and 1 − power at each.

    They reach from no difference, to the side asked or to both, to where hardly anything is missed.
    Source: the operating characteristic curve, Ferris, Grubbs & Weaver 1946 (from memory).
    """
    design = design_of(s, question, procedure)
    found = power_at(n, design)
    reach = smallest_detectable(n, CURVE_POWER, design) or 4 * s
    low = -reach if question.alternative == "two-sided" else -OTHER_SIDE * reach
    differences = design.side * np.linspace(low, reach, points)
    return np.sort(differences), np.array([1 - found(float(difference)) for difference in np.sort(differences)])
