"""The picture of the readings: everything that was read is there, and nothing lies on anything else."""

from decimal import Decimal

import numpy as np
import pytest
from collisions import touching

from meanlab import Question, ReadingSet, analyse
from meanlab.pictures.entries import MOST_DRAWN, entries_of
from meanlab.pictures.readings import readings_picture
from meanlab.pictures.run_order import run_order_picture

TWELVE = ["5.012", "5.043", "5.028", "5.009", "5.051", "5.017", "5.026", "5.033", "4.998", "4.987", "5.021", "5.034"]
CENSORED = [{"index": 2, "kind": "below", "limit": "0.05"}, {"index": 5, "kind": "below", "limit": "0.05"}]


def picture_of(values, target, **more):
    kept = {key: more.pop(key) for key in ("preparations", "left_out", "censored", "unit") if key in more}
    return readings_picture(analyse(ReadingSet(tuple(values), **kept), Question(target, **more)))


def ticks(drawing):
    return sorted(mark.x for mark in drawing.marks if mark.shape == "tick")


def test_every_reading_is_a_tick_in_its_place():
    """Ticks are as far apart as the readings, and each says which entry it is, as typed."""
    drawing = picture_of(TWELVE, "5.000", unit="mg/L")
    values = sorted(map(float, TWELVE))
    xs = ticks(drawing)
    steps = [(x - xs[0]) / (value - values[0]) for x, value in zip(xs[1:], values[1:], strict=True)]
    assert steps == pytest.approx([steps[0]] * 11, rel=1e-9)
    assert "Entry 10: 4.987 mg/L" in [mark.says for mark in drawing.marks]


def test_equal_readings_stand_on_each_other():
    """Four equal readings are four ticks at four heights."""
    marks = [mark for mark in picture_of(["1.0", "1.0", "1.0", "1.2", "1.0"], "1.1").marks if mark.shape == "tick"]
    heap = [mark for mark in marks if mark.x == min(one.x for one in marks)]
    assert len(heap) == len({mark.y for mark in heap}) == 4


def test_mean_and_interval_stand_where_the_scale_puts_them():
    """The interval's ends and the mean lie on the same scale as the readings."""
    analysis = analyse(TWELVE, Question("5.000"))
    drawing = readings_picture(analysis)
    values, xs = sorted(map(float, TWELVE)), ticks(drawing)
    slope = (xs[-1] - xs[0]) / (values[-1] - values[0])
    dot = next(mark for mark in drawing.marks if mark.shape == "dot")
    assert dot.x == pytest.approx(xs[0] + slope * (analysis.test.estimate - values[0]))
    bar = next(stroke for stroke in drawing.strokes if stroke.width == 2.0)
    ends = [xs[0] + slope * (end - values[0]) for end in (analysis.test.interval.low, analysis.test.interval.high)]
    assert [bar.points[0][0], bar.points[1][0]] == pytest.approx(ends)


def test_a_one_sided_interval_is_open_on_its_side():
    """ "greater" has no upper end: an arrow to the right."""
    assert "right" in [mark.shape for mark in picture_of(TWELVE, "5.000", alternative="greater").marks]


def test_left_out_readings_stay_visible():
    """A reading that was left out is a cross, and one far off an arrow at the edge, both saying so."""
    drawing = picture_of([*TWELVE, "50.21"], "5.000", left_out={0: "spilled", 12: "point missed"})
    said = {mark.shape: mark.says for mark in drawing.marks if "left out" in mark.says}
    assert said == {"cross": "Entry 1: 5.012, left out", "right": "Entry 13: 50.21, left out"}
    assert len(ticks(drawing)) == 11


def test_below_limit_readings_are_an_arrow_at_their_limit():
    """Two entries below 0.05 are one arrow to the left that counts them."""
    drawing = picture_of(["0.07", "0.08", "0.06", "0.09", "0.07", "0.10", "0.08"], "0.10", censored=CENSORED)
    assert "2 below 0.05" in [words.text for words in drawing.words]
    assert "2 below 0.05" in [mark.says for mark in drawing.marks if mark.shape == "left"]


def test_a_far_target_is_an_arrow_with_its_value():
    """Readings keep their room where the target lies a thousand times their scatter away."""
    drawing = picture_of(TWELVE, "5000")
    assert "target 5000, beyond this axis" in [words.text for words in drawing.words]
    assert ticks(drawing)[-1] - ticks(drawing)[0] > 0.4 * drawing.width


def test_preparations_are_rows_with_their_means():
    """A few preparations are a row each, many are two rows; each mean is a diamond."""
    few = picture_of(["10.1", "10.2", "10.4", "10.3", "9.9", "10.0"], "10.0", preparations=tuple("AABBCC"))
    assert len({mark.y for mark in few.marks if mark.shape == "diamond"}) == 3
    labels = tuple("ABCDEFGH") * 2
    many = picture_of([f"10.{i}" for i in range(16)], "10.0", preparations=labels)
    assert len({mark.y for mark in many.marks if mark.shape == "diamond"}) == 1
    assert len([mark for mark in many.marks if mark.shape == "diamond"]) == 8


def test_many_readings_are_thinned_evenly_and_it_is_said():
    """Of 3,000 readings 240 are drawn, the extremes among them, and the axis says how many."""
    analysis = analyse([str(Decimal(i * i % 3001) / 1000) for i in range(3000)], Question("1.5"))
    values = [float(value) for value in analysis.readings.values]
    chosen = [entry.value for entry in entries_of(analysis).kept]
    assert len(chosen) == MOST_DRAWN
    assert (min(chosen), max(chosen)) == (min(values), max(values))
    assert np.quantile(chosen, [0.25, 0.5, 0.75]) == pytest.approx(np.quantile(values, [0.25, 0.5, 0.75]), abs=0.01)
    drawing = readings_picture(analysis)
    assert any(f"readings ({MOST_DRAWN} of 3000, evenly by size)" in words.text for words in drawing.words)
    assert len(drawing.marks) <= MOST_DRAWN + 2


SITUATIONS = {
    "far above": (TWELVE, {"target": "5.2"}),
    "among the readings": (TWELVE, {"target": "5.021"}),
    "at an end of the interval": (TWELVE, {"target": "5.0099"}),
    "limits": (TWELVE, {"target": "5.02", "equivalence_limit": "0.03"}),
    "narrow limits": (TWELVE, {"target": "5.02", "equivalence_limit": "0.002"}),
    "wide limits": (TWELVE, {"target": "5.02", "equivalence_limit": "3"}),
    "upper limit": (
        TWELVE,
        {"target": "5.05", "target_kind": "upper limit", "alternative": "greater", "equivalence_limit": "0.01"},
    ),
    "two readings": (["5.01", "5.03"], {"target": "5.00"}),
    "one reading": (["5.01"], {"target": "5.00"}),
    "one reading, known σ": (["5.01"], {"target": "5.00", "sigma": "0.01", "sigma_origin": "chart"}),
    "identical": (["5.01"] * 6, {"target": "5.01"}),
    "at the end": (TWELVE, {"target": "4.987"}),
    "left out": (TWELVE, {"target": "5.01", "left_out": {3: "spilled", 9: "bubble"}}),
    "below a limit": (
        ["0.07", "0.08", "0.06", "0.09", "0.07", "0.10", "0.08"],
        {"target": "0.05", "censored": CENSORED, "left_out": {0: "bubble"}},
    ),
    "without a limit": (
        ["1.2", "1.3", "1.1", "1.25"],
        {"target": "1.0", "censored": [{"index": 0, "kind": "above"}, {"index": 1, "kind": "below", "limit": "1.0"}]},
    ),
    "preparations": (
        ["10.1", "10.2", "10.4", "10.3", "9.9", "10.0"],
        {"target": "10.1", "preparations": tuple("AABBCC"), "left_out": {5: "bubble"}},
    ),
    "huge": (["7e299", "8e299", "1e300"], {"target": "9.2e299"}),
    "tiny": (["1e-300", "1.1e-300", "1.3e-300"], {"target": "1.2e-300"}),
    "opposite": (["-1e300", "1e300", "1e299"], {"target": "0"}),
    "large offset": (["10000000.1", "10000000.2", "10000000.3"], {"target": "10000000.25"}),
    "long target": (TWELVE, {"target": "5.00000000000000000000000000000000001"}),
    "long unit": (TWELVE, {"target": "5.0", "unit": "milligrams of nitrate nitrogen per litre of filtered water " * 3}),
}


@pytest.mark.parametrize("name", SITUATIONS)
@pytest.mark.parametrize("sign", [".", ","])
def test_nothing_touches_anything(name, sign):
    """In every situation labels keep off each other, off lines and marks, and inside; the target is always named."""
    values, more = SITUATIONS[name]
    more = dict(more)
    drawing = picture_of([value.replace(".", sign) for value in values], more.pop("target").replace(".", sign), **more)
    assert touching(drawing) == []
    noun = "limit" if more.get("target_kind") else "target"
    assert any(words.text.startswith(noun) for words in drawing.words)
    assert all(-1 <= mark.x <= drawing.width + 1 for mark in drawing.marks)
    assert drawing.alt.startswith("Readings on their scale: ")


@pytest.mark.parametrize("name", [name for name in SITUATIONS if name != "one reading"])
def test_the_run_order_keeps_its_labels_apart(name):
    """The same situations in their order."""
    values, more = SITUATIONS[name]
    more = dict(more)
    kept = {key: more.pop(key) for key in ("preparations", "left_out", "censored", "unit") if key in more}
    drawing = run_order_picture(analyse(ReadingSet(tuple(values), **kept), Question(more.pop("target"), **more)))
    assert touching(drawing) == []
    assert len([mark for mark in drawing.marks if mark.shape == "dot"]) == len(values) - len(kept.get("left_out", ()))
