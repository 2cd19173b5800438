"""Which checks are made when, their outcomes, and that each says what it can and cannot see."""

import re
import time
from math import inf

import numpy as np
import pytest
from facts_for_checks import check_of, facts_of
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy import stats

from meanlab.checks import Facts, all_checks
from meanlab.core.question import Question
from meanlab.wording.names import CHECK_TITLES

EIGHT = [5.01, 5.03, 4.98, 5.02, 5.05, 4.99, 5.00, 5.04]
ORDER = ["normality", "far readings", "run order", "resolution", "enough readings", "units", "sigma"]
SKEWED = [1, 1.1, 1.2, 1.25, 1.3, 1.5, 1.9, 2.6, 4.1, 9.5]


def names(x, **given):
    """Return the names of the checks that are made."""
    return [check.name for check in all_checks(np.asarray(x, dtype=float), facts_of(x, **given))]


def test_names_and_order_are_those_of_the_page():
    """With everything asked, all seven checks are made, in the order of the page, each with a title."""
    assert names(EIGHT, run_order=True, sigma="0.02", sigma_origin="chart") == ORDER
    assert list(CHECK_TITLES) == ORDER


@pytest.mark.parametrize("n", range(3, 12))
def test_normality_and_far_readings_are_always_there(n):
    """From 3 readings that scatter both checks are made, with W and G as their statistics."""
    x = np.arange(n, dtype=float) ** 1.5
    W, G = check_of("normality", x), check_of("far readings", x)
    assert W.statistic == pytest.approx(stats.shapiro(x).statistic, rel=1e-9)
    assert W.p_value == pytest.approx(stats.shapiro(x).pvalue, rel=1e-4)
    assert G.statistic == pytest.approx(np.max(np.abs(x - x.mean())) / x.std(ddof=1), rel=1e-12)


def test_two_readings_have_a_distance_but_no_shape():
    """Two readings that scatter have a G and no look at the shape."""
    assert "normality" not in names([5.0, 5.1])
    assert check_of("far readings", [5.0, 5.1]).outcome == "note"


def test_identical_readings_have_neither_shape_nor_distance():
    """Identical readings leave resolution and units, and resolution is a caution that names step/√12 (GUM F.2.2.1)."""
    assert names([5.0, 5.0, 5.0], smallest_p=None) == ["resolution", "units"]
    check = check_of("resolution", [5.0, 5.0, 5.0], resolution=0.1, smallest_p=None)
    assert check.outcome == "caution"
    assert "0.029" in check.message  # 0.1/√12 = 0.02887


def test_censored_readings_leave_counts_and_units():
    """Without plain units only the checks that need none are made."""
    facts = Facts(Question("5"), 10, None, 0.1, tuple((i,) for i in range(10)), ".", "", 0.002)
    assert [check.name for check in all_checks(None, facts)] == ["enough readings", "units"]


def test_one_sentence_each():
    """Every message is one sentence, and none of the words that claim too much is in it."""
    for x in (EIGHT, SKEWED, [5.0, 5.1, 5.3], [5.0] * 4, [*EIGHT, 9.0]):
        for sigma in ({}, {"sigma": "0.0001", "sigma_origin": "chart"}, {"sigma": "9", "sigma_origin": "chart"}):
            for check in all_checks(np.asarray(x), facts_of(x, run_order=True, **sigma)):
                assert check.message.endswith(".")
                assert not re.search(r"\.\s+[A-Z]", check.message), check.message
                assert not re.search(r"\b(accept|no difference|compl|passed|failed|OK|proven)", check.message)
                assert "nan" not in check.message


def test_a_clear_tick_says_what_it_is_worth():
    """Beside no evidence against normality stands how often a log-normal shape is noticed at this n."""
    for n, share in ((5, "15 %"), (8, "31 %"), (12, "48 %")):
        check = check_of("normality", stats.norm.ppf((np.arange(1, n + 1) - 0.375) / (n + 0.25)), resolution=None)
        assert check.outcome == "clear"
        assert "not evidence for it" in check.message
        assert share in check.message
    three = check_of("normality", [1.0, 2.0, 3.1], resolution=None)
    assert "93 %" in three.message


def test_a_skewed_shape_is_a_caution():
    """Readings far from normal raise a caution with p below 5 %."""
    check = check_of("normality", SKEWED)
    assert check.outcome == "caution"
    assert check.p_value < 0.05


def test_coarse_readings_make_the_look_at_the_shape_a_note():
    """With steps above 0.3 s (n ≤ 30) neither shape nor far readings are judged, and nothing is flagged."""
    x = [1.0, 1.0, 1.0, 1.0, 1.0, 1.0, 1.0, 1.0, 2.0, 1.0]
    shape, far = check_of("normality", x, resolution=1.0), check_of("far readings", x, resolution=1.0)
    assert (shape.outcome, far.outcome, far.entries) == ("note", "note", ())
    assert check_of("normality", x, resolution=0.05).outcome == "caution"


def test_above_5000_readings_no_W_is_computed():
    """Above 5,000 readings the check is there without W and says so."""
    check = check_of("normality", np.linspace(0, 1, 5001), resolution=None)
    assert (check.statistic, check.p_value, check.outcome) == (None, None, "note")
    assert "5,000" in check.message


def test_far_readings_name_their_entries():
    """The places of a far unit's readings are named, counted from 1 in the sentence and from 0 in the entries."""
    x = [*EIGHT, 7.0]
    check = check_of("far readings", x)
    assert (check.outcome, check.entries) == ("caution", (8,))
    assert check.message.startswith("Entry 9 lies far")
    nested = check_of("far readings", x, places=tuple((2 * i, 2 * i + 1) for i in range(9)))
    assert nested.entries == (16, 17)
    assert nested.message.startswith("The preparation of entries 17 and 18")


def test_three_readings_have_no_far_one():
    """With three readings nothing is flagged, however far the third."""
    check = check_of("far readings", [5.0, 5.0001, 9.0])
    assert (check.outcome, check.p_value, check.entries) == ("note", None, ())


@pytest.mark.parametrize(
    ("smallest", "outcome"), [(0.0625, "stop"), (0.05, "stop"), (0.03125, "clear"), (0.0, "clear")]
)
def test_enough_readings_stops_where_nothing_could_be_significant(smallest, outcome):
    """A smallest attainable p not below the level (5 readings: 2/2⁵ = 0.0625) stops; continuous procedures never do."""
    check = check_of("enough readings", EIGHT[:5], smallest_p=smallest)
    assert check.outcome == outcome
    assert ("no outcome of this procedure could be significant" in check.message) == (outcome == "stop")


@pytest.mark.parametrize(
    ("of_readings", "of_target", "outcome"),
    [
        ("mg/L", "µg/L", "stop"),
        ("mg/L", "mg/l", "clear"),
        ("μg/mL", "µg / mL", "clear"),  # Greek letter and micro sign
        ("mol", "moL", "stop"),
        ("", "mg/L", "clear"),
        ("%", "mg/g", "stop"),
    ],
)
def test_units_of_target_and_readings(of_readings, of_target, outcome):
    """Different units stop; other spellings of one unit do not."""
    check = check_of("units", EIGHT, heading=of_readings, unit=of_target, units_are="weighings")
    assert check.outcome == outcome


def test_what_a_reading_is_a_replicate_of_is_asked():
    """Where it was not said, the note names what nesting does: 32.9 % false alarms for nine injections of three."""
    assert "32.9 %" in check_of("units", EIGHT).message
    said = check_of("units", EIGHT, units_are="titrations of one solution")
    assert (said.outcome, "titrations of one solution" in said.message) == ("clear", True)
    repeats = check_of("units", EIGHT, units_are="each an injection of one preparation")
    assert (repeats.outcome, "not of the material" in repeats.message) == ("caution", True)
    unequal = check_of("units", EIGHT, units_are="days", places=((0, 1), *((i,) for i in range(2, 9))))
    assert unequal.outcome == "note"


@pytest.mark.parametrize(("sigma", "outcome"), [("0.008", "caution"), ("0.0235", "clear"), ("0.2", "note")])
def test_scatter_against_a_known_sigma(sigma, outcome):
    """χ² = (n − 1)s²/σ² and both tails are those of scipy; below 1 % above is a caution, below a note."""
    check = check_of("sigma", EIGHT, sigma=sigma, sigma_origin="chart")
    chi = 7 * np.var(EIGHT, ddof=1) / float(sigma) ** 2
    assert check.outcome == outcome
    assert check.statistic == pytest.approx(chi, rel=1e-12)
    assert check.p_value == pytest.approx(stats.chi2.sf(chi, 7), rel=1e-10)
    assert check.figures["p_lower"] == pytest.approx(stats.chi2.cdf(chi, 7), rel=1e-10)


def test_an_estimated_sigma_is_held_against_F():
    """With degrees of freedom of σ the statistic is F with scipy's tails."""
    check = check_of("sigma", EIGHT, sigma="0.01", sigma_origin="12 records", sigma_df=11.0)
    F = np.var(EIGHT, ddof=1) / 1e-4
    assert check.statistic == pytest.approx(F, rel=1e-12)
    assert check.p_value == pytest.approx(stats.f.sf(F, 7, 11), rel=1e-10)
    assert "F(7, 11)" in check.message


def test_what_the_sigma_check_notices_is_its_power():
    """The ratio named in a clear check is found with 80 % at the level of 1 %, by scipy's χ² distribution."""
    message = check_of("sigma", EIGHT, sigma="0.0235", sigma_origin="chart").message
    ratio = float(re.search(r"scatter of (\S+) times", message)[1])
    assert stats.chi2.sf(stats.chi2.isf(0.01, 7) / ratio**2, 7) == pytest.approx(0.8, abs=0.01)


def test_texts_keep_the_decimal_comma():
    """Readings with a decimal comma get their figures with a comma."""
    for check in all_checks(np.array(EIGHT), facts_of(EIGHT, sign=",", run_order=True, sigma="0.02", sigma_origin="x")):
        assert not re.search(r"\d\.\d", check.message), check.message


def test_resolution_outcomes():
    """A step above s is a caution, above 0.3 s a note, unknown a note, fine a clear; r²/12 is never added."""
    s = float(np.std(EIGHT, ddof=1))
    outcomes = [check_of("resolution", EIGHT, resolution=r).outcome for r in (1.2 * s, 0.4 * s, None, 0.1 * s)]
    assert outcomes == ["caution", "note", "note", "clear"]
    assert "not added again" in check_of("resolution", EIGHT).message


@settings(max_examples=40, deadline=None)
@given(st.lists(st.integers(-40, 40), min_size=3, max_size=20), st.integers(0, 3))
def test_no_readings_break_a_check(steps, power):
    """Any readings on a grid give checks with finite figures and plain numbers."""
    x = np.array(steps, dtype=float) * 10.0**power
    for check in all_checks(x, facts_of(x, resolution=10.0**power, run_order=True)):
        assert all(np.isfinite(figure) for figure in check.figures.values())
        assert check.to_dict()["name"] in ORDER
        assert check.statistic is None or abs(check.statistic) < inf


def test_checks_take_less_than_the_libraries_they_replace():
    """All checks of 12 readings take at most 3 times as long as scipy's shapiro, skewtest and linregress, or 2 ms."""
    x = np.array([*EIGHT, 5.06, 4.97, 5.01, 5.0])
    facts = facts_of(x, run_order=True)

    def fastest(act):
        times = []
        for _ in range(15):
            start = time.perf_counter()
            act()
            times.append(time.perf_counter() - start)
        return min(times)

    library = fastest(lambda: (stats.shapiro(x), stats.skewtest(x), stats.linregress(np.arange(12), x)))
    assert fastest(lambda: all_checks(x, facts)) < max(3 * library, 0.002)
