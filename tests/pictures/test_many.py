"""The picture of many samples: all that differ are drawn, each mark on its interval, and the words say how many."""

import numpy as np
import pytest

from meanlab.pictures.for_page import figure
from meanlab.pictures.many import HEIGHT, MOST, SHAPES, WIDTH, Compared, many_picture


def made(count: int, every: int = 50) -> list[Compared]:
    """Return invented samples; one in ``every`` differs."""
    generator = np.random.default_rng(20261210)
    return [
        Compared(f"lot {i}", float(d), float(d) - 0.1, float(d) + 0.1, "cannot tell" if i % every else "differs")
        for i, d in enumerate(generator.normal(0, 0.1, count))
    ]


@pytest.mark.parametrize("count", [1, 40, MOST, 2000])
def test_each_sample_is_a_mark_on_its_interval(count):
    """A mark for each sample up to the most that stay apart; beyond, all that differ among as many; none outside."""
    samples = made(count)
    drawing = many_picture(samples, limit=0.25)
    marks = [mark for mark in drawing.marks if mark.says]
    assert len(marks) == min(count, MOST)
    differing = {one.name for one in samples if one.outcome == "differs"}
    assert {mark.says.split(":")[0] for mark in marks if mark.shape == SHAPES["differs"]} == differing
    uprights = {stroke.points[0][0]: stroke.points for stroke in drawing.strokes if stroke.points[0][0] ==
                stroke.points[1][0]}  # fmt: skip
    for mark in marks:
        (_, low), (_, high) = uprights[mark.x]
        assert high <= mark.y <= low
        assert 0 <= mark.x <= WIDTH
        assert 0 <= high <= low <= HEIGHT
    assert f"{count:,} samples" in drawing.alt
    assert any(f"{count:,} samples" in words.text for words in drawing.words)
    assert figure(drawing).layout.height == HEIGHT


def test_open_ends_reach_the_edge_and_nothing_is_no_picture():
    """An interval without a bound reaches the edge of the picture; without samples there is none."""
    assert many_picture([], None) is None
    drawing = many_picture([Compared("a", 0.1, None, 0.2, "differs"), Compared("b", 0.0, -0.1, 0.1, "agrees")], None)
    lengths = [abs(low[1] - high[1]) for low, high in (s.points for s in drawing.strokes) if low[0] == high[0]]
    assert len(lengths) == 3  # the axis and two intervals
