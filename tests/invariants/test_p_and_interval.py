"""p ⇔ interval ⇔ critical value ⇔ rejection ⇔ verdict ⇔ sentence ⇔ picture, for every procedure and alternative."""

import pytest
from drawn import ALTERNATIVES, CONTINUOUS, LEVELS, PROCEDURES, STEADY, close_to_level, drawn_readings, least_readings
from hypothesis import assume, given
from hypothesis import strategies as st

from meanlab import analyse
from meanlab.analysis import decide
from meanlab.core.readings import ReadingSet
from meanlab.pictures.null_law import drawn_statistic, null_law
from meanlab.procedures.signed_rank import null_distribution
from meanlab.wording import verdict_word

all_cases = pytest.mark.parametrize("procedure", PROCEDURES)


def outcome_of(drawn, procedure, alternative, level, **more):
    """Return the test of a procedure fixed by the written method."""
    assume(len(drawn.steps) >= least_readings(procedure))
    found = decide(ReadingSet(tuple(drawn.readings)), drawn.question(procedure, alternative, level, **more))
    assert found.test is not None
    return found.test


@all_cases
@STEADY
@given(drawn=drawn_readings(), alternative=st.sampled_from(ALTERNATIVES), level=st.sampled_from(LEVELS))
def test_the_target_lies_outside_the_interval_where_p_is_below_the_level(procedure, drawn, alternative, level):
    """Continuous procedures: outside ⇔ p < α. Counting ones: strictly outside ⇒ p < α, strictly inside ⇒ p ≥ α."""
    test = outcome_of(drawn, procedure, alternative, level)
    _, low, high = test.offsets
    outside = (low is not None and low > 0) or (high is not None and high < 0)
    inside = (low is None or low < 0) and (high is None or high > 0)
    assert test.reject == (test.p_value < float(level))
    if procedure in CONTINUOUS:
        assert outside == test.reject or close_to_level(test.p_value, level)
    else:
        assert not outside or test.reject
        assert not inside or not test.reject


@all_cases
@STEADY
@given(drawn=drawn_readings(), alternative=st.sampled_from(ALTERNATIVES), level=st.sampled_from(LEVELS))
def test_the_statistic_lies_beyond_a_critical_value_where_p_is_below_the_level(procedure, drawn, alternative, level):
    """Statistic ≤ lower or ≥ upper critical value ⇔ p < α, exactly for counting procedures; each keeps its sides."""
    test = outcome_of(drawn, procedure, alternative, level)
    lower, upper = test.critical
    beyond = (lower is not None and test.statistic <= lower) or (upper is not None and test.statistic >= upper)
    assert beyond == test.reject or (procedure in CONTINUOUS and close_to_level(test.p_value, level))
    assert lower is None or alternative != "greater"
    assert upper is None or alternative != "less"
    if procedure in CONTINUOUS:
        assert (lower is None, upper is None) == (alternative == "greater", alternative == "less")
    else:
        possible = test.smallest_p < float(level)
        assert ((lower, upper) != (None, None)) == possible
    assert test.smallest_p <= test.p_value


@all_cases
@STEADY
@given(drawn=drawn_readings(), alternative=st.sampled_from(ALTERNATIVES), level=st.sampled_from(LEVELS))
def test_the_interval_has_the_ends_of_its_alternative_and_holds_the_estimate(procedure, drawn, alternative, level):
    """One-sided intervals lack the end of their side; ends lie about the estimate, and offsets agree with them."""
    test = outcome_of(drawn, procedure, alternative, level)
    interval, (value, low, high) = test.interval, test.offsets
    assert alternative != "greater" or interval.high is None
    assert alternative != "less" or interval.low is None
    if procedure in CONTINUOUS and alternative == "two-sided":
        assert None not in (interval.low, interval.high)
    assert low is None or low <= value
    assert high is None or value <= high
    target = float(drawn.target)
    for end, offset in ((test.estimate, value), (interval.low, low), (interval.high, high)):
        assert (end is None) == (offset is None)
        assert end is None or end == pytest.approx(target + offset, rel=1e-12, abs=1e-12 * abs(target))
    assert interval.level == 1 - float(level)
    assert interval.attained >= interval.level - 1e-12


@all_cases
@STEADY
@given(drawn=drawn_readings())
def test_a_stricter_level_gives_a_wider_interval(procedure, drawn):
    """The interval of a smaller α encloses that of a larger one; p does not depend on α."""
    tests = [outcome_of(drawn, procedure, "two-sided", level) for level in LEVELS]
    assert len({test.p_value for test in tests}) == 1
    inf = float("inf")
    lows = [-inf if test.offsets[1] is None else test.offsets[1] for test in tests]
    highs = [inf if test.offsets[2] is None else test.offsets[2] for test in tests]
    assert lows == sorted(lows)
    assert highs == sorted(highs, reverse=True)


@all_cases
@STEADY
@given(drawn=drawn_readings())
def test_one_sided_p_values_belong_to_each_other(procedure, drawn):
    """Two-sided p = min(1, 2·min of the tails); the tails add up to 1, for counts to 1 + P(observed)."""
    by_side = {alternative: outcome_of(drawn, procedure, alternative, "0.05") for alternative in ALTERNATIVES}
    both, greater, less = (by_side[alternative] for alternative in ALTERNATIVES)
    assert len({test.statistic for test in by_side.values()}) == 1
    assert len({(test.p_greater, test.p_less) for test in by_side.values()}) == 1
    assert (greater.p_value, less.p_value) == (both.p_greater, both.p_less)
    assert both.p_value == min(1, 2 * min(greater.p_value, less.p_value))
    total = both.p_greater + both.p_less
    if procedure == "guarded_t":
        assert total >= 1 - 1e-12
    elif procedure in CONTINUOUS:
        assert total == pytest.approx(1, abs=1e-12)
    elif procedure == "signed_rank":
        assert total == pytest.approx(1 + null_distribution(both.null_ranks)[round(2 * both.statistic)], abs=1e-12)
    else:
        bars = {bar.low + 0.5: bar.probability for bar in null_law(both).bars}
        assert total == pytest.approx(1 + bars[both.statistic], abs=1e-12)


@all_cases
@STEADY
@given(drawn=drawn_readings(), alternative=st.sampled_from(ALTERNATIVES), level=st.sampled_from(LEVELS))
def test_the_shaded_region_of_the_picture_is_where_p_rejects(procedure, drawn, alternative, level):
    """The statistic is drawn in a shaded region ⇔ rejected; the regions have the probability of their tails."""
    test = outcome_of(drawn, procedure, alternative, level)
    law, each = null_law(test), float(level) / (2 if alternative == "two-sided" else 1)
    place = drawn_statistic(test, law)
    assert any(region.holds(place) for region in law.regions) == test.reject
    assert place == pytest.approx(test.statistic, rel=1e-12, abs=1e-12)
    for region in law.regions:
        if procedure in ("z", "t"):
            assert region.area == pytest.approx(each, rel=1e-9)
        else:
            assert region.area <= each * (1 + 1e-9)
    shaded = {bar.rejects for bar in law.bars if bar.low <= test.statistic <= bar.high}
    assert not law.bars or shaded == {test.reject}


SAYS_DIFFERS = {"two-sided": ("differs from",), "greater": ("exceeds",), "less": ("falls below",)}
SAYS_AGREES = {
    "two-sided": ("agrees within",),
    "greater": (", lies below the", "does not exceed the"),
    "less": (", lies above the", "does not fall below the"),
}


@all_cases
@STEADY
@given(
    drawn=drawn_readings(),
    alternative=st.sampled_from(ALTERNATIVES),
    level=st.sampled_from(("0.01", "0.05", "0.25")),
    limited=st.booleans(),
)
def test_verdict_and_sentence_follow_the_rejection(procedure, drawn, alternative, level, limited):
    """The verdict says "differs" ⇔ rejected (unless that rests on ties); the sentence says the verdict's words."""
    assume(len(drawn.steps) >= least_readings(procedure))
    more = {"equivalence_limit": drawn.size(drawn.limit_steps)} if limited else {}
    found = analyse(drawn.readings, drawn.question(procedure, alternative, level, **more))
    assert found.verdict.startswith("differs") == (found.test.reject and found.test.decided)
    assert found.test.decided or procedure == "sign"
    within = found.equivalence is not None and found.equivalence.within
    assert (found.verdict == "agrees") == (within and not found.test.reject)
    sentence = found.conclusion
    assert any(word in sentence for word in SAYS_DIFFERS[alternative]) == found.verdict.startswith("differs")
    assert any(word in sentence for word in SAYS_AGREES[alternative]) == (found.verdict == "agrees")
    assert ("Cannot tell" in sentence) == (found.verdict == "cannot tell") == (verdict_word(found) == "cannot tell")
    assert drawn.target in sentence
