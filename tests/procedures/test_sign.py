"""The sign test against scipy's binomial test, and against every place that undecided units may have."""

from fractions import Fraction
from itertools import product
from math import comb, inf

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from made_samples import sample_of
from scipy import stats

from meanlab.procedures.sample import Spans
from meanlab.procedures.sign import count_sides, sign_test

STEADY = settings(max_examples=150, deadline=None, derandomize=True, database=None)
ALTERNATIVES = ("two-sided", "greater", "less")
LEVELS = (0.01, 0.05, 0.1, 0.25, 0.45)


def exact_p(alternative, below, above) -> Fraction:
    """Return p of the counts by whole numbers."""
    n = below + above
    greater = Fraction(sum(comb(n, k) for k in range(above, n + 1)), 2**n)
    less = Fraction(sum(comb(n, k) for k in range(above + 1)), 2**n)
    return {"greater": greater, "less": less, "two-sided": min(Fraction(1), 2 * min(greater, less))}[alternative]


@STEADY
@given(st.lists(st.integers(-4, 5), min_size=1, max_size=40), st.integers(-5, 6), st.sampled_from(ALTERNATIVES))
def test_p_is_that_of_the_binomial_test(values, target, alternative):
    """Readings equal to the target are left out; p is scipy's binomtest on the others, and the exact fraction."""
    below, above = sum(one < target for one in values), sum(one > target for one in values)
    test = sign_test(Spans.of(sample_of([str(one) for one in values], str(target))), alternative, 0.05)
    assert (test.n, test.n_used, test.statistic) == (len(values), below + above, above)
    assert Fraction(test.p_value) == exact_p(alternative, below, above)
    if below + above:
        expected = stats.binomtest(above, below + above, 0.5, alternative=alternative).pvalue
        assert test.p_value == pytest.approx(expected, rel=1e-12)


def placed_everywhere(counts, free: int, alternative: str, may_be_left_out: bool) -> list[Fraction]:
    """Return p for every place each of ``free`` units may have: below, above, and at the target where it may be."""
    places = product(("below", "above", "at") if may_be_left_out else ("below", "above"), repeat=free)
    chosen = {(place.count("below"), place.count("above")) for place in places}
    return [exact_p(alternative, counts.below + low, counts.above + high) for low, high in chosen]


@st.composite
def bounded_units(draw) -> Spans:
    """Draw plain, below-limit, above-limit and in-between units."""
    ends = []
    for _ in range(draw(st.integers(1, 11))):
        low, high = sorted((draw(st.integers(-3, 3)), draw(st.integers(-3, 3))))
        kind = draw(st.sampled_from(["plain", "plain", "plain", "below", "above", "between"]))
        ends.append({"plain": (low, low), "below": (-inf, high), "above": (low, inf), "between": (low, high)}[kind])
    lows, highs = (np.array(side, dtype=object) for side in zip(*ends, strict=True))
    return Spans(lows, highs, 0, 0)


@STEADY
@given(bounded_units(), st.sampled_from(ALTERNATIVES), st.sampled_from(LEVELS))
def test_undecided_units_are_tried_in_every_place(units, alternative, alpha):
    """The range of p is that over all places of the undecided units; a decision holds for all of them or is open."""
    counts = count_sides(units)
    test = sign_test(units, alternative, alpha)
    every_p = placed_everywhere(counts, counts.undecided, alternative, True)
    assert Fraction(test.p_value) == max(every_p)
    if counts.undecided:
        assert tuple(map(Fraction, test.p_range)) == (min(every_p), max(every_p))
    assert test.reject == (max(every_p) < Fraction(alpha))
    if not counts.tied:
        assert test.p_ties_against is None
        assert test.decided == (max(every_p) < Fraction(alpha) or min(every_p) >= Fraction(alpha))


@STEADY
@given(bounded_units(), st.sampled_from(ALTERNATIVES), st.sampled_from(LEVELS))
def test_readings_equal_to_the_target_can_take_a_rejection_back(units, alternative, alpha):
    """With ties p is also the largest over all places of the ties and undecided units; a rejection must stand both."""
    counts = count_sides(units)
    test = sign_test(units, alternative, alpha)
    if not counts.tied:
        return
    against = max(placed_everywhere(counts, counts.undecided + counts.tied, alternative, False))
    assert Fraction(test.p_ties_against) == against
    if test.reject:
        assert test.decided == (against < Fraction(alpha))
        assert any("rests on leaving out" in note for note in test.notes) == (against >= Fraction(alpha))


def test_many_ties_do_not_reject_on_the_other_side():
    """Ten above and thirty at the target: counted all below they would reject again, the other way; p is 1 between."""
    values = ["6"] * 10 + ["5"] * 30
    test = sign_test(Spans.of(sample_of(values, "5")), "two-sided", 0.05)
    assert test.p_value == 2 / 2**10
    assert test.reject
    assert test.p_ties_against == 1
    assert not test.decided


def test_a_below_limit_unit_is_below_when_its_limit_is_at_most_the_target():
    """ "<5" against 5 or more lies below; against less it may lie on either side; ">5" is the mirror image."""
    lows, highs = np.array([-inf, 5], dtype=object), np.array([5, inf], dtype=object)
    sides = {target: count_sides(Spans(lows, highs, target, 0)) for target in (4, 5, 6)}
    assert (sides[5].below, sides[5].above, sides[5].undecided) == (1, 1, 0)
    assert (sides[4].below, sides[4].above, sides[4].undecided) == (0, 1, 1)
    assert (sides[6].below, sides[6].above, sides[6].undecided) == (1, 0, 1)


def test_ten_unknown_readings_leave_the_decision_open():
    """Ten readings "<5" against 3: all on one side gives 2/2¹⁰ on either side, five and five gives 1."""
    units = Spans(np.array([-inf] * 10, dtype=object), np.array([5] * 10, dtype=object), 3, 0)
    test = sign_test(units, "two-sided", 0.05)
    assert test.p_range == (2 / 2**10, 1)
    assert not test.decided


@pytest.mark.parametrize(
    ("n", "lower", "attained"),
    [(5, None, 1), (6, 1, 0.96875), (8, 1, 0.9921875), (9, 2, 0.9609375), (10, 2, 0.978515625), (12, 3, 0.96142578125)],
)
def test_the_interval_of_the_median_takes_the_published_ranks(n, lower, attained):
    """95 % interval [x(c), x(n+1−c)]: ranks and exact coverage of the binomial tables (Conover 1999, from memory)."""
    test = sign_test(Spans.of(sample_of([str(place) for place in range(1, n + 1)], "0")), "two-sided", 0.05)
    expected = (None, None) if lower is None else (lower, n + 1 - lower)
    assert (test.interval.low, test.interval.high) == expected
    assert test.interval.attained == attained


@STEADY
@given(bounded_units(), st.sampled_from(ALTERNATIVES), st.sampled_from(LEVELS))
def test_the_interval_of_bounded_units_encloses_every_interval_they_may_have(units, alternative, alpha):
    """The ends are the smallest and largest over every value at one of its bounds; an open bound gives no end."""
    enclosing = sign_test(units, alternative, alpha).interval
    lows, highs = [], []
    for side in (units.lows, units.highs):
        finite = np.array([{-inf: -(10**6), inf: 10**6}.get(one, one) for one in side], dtype=object)
        interval = sign_test(Spans(finite, finite, 0, 0), alternative, alpha).interval
        lows.append(interval.low)
        highs.append(interval.high)

    def known(end):
        return None if end is None or abs(end) == 10**6 else end

    assert enclosing.low == (known(min(lows)) if None not in lows else None)
    assert enclosing.high == (known(max(highs)) if None not in highs else None)


@STEADY
@given(st.lists(st.integers(-9, 9), min_size=1, max_size=30), st.sampled_from(ALTERNATIVES), st.sampled_from(LEVELS))
def test_targets_outside_the_interval_are_rejected_and_inside_are_not(values, alternative, alpha):
    """Strictly outside p < α, strictly inside p ≥ α, whatever readings are equal to the target."""
    units = Spans.of(sample_of([str(2 * one) for one in values], "0"))
    interval = sign_test(units, alternative, alpha).interval
    for target in range(-22, 23):
        rejects = sign_test(units.at(target), alternative, alpha).reject
        low, high = (interval.low, interval.high)
        if (low is not None and target < low) or (high is not None and target > high):
            assert rejects
        elif (low is None or target > low) and (high is None or target < high):
            assert not rejects
