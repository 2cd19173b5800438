"""Probability plot, agreement, course of a plan, operating characteristic."""

import numpy as np
import pytest
from collisions import touching
from scipy import stats

from meanlab import Plan, Question, ReadingSet, analyse, plan_agreement, plan_detection, plan_interval
from meanlab.pictures import (
    agreement_picture,
    course_picture,
    normality_picture,
    operating_characteristic_picture,
    run_order_picture,
)

TWELVE = ["5.012", "5.043", "5.028", "5.009", "5.051", "5.017", "5.026", "5.033", "4.998", "4.987", "5.021", "5.034"]
KINDS = ("a difference that matters", "agreement within ± E", "an interval of ± half-width")


def linear(xs, ys):
    """Return the largest departure of pixels from a straight line in the values, in pixels."""
    return float(np.max(np.abs(np.polyval(np.polyfit(xs, ys, 1), xs) - ys)))


def test_the_points_are_the_ordered_readings_at_normal_quantiles():
    """Across: the readings; upwards: normal quantiles at (i − 3/8)/(n + 1/4) (Blom 1958), by scipy."""
    drawing = normality_picture(analyse(TWELVE, Question("5.000")))
    points = sorted((mark.x, mark.y) for mark in drawing.marks)
    quantiles = stats.norm.ppf((np.arange(1, 13) - 0.375) / 12.25)
    assert linear(sorted(map(float, TWELVE)), [x for x, _ in points]) < 1e-6
    assert linear(quantiles, [y for _, y in points]) < 1e-6


def test_the_band_is_that_of_the_order_statistics():
    """The band's corners are x̄ + s·Φ⁻¹ of the 2.5 % and 97.5 % beta quantiles (scipy) of the smallest reading."""
    drawing = normality_picture(analyse(TWELVE, Question("5.000")))
    x = np.array(list(map(float, TWELVE)))
    points = sorted(mark.x for mark in drawing.marks)
    slope = (points[-1] - points[0]) / (x.max() - x.min())
    low, high = (x.mean() + x.std(ddof=1) * stats.norm.ppf(stats.beta.ppf(p, 1, 12)) for p in (0.025, 0.975))
    corners = drawing.fills[0].points
    assert corners[0][0] == pytest.approx(points[0] + slope * (low - x.min()), abs=1e-6)
    assert corners[-1][0] == pytest.approx(points[0] + slope * (high - x.min()), abs=1e-6)
    assert not drawing.fills[0].hatched


def test_a_normal_sample_is_straight_and_a_skewed_one_leaves_the_band():
    """Readings at normal quantiles all lie inside; exponential ones of 40 do not (closed-form quantiles)."""
    places = (np.arange(1, 41) - 0.5) / 40
    for law, expected in ((stats.norm(100, 10), "0 of 40 outside"), (stats.expon(0, 10), " outside")):
        texts = [f"{value:.4f}" for value in law.ppf(places)]
        drawing = normality_picture(analyse(texts, Question("90")))
        said = next(words.text for words in drawing.words if words.text.startswith("grey"))
        assert said.endswith(expected)
        assert ("; 0 of" in said) == (expected != " outside")


def test_units_are_plotted_not_injections():
    """Three preparations are three points; below-limit readings have no plot, and two readings have none."""
    nested = ReadingSet(("10.1", "10.2", "10.4", "10.3", "9.9", "10.0"), preparations=tuple("AABBCC"))
    assert len(normality_picture(analyse(nested, Question("10"))).marks) == 3
    censored = ReadingSet(("1.2", "1.4", "1.1", "1.3"), censored=[{"index": 0, "kind": "below", "limit": "1.0"}])
    assert normality_picture(analyse(censored, Question("1"))) is None
    assert normality_picture(analyse(["1.2", "1.4"], Question("1"))) is None


@pytest.mark.parametrize("alternative", ["two-sided", "greater", "less"])
@pytest.mark.parametrize("limit", [None, "0.03", "0.001", "5"])
def test_agreement_is_inside_the_lines_exactly_where_it_is_shown(alternative, limit):
    """The agreement interval lies between the dashed lines in pixels ⇔ the analysis says so."""
    question = Question("5.01", alternative=alternative, equivalence_limit=limit)
    analysis = analyse(TWELVE, question)
    drawing = agreement_picture(analysis)
    if limit is None and alternative == "two-sided":
        assert drawing is None
        return
    assert touching(drawing) == []
    bar = next(stroke for stroke in drawing.strokes if stroke.width == 2.0)
    lines = sorted(stroke.points[0][0] for stroke in drawing.strokes if stroke.dash == "dash")
    zero = next(stroke.points[0][0] for stroke in drawing.strokes if stroke.dash == "dot")
    low, high = bar.points[0][0], bar.points[1][0]
    inside = {
        "two-sided": lambda: lines[0] < low and high < lines[1],
        "greater": lambda: high < (lines or [zero])[-1],
        "less": lambda: low > (lines or [zero])[0],
    }[alternative]()
    assert inside == analysis.equivalence.within


@pytest.mark.parametrize("sign", [".", ","])
@pytest.mark.parametrize(
    ("plan", "kind", "readings"),
    [
        (plan_detection(1.0, 1.0, power=0.9), KINDS[0], 13),  # Cohen 1988, table 2.4.1 region, one sample (from memory)
        (plan_detection(10.0, 1.0), KINDS[0], None),
        (plan_agreement(2.0, 1.0), KINDS[1], None),
        (plan_interval(1.0, 1.0), KINDS[2], None),
        (plan_interval(0.05, 1.0), KINDS[2], None),
        (plan_detection(0.03, 1.0), KINDS[0], None),
    ],
)
def test_the_course_marks_the_number_of_readings(plan, kind, readings, sign):
    """The chosen number is named, its dot lies on the curve, and nothing touches."""
    drawing = course_picture(plan, kind, "mg/L", sign)
    assert touching(drawing) == []
    assert any(words.text.startswith(f"{readings or plan.readings} readings: ") for words in drawing.words)
    curve = next(stroke.points for stroke in drawing.strokes if stroke.width == 1.8)
    dot = drawing.marks[0]
    assert min(abs(dot.x - x) + abs(dot.y - y) for x, y in curve) < 1.0


def test_a_plan_without_a_course_has_no_picture():
    """Nothing is drawn where no number of readings will do and no course is known."""
    assert course_picture(Plan(None, None, (), "out of reach"), KINDS[0], "", ".") is None


@pytest.mark.parametrize("alternative", ["two-sided", "greater", "less"])
def test_the_operating_characteristic_starts_at_one_minus_the_level(alternative):
    """At no difference the risk to miss is 95 %; it falls towards the side that is asked."""
    analysis = analyse(TWELVE, Question("5.0", alternative=alternative, difference_that_matters="0.02"))
    drawing = operating_characteristic_picture(analysis)
    assert touching(drawing) == []
    curve = next(stroke.points for stroke in drawing.strokes if stroke.width == 1.8)
    base, top = max(y for _, y in curve), 46.0
    missed = [(drawing.height - 40 - y) / (drawing.height - 40 - top) for _, y in curve]
    assert base <= drawing.height - 40
    if alternative == "two-sided":
        assert max(missed) == pytest.approx(0.95, abs=1e-6)
        assert missed == pytest.approx(missed[::-1], abs=1e-6)
    else:
        ordered = missed if alternative == "greater" else missed[::-1]
        assert ordered == sorted(ordered, reverse=True)
    assert "difference that matters" in [words.text for words in drawing.words]


def test_nothing_to_plan_with_gives_no_operating_characteristic():
    """One reading without σ has no power."""
    assert operating_characteristic_picture(analyse(["5.0"], Question("5.1"))) is None


def test_the_run_order_says_whether_it_is_one():
    """The axis says "order of measurement" only where that was declared."""
    for declared, title in ((True, "order of measurement"), (False, "order of the entries")):
        drawing = run_order_picture(analyse(TWELVE, Question("5.0", run_order=declared)))
        assert title in [words.text for words in drawing.words]
