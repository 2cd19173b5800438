"""The planning questions: how many readings for a difference, an agreement, an interval; and the power of so many."""

from collections.abc import Callable
from math import sqrt
from typing import Any

from meanlab.core.complaints import PlanComplaint
from meanlab.core.results import Plan
from meanlab.planning import given
from meanlab.planning.agreement import agreement_power, highest_agreement
from meanlab.planning.detection import Design, detection_power
from meanlab.planning.searches import MOST_READINGS, first_enough, lower_guess, out_of_reach, readings_needed
from meanlab.procedures.distributions import normal_critical, t_critical
from meanlab.procedures.mean_tests import Further
from meanlab.wording.numbers import level_text, significant

CURVE_POINTS = 60
BEYOND = 1.6


def power(
    readings: Any,
    difference: Any,
    s: Any,
    alternative: str = "two-sided",
    significance: Any = 0.05,
    sigma_known: bool = False,
    target_uncertainty: Any = 0.0,
) -> float:
    """Return the probability that the t (known σ: z) procedure rejects at a true difference (true − target).

    1 − F(t(1 − α); n − 1, δ√n/s) with the non-central t distribution F; with a target uncertainty u₀ the integral
    over s of P(N(δ, σ²/n + u₀²) > t(ν(s))·√(s²/n + u₀²)). Unit of ``difference``, ``s``, u₀: that of the readings.
    Raises PlanComplaint. Source: Owen 1965.

    >>> round(power(10, 1.0, 1.0), 4)
    0.8031
    """
    design = _design(s, alternative, significance, sigma_known, target_uncertainty)
    n = given.count(readings, 1 if sigma_known else 2)
    return detection_power(n, given.number(difference, "true difference", "difference"), design)


def power_agreement(
    readings: Any,
    limit: Any,
    s: Any,
    true_difference: Any = 0.0,
    significance: Any = 0.05,
    target_uncertainty: Any = 0.0,
) -> float:
    """Return the probability that agreement within ± limit is shown by two one-sided t tests at a true difference.

    Raises PlanComplaint. Source: Schuirmann 1987; Owen 1965.
    """
    return agreement_power(
        given.count(readings, 2),
        given.positive(limit, "equivalence limit E", "limit"),
        given.positive(s, "standard deviation s", "s"),
        given.number(true_difference, "true difference", "true_difference"),
        given.level(significance),
        given.not_negative(target_uncertainty, "standard uncertainty of the target", "target_uncertainty"),
    )


def plan_detection(
    difference: Any,
    s: Any,
    alternative: str = "two-sided",
    significance: Any = 0.05,
    power: Any = 0.8,
    sigma_known: bool = False,
    target_uncertainty: Any = 0.0,
) -> Plan:
    """Return the smallest number of readings that finds a true difference (true − target) with this power.

    Raises PlanComplaint. Source: Owen 1965.

    >>> plan_detection(1.0, 1.0, power=0.9).readings
    13
    """
    design = _design(s, alternative, significance, sigma_known, target_uncertainty)
    wanted = given.probability(power)
    size = given.number(difference, "difference", "difference")
    if size == 0:
        raise PlanComplaint(
            "The difference is 0, and no number of readings shows one of 0: "
            "type the smallest true difference that must not be missed.",
            "difference",
        )
    if alternative != "two-sided" and size * design.side < 0:
        asked = "above" if alternative == "greater" else "below"
        return _none(
            f"The question asks whether the mean lies {asked} the target; this difference lies on the other side."
        )
    needed = readings_needed(size, wanted, design)
    course = lambda n: detection_power(n, size, design)  # noqa: E731
    if needed is None:
        return _none(_too_small(size, wanted, design), _curve(course, MOST_READINGS))
    return Plan(needed, course(needed), _curve(course, needed), _by_design(design))


def plan_agreement(
    limit: Any,
    s: Any,
    true_difference: Any = 0.0,
    significance: Any = 0.05,
    power: Any = 0.8,
    target_uncertainty: Any = 0.0,
) -> Plan:
    """Return the smallest number of readings that shows agreement within ± limit with this power.

    Raises PlanComplaint. Source: Schuirmann 1987; Owen 1965.
    """
    E = given.positive(limit, "equivalence limit E", "limit")
    scatter = given.positive(s, "standard deviation s", "s")
    true = given.number(true_difference, "true difference", "true_difference")
    alpha, wanted = given.level(significance), given.probability(power)
    u = given.not_negative(target_uncertainty, "standard uncertainty of the target", "target_uncertainty")
    if abs(true) >= E:
        return _none("The true difference is as large as the limit E or larger: there is no agreement to be shown.")

    def course(n: int) -> float:
        return agreement_power(n, E, scatter, true, alpha, u)

    if highest_agreement(E, true, alpha, u) <= wanted:
        return _none(
            f"Out of reach for every number of readings: the limit E is only {significant(E / u, 3)} times "
            "the standard uncertainty of the target.",
            _curve(course, MOST_READINGS),
        )
    needed = first_enough(lambda n: course(n) >= wanted, _guess(E, scatter, true, alpha, wanted))
    if needed is None:
        return _none(_beyond(), _curve(course, MOST_READINGS))
    return Plan(needed, course(needed), _curve(course, needed), "Two one-sided t tests, integrated over s.")


def plan_interval(half_width: Any, s: Any, confidence: Any = 0.95) -> Plan:
    """Return the smallest number of readings with t(1 − α/2; n − 1)·s/√n ≤ half_width.

    Raises PlanComplaint. Source: NIST/SEMATECH e-Handbook 7.2.2.2 (common practice).
    """
    wanted = given.positive(half_width, "half-width", "half_width")
    scatter = given.positive(s, "standard deviation s", "s")
    level = given.between(confidence, "confidence level", "confidence", 0, 1, "95 % is 0.95")
    each = (1 - level) / 2

    def course(n: int) -> float:
        return float(t_critical(each, n - 1)) * scatter / sqrt(n)

    guess = lower_guess(float(normal_critical(each)) * (scatter / wanted))
    needed = first_enough(lambda n: course(n) <= wanted, guess)
    if needed is None:
        return _none(_beyond(), _curve(course, MOST_READINGS))
    return Plan(needed, course(needed), _curve(course, needed), "For readings that scatter with this s.")


def _design(s: Any, alternative: Any, significance: Any, sigma_known: bool, target_uncertainty: Any) -> Design:
    u = given.not_negative(target_uncertainty, "standard uncertainty of the target", "target_uncertainty")
    return Design(
        given.positive(s, "standard deviation s", "s"),
        given.side(alternative),
        given.level(significance),
        "z" if sigma_known else "t",
        further=Further(u),
    )


def _guess(limit: float, s: float, true: float, alpha: float, power: float) -> int:
    """Return about how many readings agreement takes, by the normal distribution."""
    missed = (1 - power) / 2 if true == 0 else 1 - power
    return lower_guess(float(normal_critical(alpha) + normal_critical(missed)) * (s / (limit - abs(true))))


def _curve(course: Callable[[int], float], needed: int) -> tuple[tuple[float, float], ...]:
    """Return the course from 2 readings to beyond those needed, at most CURVE_POINTS points."""
    last = min(MOST_READINGS, max(12, int(BEYOND * needed)))
    if last <= CURVE_POINTS + 1:
        places = list(range(2, last + 1))
    else:
        growth = (last / 2) ** (1 / (CURVE_POINTS - 1))
        places = sorted({round(2 * growth**step) for step in range(CURVE_POINTS)} | {needed})
    return tuple((float(n), course(n)) for n in places)


def _none(reason: str, curve: tuple[tuple[float, float], ...] = ()) -> Plan:
    return Plan(None, None, curve, reason)


def _beyond() -> str:
    return f"More than {MOST_READINGS:,} readings would be needed."


def _too_small(difference: float, power: float, design: Design) -> str:
    least = out_of_reach(power, design)
    if abs(difference) <= least:
        return (
            f"Out of reach for every number of readings: with {level_text(power)} only true differences above "
            f"{significant(least / design.u, 3)} times the standard uncertainty of the target can be found, "
            f"that is above {significant(least, 3)}."
        )
    return _beyond()


def _by_design(design: Design) -> str:
    name = "z with known σ" if design.procedure == "z" else "Student's t (non-central t distribution)"
    return f"Planned for {name}."
