"""Readings at the ends of what is computed: nothing ends in another exception, in nan, or in a contradiction."""

import json
from math import isfinite

import pytest
from drawn import ALTERNATIVES, CONTINUOUS, PROCEDURES, STEADY, close_to_level
from hypothesis import given
from hypothesis import strategies as st

from meanlab import Complaint, Question, ReadingSet, analyse
from meanlab.analysis.units import units_of

mantissas = st.integers(-(10**10), 10**10).map(lambda whole: f"{whole / 10**9:.9f}")
far_apart = st.builds(lambda mantissa, power: f"{mantissa}e{power}", mantissas, st.integers(-280, 280))
whole = st.integers(-(10**39), 10**39).map(str)
small = st.integers(-2, 2).map(str)


def close_together(power):
    """Return readings of about one size."""
    return st.lists(mantissas.map(lambda mantissa: f"{mantissa}e{power}"), min_size=1, max_size=14)


readings = st.one_of(
    st.lists(far_apart, min_size=1, max_size=12),
    st.lists(whole, min_size=1, max_size=12),
    st.lists(small, min_size=1, max_size=30),
    st.integers(-280, 280).flatmap(close_together),
)
numbers = st.one_of(far_apart, whole, small)
magnitudes = numbers.map(lambda text: text.lstrip("-")).filter(lambda text: float(text) > 0)


@STEADY
@given(
    texts=readings,
    target=numbers,
    procedure=st.sampled_from(["rule", "rule", *PROCEDURES]),
    alternative=st.sampled_from(ALTERNATIVES),
    level=st.sampled_from(["0.05", "0.01", "1e-6", "0.49"]),
    limit=st.none() | magnitudes,
    sigma=st.none() | magnitudes,
    target_u=st.none() | magnitudes,
)
def test_every_question_has_an_answer_without_a_contradiction(
    texts, target, procedure, alternative, level, limit, sigma, target_u
):
    """An Analysis whose p is in 0…1, agrees with its interval, and can be had as plain JSON."""
    question = {"equivalence_limit": limit, "target_uncertainty": target_u or "0"}
    if sigma or procedure == "z":
        question |= {"sigma": sigma or "1", "sigma_origin": "records"}
    found = analyse(texts, Question(target, alternative, level, procedure, **question))
    json.dumps(found.to_dict(), allow_nan=False)
    assert found.conclusion
    for test in (found.test, *found.others):
        if test is None or not hasattr(test, "p_value"):
            continue
        assert 0 <= test.p_value <= 1
        assert 0 <= test.p_greater <= 1
        assert 0 <= test.p_less <= 1
        low, high = test.offsets[1:]
        outside = (low is not None and low > 0) or (high is not None and high < 0)
        if test.procedure in CONTINUOUS and all(isfinite(end) for end in (low, high) if end is not None):
            assert outside == test.reject or close_to_level(test.p_value, level)
        assert not outside or test.reject or close_to_level(test.p_value, level)


def test_readings_of_1e299_have_finite_moments():
    """Sums, squares and cubes of the largest readings are whole numbers and cannot overflow."""
    found = analyse(["9e299", "8e299", "7e299", "9.5e299", "1e299"], Question("5e299"))
    assert found.summary.mean == pytest.approx(6.9e299, rel=1e-15)
    assert found.summary.s == pytest.approx(3.4351128e299, rel=1e-7)  # by hand: √(Σ(x − 6.9)²/4) = √11.8
    assert found.test.statistic == pytest.approx(1.9 / (3.4351128 / 5**0.5), rel=1e-7)


def test_readings_that_differ_in_the_40th_digit_scatter():
    """Forty digits are kept: what differs in the last of them is not identical."""
    texts = [f"1.{'0' * 38}{digit}" for digit in (1, 2, 4)]
    found = analyse(texts, Question(f"1.{'0' * 38}3"))
    assert found.route.procedure == "t"
    assert found.test.statistic == pytest.approx(-0.755928946018454, rel=1e-12)  # (7/3 − 3)/(√(7/3)/√3) = −2/√7


@pytest.mark.parametrize("level", ["0", "0.5", "1", "-0.05", "nan", "inf", "5 %", ""])
def test_a_level_outside_its_range_is_a_complaint(level):
    """0 < α < 0.5, as a number."""
    with pytest.raises(Complaint):
        Question("5", significance=level)


@pytest.mark.parametrize(
    "question",
    [
        *({"target": bad} for bad in ("nan", "inf", "1e999999", "five", "", "1e301", "1e-301", "1" * 41, None)),
        {"procedure": "z"},
        {"sigma": "0.1"},
        *({"sigma": bad, "sigma_origin": "records"} for bad in ("0", "-1", "nan")),
        *({"equivalence_limit": bad} for bad in ("0", "-1", "inf")),
        *({"target_uncertainty": bad} for bad in ("-0.1", "nan")),
        {"measurement_uncertainty": "-1"},
        {"alternative": "larger"},
        {"procedure": "median"},
        {"parameter": "mode"},
    ],
    ids=str,
)
def test_a_question_that_contradicts_itself_is_a_complaint(question):
    """The complaint says what was found; nothing else is raised."""
    with pytest.raises(Complaint):
        Question(**({"target": "5"} | question))


@pytest.mark.parametrize("values", [[], ["nan"], ["1e400"], [float("inf")], ["1", "two"], [None], ["1" * 61], [True]])
def test_readings_that_are_none_are_a_complaint(values):
    """No reading at all, or one that is no number, is complained of with its place."""
    with pytest.raises(Complaint):
        analyse(values, Question("5"))


def test_exact_sums_that_would_be_too_long_are_a_complaint():
    """32,000 readings that span 640 digits are more than 2·10⁷ digits: they are not computed."""
    texts = ("1e300", f"1.{'1' * 39}e-300", *["1"] * 32_000)
    with pytest.raises(Complaint, match="span 640 digits"):
        analyse(ReadingSet(texts), Question("1"))


@pytest.mark.parametrize(
    ("censored", "bounds"),
    [
        ([("below", "0.4")], (None, "0.3")),
        ([("above", "0.4")], ("0.3", None)),
        ([("below", "0.4"), ("below", "0.6")], (None, "0.4")),
        ([("below", None)], (None, None)),
        ([("below", "0.4"), ("above", "1e200")], (None, None)),
        ([("above", "1e200"), ("below", "0.4")], (None, None)),
    ],
)
def test_a_preparation_that_holds_a_limit_has_a_mean_between_bounds(censored, bounds):
    """0.2 and "<0.4" have a mean of at most 0.3; what has no limit, or limits on both sides, leaves an end open."""
    entries = tuple(
        {"index": place, "kind": kind, "limit": limit, "preparation": "b"}
        for place, (kind, limit) in enumerate(censored, 2)
    )
    readings = ReadingSet(("1.0", "0.2"), preparations=("a", "b"), censored=entries)
    spans = units_of(readings, Question("0.3")).spans
    found = spans.value(spans.lows[1]), spans.value(spans.highs[1])
    assert found == tuple(None if bound is None else float(bound) for bound in bounds)
