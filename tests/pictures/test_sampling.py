"""The drawing of the sampling distribution: labels, marker, hatch, far statistics, words."""

from dataclasses import replace

import pytest
from collisions import touching
from hypothesis import given, settings
from made_tests import ALTERNATIVES, PROCEDURES, alternatives, levels, made, procedures, targets, whole_numbers
from scipy import stats

from meanlab.pictures.null_law import null_law
from meanlab.pictures.sampling import area_words, sampling_distribution

ROUND = [-4, 3, 12, -9, 7, 1, 15, -2, 8, 5, -11, 6]
SKEWED = [0, 1, 1, 2, 3, 5, 9, 30, 90]


def hatched_pixels(drawing) -> list[tuple[float, float]]:
    """Return from where to where on the axis each hatched area reaches."""
    return [(min(x for x, _ in fill.points), max(x for x, _ in fill.points)) for fill in drawing.fills]


@pytest.mark.parametrize("alternative", ALTERNATIVES)
@pytest.mark.parametrize("procedure", PROCEDURES)
@pytest.mark.parametrize("readings", [ROUND, SKEWED, ROUND[:3], ROUND[:6]])
@pytest.mark.parametrize("target", [-900, -18, 3, 26])
def test_no_label_touches_anything_and_every_region_is_named(procedure, alternative, readings, target):
    """Over a grid of situations no text lies on another, on a line or outside, and no region lacks its area."""
    test = made(procedure, readings, target, alternative)
    drawing = sampling_distribution(test, ",", width=606, height=178)
    assert touching(drawing) == []
    named = [words.text for words in drawing.words]
    assert all(area_words(test, null_law(test), region, ",") in named for region in null_law(test).regions)


@settings(max_examples=60, deadline=None)
@given(procedures, whole_numbers, targets, alternatives, levels)
def test_the_observed_line_stands_on_hatched_ground_exactly_where_the_test_rejects(procedure, x, target, side, alpha):
    """In pixels too: the dashed line, or the arrow off the axis, is at a hatched area only where p < α."""
    test = made(procedure, x, target, side, alpha)
    drawing = sampling_distribution(test)
    observed = next(stroke for stroke in drawing.strokes if stroke.dash == "dash")
    xs = [point[0] for point in observed.points]
    assert all(0 <= place <= drawing.width for place in xs)
    at = max(xs) if test.statistic > 0 else min(xs)
    upright = xs[0] == xs[1]
    margin = 1e-6 if upright else 40.0  # an arrow ends before the edge that the hatched area reaches
    on_hatch = any(low - margin <= at <= high + margin for low, high in hatched_pixels(drawing))
    assert on_hatch == test.reject or (not upright and test.reject)


@pytest.mark.parametrize("statistic", [40.0, -40.0, 1e6, -3e12])
def test_a_far_statistic_is_an_arrow_with_its_value(statistic):
    """The curve keeps its width, and no line stands at a false place."""
    near = made("t", ROUND, 0)
    drawing = sampling_distribution(replace(near, statistic=statistic, reject=True))
    plain = sampling_distribution(replace(near, statistic=0.0, reject=False))
    said = next(words.text for words in drawing.words if "beyond this axis" in words.text)
    assert said.startswith("t(11) = ")
    assert [mark.shape for mark in drawing.marks] == ["right" if statistic > 0 else "left"]
    assert all(0 <= mark.x <= drawing.width for mark in drawing.marks)
    assert hatched_pixels(drawing) == hatched_pixels(plain)
    assert touching(drawing) == []


def test_words_and_decimal_sign():
    """Areas are said in words, with the decimal sign of the readings, and the axis says what is assumed."""
    drawing = sampling_distribution(made("t", ROUND, -30), ",", "limit")
    texts = [words.text for words in drawing.words]
    assert "2,5 % beyond −2,20" in texts
    assert "2,5 % beyond 2,20" in texts
    assert "t, 11 degrees of freedom, if the true mean were the limit" in texts
    assert not any("." in text for text in texts)


def test_counting_regions_are_named_by_their_counts():
    """10 of 12 above is 1.9 % (79/4096, binomial) in each tail."""
    texts = [words.text for words in sampling_distribution(made("sign", list(range(1, 13)), 0)).words]
    assert "1.9 % at ≤ 2" in texts
    assert "1.9 % at ≥ 10" in texts


def test_where_nothing_can_reject_it_is_said():
    """Five readings give the sign procedure no outcome below 5 % two-sided (2/2⁵ = 6.25 %)."""
    drawing = sampling_distribution(made("sign", [1, 2, 3, 4, 5], 0))
    assert "no outcome can reject at 5 %" in [words.text for words in drawing.words]
    assert drawing.fills == ()


def test_the_sentence_for_those_who_do_not_see_it():
    """The alternative text holds regions, statistic and on which side it lies."""
    t = stats.ttest_1samp(ROUND, -30).statistic
    assert sampling_distribution(made("t", ROUND, -30)).alt == (
        "Sampling distribution, t, 11 degrees of freedom, if the true mean were the target: rejection region "
        f"2.5 % beyond −2.20 and 2.5 % beyond 2.20; the observed t(11) = {t:.2f} lies inside the rejection region."
    )
