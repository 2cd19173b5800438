"""The rule that picks the procedure: the first row that fits decides, and what a row looks at is computed elsewhere."""

import warnings

import numpy as np
import pytest
from drawn import ALTERNATIVES, STEADY, drawn_readings
from hypothesis import given
from hypothesis import strategies as st
from scipy import stats

from meanlab import Question, ReadingSet, analyse
from meanlab.analysis import decide
from meanlab.route import RULE

KNOWN = {"sigma": "0.1", "sigma_origin": "records of 2026"}
BELOW = ({"index": 0, "kind": "below", "limit": "0.05"},)
CENSORED = ReadingSet(("0.2", "0.3", "0.1", "0.4", "0.2", "0.3", "0.5", "0.2"), censored=BELOW)

# invented readings of each kind
NORMAL = ["5.021", "5.043", "4.987", "5.012", "5.031", "4.998", "5.006", "5.052", "4.969", "5.017"]
FAR = ["5.021", "5.043", "4.987", "5.012", "5.031", "4.998", "5.006", "5.052", "4.969", "6.017"]
SKEWED = ["0.11", "0.12", "0.14", "0.17", "0.21", "0.26", "0.35", "0.52", "0.94", "2.11"]
BOTH_ENDS = ["1.013", "1.021", "1.034", "1.042", "1.055", "8.911", "8.923", "8.938", "8.944", "8.957"]
COARSE = ["5.0", "5.1", "5.0", "5.2", "5.1", "5.0", "5.1", "5.1"]
MANY_SKEWED = [f"{value:.4f}" for value in np.random.default_rng(1).exponential(1, 400)]

# the rows of the rule, each with readings and a question that fit it and, where they can, later rows too
ROWS = {
    "below-limit readings go before a known σ": (CENSORED, KNOWN, 0, "sign"),
    "below-limit readings go before the median": (CENSORED, {"parameter": "median"}, 0, "sign"),
    "a known σ goes before one reading": (["5.0"], KNOWN, 2, "z"),
    "a known σ goes before identical readings": (["5.0", "5.0"], KNOWN, 2, "z"),
    "a known σ goes before the median": (NORMAL, KNOWN | {"parameter": "median"}, 2, "z"),
    "one reading": (["5.0"], {"parameter": "median"}, 3, None),
    "identical readings go before the median": (["5.0"] * 9, {"parameter": "median"}, 4, None),
    "identical readings": (["5.0", "5.0"], {}, 4, None),
    "the median goes before two readings": (["5.0", "5.1"], {"parameter": "median"}, 5, "sign"),
    "the median": (NORMAL, {"parameter": "median"}, 5, "sign"),
    "two readings": (["5.0", "5.1"], {}, 6, "t"),
    "three readings": (["5.0", "5.1", "5.3"], {}, 7, "t"),
    "few readings, whatever their shape": (SKEWED[3:], {}, 7, "t"),
    "a coarse step goes before the test of normality": (COARSE, {}, 8, "t"),
    "a declared step counts": (NORMAL, {"resolution": "0.05"}, 8, "t"),
    "no evidence against normality": (NORMAL, {}, 9, "t"),
    "enough readings for their skewness": (MANY_SKEWED, {}, 10, "t"),
    "not normal, not skewed": (BOTH_ENDS, {}, 11, "signed_rank"),
    "not skewed, but the level is out of reach of ranks": (BOTH_ENDS, {"significance": "0.001"}, 11, "t"),
    "not skewed, uncertain target": (BOTH_ENDS, {"target_uncertainty": "0.1"}, 11, "t"),
    "skewed": (SKEWED, {}, 12, "guarded_t"),
    "one far value": (FAR, {}, 12, "guarded_t"),
    "skewed, uncertain target": (SKEWED, {"target_uncertainty": "0.1"}, 12, "t"),
}


def test_the_rows_stand_in_their_order():
    """The table is read from the top; row 1, the procedure fixed by the written method, goes before all others."""
    assert [row.number for row in RULE] == [0, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12]


@pytest.mark.parametrize(("readings", "question", "row", "procedure"), ROWS.values(), ids=ROWS)
def test_the_first_row_that_fits_decides(readings, question, row, procedure):
    """Readings that fit several rows are judged by the first of them."""
    target = "0.3" if readings is CENSORED else "5.0"
    route = analyse(readings, Question(target, **question)).route
    # readings below a limit may leave the decision open: the row is the same
    assert (route.row, route.procedure) == (row, procedure)
    assert not route.fixed
    assert route.reasons


@pytest.mark.parametrize(
    ("n", "step_in_s", "coarse"),
    [
        *((8, 0.301, True), (8, 0.299, False), (30, 0.301, True), (30, 0.299, False)),
        *((31, 0.201, True), (31, 0.199, False), (60, 0.201, True), (60, 0.199, False)),
        *((61, 0.101, True), (61, 0.099, False), (100, 0.101, True), (100, 0.099, False)),
    ],
)
def test_a_step_is_coarse_by_the_number_of_readings(n, step_in_s, coarse):
    """Row 8 from r/s above 0.3 up to 30 readings, 0.2 up to 60, 0.1 beyond; below that the shape is examined."""
    readings = [f"{value:.6f}" for value in stats.norm.ppf((np.arange(n) + 0.5) / n)]
    s = np.std(np.array(readings, dtype=float), ddof=1)
    route = analyse(readings, Question("0.1", resolution=f"{step_in_s * s:.9f}")).route
    assert route.row == (8 if coarse else 9)


def test_enough_readings_are_28_and_25_times_the_square_of_the_skewness():
    """Row 10 just where n ≥ 28 + 25 g₁², by scipy's g₁, for sets that do not look normal."""
    n, tried = 60, {True: 0, False: 0}
    x = np.random.default_rng(20261201).gamma(2.5, 1, (3000, n)).round(6)
    room = n - 28 - 25 * stats.skew(x, axis=1) ** 2
    for place in np.flatnonzero(np.abs(room) < 0.5):
        if stats.shapiro(x[place]).pvalue < 0.04:
            enough = bool(room[place] >= 0)
            row = decide(ReadingSet(tuple(f"{value:.6f}" for value in x[place])), Question("2.5")).route.row
            assert (row == 10) == enough
            tried[enough] += 1
    assert min(tried.values()) >= 3


def test_below_limit_readings_that_leave_the_decision_open_are_not_testable():
    """Ten "<5" against 3 may all lie on one side or half on each: no test, and the reason names both p."""
    censored = tuple({"index": place, "kind": "below", "limit": "5"} for place in range(10))
    found = analyse(ReadingSet((), censored=censored), Question("3"))
    assert (found.verdict, found.route.procedure, found.route.row) == ("not testable", None, 0)
    assert "from 0.002 to 1" in found.route.reasons[0]


def test_a_rejection_that_rests_on_ties_cannot_tell_also_beside_below_limit_readings():
    """One "<6" that may lie anywhere does not matter here, one reading equal to the target does: p 0.0215, or 0.065."""
    censored = ({"index": 0, "kind": "below", "limit": "6"},)
    readings = ReadingSet((*(f"5.{digit}" for digit in "123456789"), "5.0"), censored=censored)
    found = analyse(readings, Question("5.0"))
    assert (found.verdict, found.route.procedure) == ("cannot tell", "sign")
    # two-sided p of 1 against 9, and of 2 against 9, by whole numbers
    assert (found.test.p_value, found.test.p_ties_against) == (22 / 1024, 134 / 2048)
    assert "rests on leaving out readings equal to the target" in found.conclusion


def test_one_preparation_is_not_testable_whatever_is_fixed():
    """The scatter between preparations is unknown with one of them, also with a fixed procedure or a known σ."""
    one = ReadingSet(("5.0", "5.1", "5.2"), preparations=("a", "a", "a"))
    for question in ({}, {"procedure": "t"}, KNOWN, {"parameter": "median"}):
        found = analyse(one, Question("5.0", **question))
        assert (found.verdict, found.route.procedure, found.test) == ("not testable", None, None)
        assert found.summary.n == 1


FIXED = {
    "z from one reading": (["5.0"], KNOWN, "z", True),
    "t from two": (["5.0", "5.1"], {}, "t", True),
    "t not from one": (["5.0"], {}, "t", False),
    "t not from identical ones": (["5.0"] * 4, {}, "t", False),
    "guarded t from three": (["5.0", "5.1", "5.3"], {}, "guarded_t", True),
    "guarded t not from two": (["5.0", "5.1"], {}, "guarded_t", False),
    "signed rank not from identical ones": (["5.0"] * 4, {}, "signed_rank", False),
    "signed rank from two": (["5.0", "5.1"], {}, "signed_rank", True),
    "sign not from identical ones": (["5.0"] * 4, {}, "sign", False),
    "sign from two": (["5.0", "5.1"], {}, "sign", True),
    "sign takes below-limit readings": (CENSORED, {}, "sign", True),
    **{f"{name} takes none": (CENSORED, KNOWN, name, False) for name in ("z", "t", "guarded_t", "signed_rank")},
}


@pytest.mark.parametrize(("readings", "question", "procedure", "can"), FIXED.values(), ids=FIXED)
def test_a_fixed_procedure_is_used_where_it_can_run(readings, question, procedure, can):
    """Row 1: the written method's procedure, or "not testable" with the reason and the rule's own among the others."""
    target = "0.25" if readings is CENSORED else "4.9"
    found = analyse(readings, Question(target, procedure=procedure, **question))
    assert (found.route.fixed, found.route.row) == (True, 1)
    assert found.route.procedure == (procedure if can else None)
    assert (found.verdict != "not testable") == can
    by_rule = analyse(readings, Question(target, **question)).route.procedure
    if not can and by_rule is not None:
        assert by_rule in [other.procedure for other in found.others if hasattr(other, "p_value")]


def rows_8_to_12(readings, resolution: float | None) -> tuple[int, bool]:
    """Return the row for n ≥ 8 by scipy's own figures, and whether one of them is too close to its bound to tell."""
    x = np.array([float(text) for text in readings])
    x = (x - x[0]) / np.abs(x - x[0]).max()
    n, s = len(x), x.std(ddof=1)
    if resolution is not None and resolution / s > (0.3 if n <= 30 else 0.2 if n <= 60 else 0.1):
        return 8, abs(resolution / s - 0.3) < 1e-6
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        p, g1, skew_p = stats.shapiro(x).pvalue, stats.skew(x), stats.skewtest(x).pvalue
    close = abs(p - 0.05) < 1e-4 or abs(n - 28 - 25 * g1**2) < 1e-6 or abs(skew_p - 0.05) < 1e-6
    if p > 0.05:
        return 9, close
    if n >= 28 + 25 * g1**2:
        return 10, close
    return (11, close) if skew_p > 0.05 else (12, close)


@STEADY
@given(drawn=drawn_readings(fewest=8, most=60), alternative=st.sampled_from(ALTERNATIVES))
def test_the_row_is_the_one_that_scipys_figures_give(drawn, alternative):
    """From 8 readings on the row follows from the figures of scipy 1.17: Shapiro–Wilk, g₁ and the skewness test."""
    route = decide(ReadingSet(tuple(drawn.readings)), drawn.question("rule", alternative)).route
    steps = np.array(drawn.steps)
    grid = np.gcd.reduce(np.abs(np.diff(steps)))
    widest = np.abs(steps - steps[0]).max()
    row, close = rows_8_to_12([str(step) for step in drawn.steps], float(grid) / widest)
    assert route.row == row or close


def test_the_step_of_the_readings():
    """r is declared, else the finest place typed, from 8 readings on their common grid; computed numbers have none."""
    tens = ["850", "740", "900", "1070", "930", "850", "950", "980"]
    assert analyse(tens, Question("900")).summary.resolution == 10
    assert analyse(tens[:7], Question("900")).summary.resolution == 1
    assert analyse(NORMAL, Question("5")).summary.resolution == 0.001
    assert analyse(NORMAL, Question("5", resolution="0.002")).summary.resolution == 0.002
    assert analyse([0.1 + 0.2, 1 / 3, 2 / 3], Question("5")).summary.resolution is None
    means = ReadingSet(("5.1", "5.2", "5.3", "5.4"), preparations=("a", "a", "b", "b"))
    assert analyse(means, Question("5")).summary.resolution == 0.05
