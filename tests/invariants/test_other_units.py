"""What only changes the unit, the side or the order of the readings changes nothing else."""

from dataclasses import replace
from decimal import Decimal

import numpy as np
import pytest
from drawn import ALTERNATIVES, LEVELS, MIRROR, PROCEDURES, STEADY, drawn_readings, least_readings
from hypothesis import assume, given
from hypothesis import strategies as st

from meanlab.analysis import decide
from meanlab.core.readings import ReadingSet

all_cases = pytest.mark.parametrize("procedure", [*PROCEDURES, "rule"])
cases = {
    "drawn": drawn_readings(),
    "alternative": st.sampled_from(ALTERNATIVES),
    "level": st.sampled_from(LEVELS),
}


def decided(drawn, procedure, alternative, level, readings=None):
    """Return the heart of the analysis, with an equivalence limit."""
    assume(len(drawn.steps) >= least_readings(procedure))
    question = drawn.question(procedure, alternative, level, equivalence_limit=drawn.size(drawn.limit_steps))
    return decide(ReadingSet(tuple(drawn.readings if readings is None else readings)), question)


def same_numbers(found, expected, procedure):
    """Assert that statistic, p, critical values, decision, route, agreement and verdict are the same."""
    test, other = found.test, expected.test
    exact = procedure != "z"  # z divides by a σ that is rounded once in each unit
    assert (found.route.procedure, found.route.row) == (expected.route.procedure, expected.route.row)
    assert test.statistic == (other.statistic if exact else pytest.approx(other.statistic, rel=1e-13, abs=1e-13))
    assert test.p_value == (other.p_value if exact else pytest.approx(other.p_value, rel=1e-11))
    assert exact is False or test.critical == other.critical
    same_offsets(test.critical, other.critical)
    assert (test.reject, found.verdict) == (other.reject, expected.verdict)
    assert (found.equivalence is None) == (expected.equivalence is None)
    if found.equivalence is not None:
        assert found.equivalence.p_value == pytest.approx(expected.equivalence.p_value, rel=1e-11)


def same_offsets(offsets, expected, factor=1.0):
    """Assert that distances from the target are the same but for a factor; an end may cancel to the last digits."""
    size = factor * max((abs(end) for end in expected if end is not None), default=0.0)
    for one, other in zip(offsets, expected, strict=True):
        assert (one is None) == (other is None)
        assert one is None or one == pytest.approx(other * factor, rel=1e-12, abs=1e-13 * size)


@all_cases
@STEADY
@given(**cases, shift=st.integers(-(10**6), 10**6))
def test_a_shift_of_readings_and_target_changes_nothing(procedure, drawn, alternative, level, shift):
    """Readings and target moved together: every number but the ends of the intervals themselves is the same."""
    before = decided(drawn, procedure, alternative, level)
    after = decided(replace(drawn, offset=drawn.offset + shift), procedure, alternative, level)
    same_numbers(after, before, procedure)
    same_offsets(after.test.offsets, before.test.offsets)


@all_cases
@STEADY
@given(**cases, powers=st.integers(-9, 9))
def test_another_power_of_ten_changes_units_only(procedure, drawn, alternative, level, powers):
    """Readings, target, σ and limit in a unit ten times as small: distances change by that factor, nothing else."""
    before = decided(drawn, procedure, alternative, level)
    after = decided(replace(drawn, places=drawn.places + powers), procedure, alternative, level)
    if procedure == "rule" and len(drawn.steps) >= 8 and drawn.places + powers < 0:
        assume(before.route.row != 8)
    same_numbers(after, before, procedure)
    same_offsets(after.test.offsets, before.test.offsets, float(Decimal(10) ** -powers))


@pytest.mark.parametrize("procedure", PROCEDURES)
@STEADY
@given(**cases, factor=st.integers(2, 97))
def test_a_factor_changes_units_only(procedure, drawn, alternative, level, factor):
    """Everything times a whole number: distances change by that factor, nothing else."""
    before = decided(drawn, procedure, alternative, level)
    times = replace(
        drawn,
        steps=tuple(factor * step for step in drawn.steps),
        offset=factor * drawn.offset,
        doubled_target=factor * drawn.doubled_target,
        sigma_steps=factor * drawn.sigma_steps,
        limit_steps=factor * drawn.limit_steps,
    )
    after = decided(times, procedure, alternative, level)
    same_numbers(after, before, procedure)
    same_offsets(after.test.offsets, before.test.offsets, factor)


@all_cases
@STEADY
@given(**cases)
def test_the_mirror_image_swaps_the_alternatives(procedure, drawn, alternative, level):
    """With all signs changed, "greater" and "less" change places, and so do tails, ends and critical values."""
    before = decided(drawn, procedure, alternative, level)
    mirrored = replace(
        drawn,
        steps=tuple(-step for step in drawn.steps),
        offset=-drawn.offset,
        doubled_target=-drawn.doubled_target,
    )
    after = decided(mirrored, procedure, MIRROR[alternative], level)
    test, other = after.test, before.test
    assert after.route.row == before.route.row
    assert (test.p_value, test.p_greater, test.p_less) == (other.p_value, other.p_less, other.p_greater)
    assert (test.reject, after.verdict) == (other.reject, before.verdict)
    total = {"signed_rank": sum(other.null_ranks) / 2, "sign": other.n_used}.get(test.procedure, 0.0)
    assert test.statistic == total - other.statistic
    lower, upper = other.critical
    assert test.critical == (None if upper is None else total - upper, None if lower is None else total - lower)
    value, low, high = other.offsets
    assert test.offsets == (-value, None if high is None else -high, None if low is None else -low)
    if after.equivalence is not None:
        assert after.equivalence.p_value == before.equivalence.p_value


@all_cases
@STEADY
@given(**cases, seed=st.integers(0, 2**32 - 1))
def test_the_order_of_the_readings_does_not_matter(procedure, drawn, alternative, level, seed):
    """The same readings in another order give the same numbers to the last bit."""
    before = decided(drawn, procedure, alternative, level)
    readings = np.random.default_rng(seed).permutation(np.array(drawn.readings)).tolist()
    after = decided(drawn, procedure, alternative, level, readings)
    assert after.route.row == before.route.row
    assert (after.test, after.equivalence, after.verdict) == (before.test, before.equivalence, before.verdict)
