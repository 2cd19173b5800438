"""Agreement within the limit, and the verdict of rejection and agreement together."""

import pytest
from drawn import ALTERNATIVES, CONTINUOUS, PROCEDURES, STEADY, drawn_readings, least_readings
from hypothesis import assume, given
from hypothesis import strategies as st
from scipy import stats

from meanlab import Question, analyse
from meanlab.analysis import decide
from meanlab.core.readings import ReadingSet
from meanlab.wording import verdict_word

all_cases = pytest.mark.parametrize("procedure", PROCEDURES)
LEVELS = ("0.01", "0.05", "0.1", "0.2")

# rejects, inside the limit, limit given → verdict; one-sided questions without a limit have E = 0
VERDICTS_TWO_SIDED = {
    (True, False, False): "differs",
    (True, False, True): "differs",
    (True, True, True): "differs, within the limit",
    (False, True, True): "agrees",
    (False, False, True): "cannot tell",
    (False, False, False): "cannot tell",
}
VERDICTS_ONE_SIDED = {
    (True, False, False): "differs",
    (True, False, True): "differs",
    (True, True, True): "differs, within the limit",
    (False, True, True): "agrees",
    (False, True, False): "agrees",
    (False, False, True): "cannot tell",
    (False, False, False): "cannot tell",
}
# what is printed for it
WORDS = {
    ("two-sided", "differs"): "differs",
    ("greater", "differs"): "exceeds",
    ("less", "differs"): "falls below",
    ("two-sided", "differs, within the limit"): "by less than",
    ("greater", "differs, within the limit"): "exceeds, by less than",
    ("less", "differs, within the limit"): "falls below, by less than",
    ("two-sided", "agrees"): "agrees within ±",
    ("greater", "agrees"): ("lies below the", "does not exceed the"),
    ("less", "agrees"): ("lies above the", "does not fall below the"),
}


def close(one, other, scale):
    """Tell whether two numbers agree but for their last digits."""
    return abs(one - other) <= 1e-9 * max(abs(one), abs(other), abs(scale))


def decided(drawn, procedure, alternative, level, **more):
    """Return the heart of the analysis, and its exact target and limit as doubles."""
    assume(len(drawn.steps) >= least_readings(procedure))
    return decide(ReadingSet(tuple(drawn.readings)), drawn.question(procedure, alternative, level, **more))


@all_cases
@STEADY
@given(drawn=drawn_readings(), level=st.sampled_from(LEVELS))
def test_agreement_is_the_interval_of_twice_the_level_inside_the_limits(procedure, drawn, level):
    """Two-sided: p_E < α ⇔ the (1 − 2α) interval lies strictly within target ± E; on an end p decides."""
    found = decided(drawn, procedure, "two-sided", level, equivalence_limit=drawn.size(drawn.limit_steps))
    agreement, target, limit = found.equivalence, float(drawn.target), float(drawn.size(drawn.limit_steps))
    assert agreement.within == (agreement.p_value < float(level))
    assert agreement.level == 1 - 2 * float(level)
    assert agreement.limit == limit
    low, high = agreement.low, agreement.high
    on_an_end = any(
        end is not None and close(end - target, side, target) for end, side in ((low, -limit), (high, limit))
    )
    if not on_an_end:
        inside = low is not None and high is not None and target - limit < low and high < target + limit
        assert agreement.within == inside


@all_cases
@STEADY
@given(drawn=drawn_readings(), level=st.sampled_from(LEVELS))
def test_agreement_is_two_one_sided_tests_at_the_limits(procedure, drawn, level):
    """p_E is the larger of p(greater) at target − E and p(less) at target + E (Schuirmann 1987), asked separately."""
    limit = drawn.size(drawn.limit_steps)
    agreement = decided(drawn, procedure, "two-sided", level, equivalence_limit=limit).equivalence
    sides = []
    for shift, alternative in ((-drawn.limit_steps, "greater"), (drawn.limit_steps, "less")):
        moved = type(drawn)(**{**vars(drawn), "doubled_target": drawn.doubled_target + 2 * shift})
        sides.append(decided(moved, procedure, alternative, level).test)
    assert agreement.p_value == max(test.p_value for test in sides)
    assert agreement.within == all(test.reject for test in sides)


@all_cases
@STEADY
@given(drawn=drawn_readings(), level=st.sampled_from(LEVELS), alternative=st.sampled_from(("greater", "less")))
def test_one_sided_agreement_is_the_opposite_question_at_the_limit(procedure, drawn, level, alternative):
    """One-sided: p_E is the opposite one-sided p at target ± E (E = 0 if none), beside the opposite (1 − α) bound."""
    sign, opposite = (1, "less") if alternative == "greater" else (-1, "greater")
    for steps in (0, drawn.limit_steps):
        more = {"equivalence_limit": drawn.size(steps)} if steps else {}
        agreement = decided(drawn, procedure, alternative, level, **more).equivalence
        moved = type(drawn)(**{**vars(drawn), "doubled_target": drawn.doubled_target + 2 * sign * steps})
        other = decided(moved, procedure, opposite, level).test
        assert agreement.p_value == other.p_value
        assert agreement.within == other.reject
        assert agreement.limit == float(drawn.size(steps))
        assert agreement.level == 1 - float(level)
        for end, expected in ((agreement.low, other.interval.low), (agreement.high, other.interval.high)):
            assert (end is None) == (expected is None)
            assert end is None or close(end, expected, float(drawn.target))


@all_cases
@STEADY
@given(drawn=drawn_readings(), level=st.sampled_from(LEVELS), alternative=st.sampled_from(ALTERNATIVES))
def test_the_verdict_is_that_of_the_table(procedure, drawn, level, alternative):
    """Rejection and agreement give the verdict of the table, with and without a limit, and its printed words."""
    for limited in (False, True):
        more = {"equivalence_limit": drawn.size(drawn.limit_steps)} if limited else {}
        assume(len(drawn.steps) >= least_readings(procedure))
        found = analyse(drawn.readings, drawn.question(procedure, alternative, level, **more))
        within = found.equivalence is not None and found.equivalence.within
        table = VERDICTS_TWO_SIDED if alternative == "two-sided" else VERDICTS_ONE_SIDED
        expected = table[found.test.reject, within and (limited or not found.test.reject), limited]
        assert found.verdict == (expected if found.test.decided else "cannot tell")
        words = WORDS.get((alternative, found.verdict), "cannot tell")
        assert any(word in verdict_word(found) for word in ((words,) if isinstance(words, str) else words))


@pytest.mark.parametrize("procedure", ["guarded_t", "signed_rank", "sign"])
@pytest.mark.parametrize("alternative", ALTERNATIVES)
def test_an_uncertain_target_leaves_shape_proof_procedures_without_a_verdict(procedure, alternative):
    """Where u₀ cannot be taken in there is no agreement, and the verdict is at best "cannot tell"."""
    readings = ["9.1", "9.2", "9.2", "9.3", "9.3", "9.4", "9.1", "9.2"]
    for target in ("5.0", "9.2", "14.0"):
        for limit in (None, "1.0"):
            question = {"procedure": procedure, "alternative": alternative, "equivalence_limit": limit}
            found = _analyse(readings, target, target_uncertainty="0.1", **question)
            assert found.equivalence is None
            assert found.verdict == "cannot tell"
            assert _analyse(readings, target, **question).verdict != found.verdict or target == "9.2" or not limit


def _analyse(readings, target, **question):
    return analyse(readings, Question(target, **question))


@pytest.mark.parametrize("procedure", CONTINUOUS)
def test_with_endless_readings_each_claim_has_at_most_its_risk(procedure):
    """The interval for agreement lies inside the interval of the test: agreement and difference can both be shown."""
    readings = [f"5.0{digit}" for digit in "23142324135"]
    sigma = {"sigma": "0.012", "sigma_origin": "records"} if procedure == "z" else {}
    found = _analyse(readings, "5.00", procedure=procedure, equivalence_limit="0.05", **sigma)
    assert found.test.interval.low < found.equivalence.low < found.equivalence.high < found.test.interval.high
    assert found.verdict == "differs, within the limit"


def test_agreement_of_readings_below_a_limit_takes_the_worst_place_of_each():
    """Sign with below-limit readings: what is undecided at target − E or + E counts against agreement there."""
    censored = tuple({"index": place, "kind": "below", "limit": "0.30"} for place in range(3))
    readings = ReadingSet(tuple(f"0.4{digit}" for digit in "0123456789"), censored=censored)
    question = Question("0.45", equivalence_limit="0.20", significance="0.05")
    found = decide(readings, question)
    # at 0.25 three "<0.30" may lie below: 10 of 13 above; at 0.65 all 13 lie below
    assert found.equivalence.p_value == pytest.approx(stats.binomtest(10, 13, alternative="greater").pvalue, rel=1e-12)
    assert found.equivalence.within
    assert found.verdict == "agrees"
    low = ReadingSet(
        (*(f"0.1{digit}" for digit in "123456"), *(f"0.4{digit}" for digit in "012345")), censored=censored
    )
    agreement = decide(low, question).equivalence
    # at 0.25 six lie below, and the three "<0.30" may: 6 of 15 above
    assert agreement.p_value == pytest.approx(stats.binomtest(6, 15, alternative="greater").pvalue, rel=1e-12)
    assert not agreement.within
