"""How many readings: published numbers, the smallest number that will do, and what is out of reach for every number."""

import time
from math import inf, nan, sqrt

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

import meanlab
from meanlab.core.complaints import PlanComplaint
from meanlab.planning.detection import Design, detection_power
from meanlab.planning.searches import out_of_reach, readings_needed, smallest_detectable
from meanlab.procedures.mean_tests import Further

# source; difference in s; α; power; alternative; n (exact, non-central t)
PUBLISHED = [
    ("NIST/SEMATECH e-Handbook 7.2.2.2, a shift of one sigma", 1.0, 0.05, 0.9, "greater", 11),
    ("Cohen 1988, one sample (n from memory)", 0.5, 0.05, 0.8, "two-sided", 34),
    ("Cohen 1988, one sample (n from memory)", 0.2, 0.05, 0.8, "two-sided", 199),
    ("Cohen 1988, one sample (n from memory)", 1.0, 0.05, 0.9, "two-sided", 13),
]


@pytest.mark.parametrize(("source", "difference", "alpha", "power", "alternative", "n"), PUBLISHED)
def test_published_numbers_of_readings(source, difference, alpha, power, alternative, n):
    """The number of readings is the published one."""
    assert meanlab.plan_detection(difference, 1, alternative, alpha, power).readings == n


def test_nist_number_with_known_sigma():
    """NIST 7.2.2.2 finds 9 readings for one sigma with known σ: (1.645 + 1.282)² = 8.56."""
    assert meanlab.plan_detection(1, 1, "greater", 0.05, 0.9, sigma_known=True).readings == 9


@pytest.mark.parametrize(("ratio", "n"), [(2.0, 4), (1.0, 7), (0.75, 10), (0.5, 18), (0.25, 64)])
def test_half_widths_of_the_interval(ratio, n):
    """Smallest n with t(0.975; n − 1)/√n ≤ E/s, computed at 50 digits; the half-width reached is that of scipy's t."""
    plan = meanlab.plan_interval(ratio, 1)
    assert plan.readings == n
    assert plan.achieved == pytest.approx(stats.t.isf(0.025, n - 1) / sqrt(n), rel=1e-10)


DESIGNS = [
    Design(1.0),
    Design(1.0, "greater"),
    Design(1.0, "less", 0.01),
    Design(1.0, procedure="z"),
    Design(1.0, procedure="signed_rank"),
    Design(1.0, procedure="sign"),
    Design(1.0, "greater", procedure="sign"),
    Design(1.0, further=Further(0.1)),
    Design(1.0, "greater", further=Further(0.1, 8.0)),
    Design(1.0, procedure="z", further=Further(0.1)),
]


@pytest.mark.parametrize("design", DESIGNS)
@pytest.mark.parametrize("difference", [0.45, 1.0, 2.2])
@pytest.mark.parametrize("power", [0.5, 0.8, 0.95])
def test_the_number_is_the_smallest(design, difference, power):
    """No smaller number of readings has the power, tried one by one, and this one has it."""
    difference *= design.side
    n = readings_needed(difference, power, design)
    assert detection_power(n, difference, design) >= power
    assert all(detection_power(fewer, difference, design) < power for fewer in range(2, n))


@settings(max_examples=40, deadline=None)
@given(
    st.integers(30, 4000).map(lambda steps: steps / 1000),
    st.sampled_from(["two-sided", "greater", "less"]),
    st.sampled_from([0.01, 0.05, 0.2]),
    st.sampled_from([0.3, 0.8, 0.99]),
    st.booleans(),
)
def test_one_reading_fewer_does_not_do(difference, alternative, alpha, power, known):
    """power(n − 1) < power asked ≤ power(n), for t and for z."""
    towards = -difference if alternative == "less" else difference
    plan = meanlab.plan_detection(towards, 1, alternative, alpha, power, known)
    if plan.readings is None:
        assert meanlab.power(10_000, towards, 1, alternative, alpha, known) < power
        return
    assert plan.achieved == meanlab.power(plan.readings, towards, 1, alternative, alpha, known)
    assert plan.achieved >= power
    if plan.readings > 2:
        assert meanlab.power(plan.readings - 1, towards, 1, alternative, alpha, known) < power


@settings(max_examples=25, deadline=None)
@given(
    st.integers(100, 3000).map(lambda steps: steps / 1000),
    st.sampled_from([0.0, 0.25, -0.5]),
    st.sampled_from([0.3, 0.8, 0.95]),
    st.sampled_from([0.0, 0.05]),
)
def test_one_reading_fewer_does_not_show_agreement(limit, share, power, u):
    """The number for agreement is the smallest: one fewer falls short of the power."""
    true = share * limit
    plan = meanlab.plan_agreement(limit, 1, true, power=power, target_uncertainty=u)
    if plan.readings is None:
        assert meanlab.power_agreement(10_000, limit, 1, true, target_uncertainty=u) < power
        return
    assert meanlab.power_agreement(plan.readings, limit, 1, true, target_uncertainty=u) >= power
    if plan.readings > 2:
        assert meanlab.power_agreement(plan.readings - 1, limit, 1, true, target_uncertainty=u) < power


@pytest.mark.parametrize("power", [0.8, 0.9])
@pytest.mark.parametrize("n", [2, 5, 12, 60])
@pytest.mark.parametrize("design", DESIGNS)
def test_smallest_detectable_has_the_power(n, power, design):
    """At the smallest detectable difference the power is the one asked for; below it is less."""
    found = smallest_detectable(n, power, design)
    if found is None:
        assert detection_power(n, design.side * 1e6, design) < power
        return
    assert detection_power(n, design.side * found, design) == pytest.approx(power, rel=1e-9)
    assert detection_power(n, design.side * found * 0.99, design) < power


def test_smallest_detectable_by_other_digits():
    """n = 10, 5 % two-sided, 80 %: 0.99600 s, where the power at 60 digits is 0.8 (non-central t, Lenth's series)."""
    from exact_powers import shifted_t_upper, t_critical

    found = smallest_detectable(10, 0.8, Design(1.0))
    t, shift = t_critical(0.025, 9), found * sqrt(10)
    assert float(shifted_t_upper(t, 9, shift) + shifted_t_upper(t, 9, -shift)) == pytest.approx(0.8, rel=1e-10)


def test_what_an_uncertain_target_puts_out_of_reach():
    """Below 2.80 u₀ (two-sided) and 2.49 u₀ (one-sided) at 5 % and 80 % no number will do: z(0.975) + z(0.8)."""
    assert out_of_reach(0.8, Design(1.0, further=Further(0.3))) == pytest.approx(0.3 * 2.8016, rel=1e-4)
    one_sided = stats.norm.ppf(0.95) + stats.norm.ppf(0.8)
    assert out_of_reach(0.8, Design(1.0, "greater", further=Further(0.3))) == pytest.approx(0.3 * one_sided, rel=1e-12)
    below = meanlab.plan_detection(2.79 * 0.3, 0.1, target_uncertainty=0.3)
    assert below.readings is None
    assert "2.80 times the standard uncertainty of the target" in below.reason
    assert meanlab.plan_detection(2.83 * 0.3, 0.1, target_uncertainty=0.3).readings is not None
    assert meanlab.plan_detection(2.50 * 0.3, 0.1, "greater", target_uncertainty=0.3).readings is not None
    assert meanlab.plan_detection(2.48 * 0.3, 0.1, "greater", target_uncertainty=0.3).readings is None


def test_a_difference_against_the_side_asked_is_said():
    """A true difference on the other side is shown by no number, and the reason says which side was asked."""
    assert "above the target" in meanlab.plan_detection(-1, 1, "greater").reason
    plan = meanlab.plan_detection(1, 1, "less")
    assert (plan.readings, plan.achieved) == (None, None)
    assert "below the target" in plan.reason
    assert meanlab.plan_detection(-1, 1, "less").readings == meanlab.plan_detection(1, 1, "greater").readings


def test_a_true_difference_beyond_the_limit_is_no_agreement():
    """|true difference| ≥ E: none, with the reason."""
    for true in (1.0, -1.0, 3.0):
        plan = meanlab.plan_agreement(1, 1, true)
        assert plan.readings is None
        assert "no agreement" in plan.reason


def test_agreement_out_of_reach_of_an_uncertain_target():
    """E below z(0.95) u₀ can be shown by no number of readings: room for x̄ is then none at all."""
    plan = meanlab.plan_agreement(0.16, 1, target_uncertainty=0.1)
    assert plan.readings is None
    assert "1.60 times" in plan.reason
    assert meanlab.plan_agreement(0.32, 0.1, target_uncertainty=0.1).readings is not None


def test_more_than_ten_thousand_readings_are_not_planned():
    """Where no number up to 10,000 will do there is none, with the reason and the course up to there."""
    for plan in (meanlab.plan_detection(0.001, 1), meanlab.plan_agreement(0.001, 1), meanlab.plan_interval(0.001, 1)):
        assert plan.readings is None
        assert "10,000" in plan.reason
        assert plan.curve[-1][0] == 10_000


@pytest.mark.parametrize(
    "plan", [meanlab.plan_detection(0.3, 1), meanlab.plan_agreement(0.4, 1), meanlab.plan_interval(0.2, 1)]
)
def test_the_course_holds_the_plan(plan):
    """The course rises in n from 2 readings, passes through the number planned, and goes beyond it."""
    counts = [n for n, _ in plan.curve]
    assert counts[0] == 2
    assert counts == sorted(set(counts))
    assert dict(plan.curve)[plan.readings] == plan.achieved
    assert counts[-1] > plan.readings
    assert len(counts) <= 62


def test_plans_are_plain_json():
    """A plan can be had as plain values."""
    assert meanlab.plan_detection(1, 1).to_dict()["readings"] == 10


SENSELESS = [
    (meanlab.power, (1, 1, 1), {}),
    (meanlab.power, (2.5, 1, 1), {}),
    (meanlab.power, (0, 1, 1), {"sigma_known": True}),
    (meanlab.power, (5, nan, 1), {}),
    (meanlab.power, (5, inf, 1), {}),
    (meanlab.power, (5, 1, 0), {}),
    (meanlab.power, (5, 1, -1), {}),
    (meanlab.power, (5, 1, "a few"), {}),
    (meanlab.power, (5, 1, None), {}),
    (meanlab.power, (True, 1, 1), {}),
    (meanlab.power, (5, 1, 1), {"alternative": "larger"}),
    (meanlab.power, (5, 1, 1), {"significance": 0.5}),
    (meanlab.power, (5, 1, 1), {"significance": 0}),
    (meanlab.power, (5, 1, 1), {"target_uncertainty": -0.1}),
    (meanlab.power_agreement, (5, 0, 1), {}),
    (meanlab.power_agreement, (1, 1, 1), {}),
    (meanlab.power_agreement, (5, 1, 1, inf), {}),
    (meanlab.plan_detection, (0, 1), {}),
    (meanlab.plan_detection, (1, 1), {"power": 1}),
    (meanlab.plan_detection, (1, 1), {"power": 80}),
    (meanlab.plan_detection, (1, np.float64("nan")), {}),
    (meanlab.plan_agreement, (-1, 1), {}),
    (meanlab.plan_agreement, (1, 1), {"power": 0}),
    (meanlab.plan_interval, (0, 1), {}),
    (meanlab.plan_interval, (1, 1), {"confidence": 95}),
    (meanlab.plan_interval, (1, [1, 2]), {}),
]


@pytest.mark.parametrize(("planned", "given", "named"), SENSELESS)
def test_what_makes_no_sense_is_a_complaint(planned, given, named):
    """Anything not finite or without a meaning is a complaint that names what was found and what is needed."""
    with pytest.raises(PlanComplaint, match=r"must|Type digits|no number of readings") as raised:
        planned(*given, **named)
    assert raised.value.where


def test_number_texts_are_welcome():
    """Number texts with point or comma are planned as the numbers they are."""
    assert meanlab.plan_detection("0,5", "1.0", power="0.8").readings == 34
    assert meanlab.power("10", "1", "1") == meanlab.power(10, 1, 1)


def test_plans_are_quick():
    """Four plans with their courses, one with an uncertain target, take less than 0.6 s, so that the page can wait."""
    times = []
    for _ in range(3):
        start = time.perf_counter()
        meanlab.plan_detection(0.5, 1)
        meanlab.plan_interval(0.5, 1)
        meanlab.plan_agreement(0.5, 1)
        meanlab.plan_detection(0.5, 1, target_uncertainty=0.1)
        times.append(time.perf_counter() - start)
    assert min(times) < 0.6
