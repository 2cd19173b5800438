"""Measures, places and axes: what keeps texts apart."""

import pytest
from hypothesis import given
from hypothesis import strategies as made
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.figure import Figure

from meanlab.pictures.axis import Scale, below, marks_that_fit, round_marks
from meanlab.pictures.drawing import Words
from meanlab.pictures.measure import Box, crossed, shortened, width_of, wrapped
from meanlab.pictures.places import Obstacles

TEXTS = (
    "2.5 % beyond −2.20", "t(11) = 4.08", "W⁺ = 16991.5", "The mean of 12 readings (taken as independent) of Nitrate",
    "Schwermetallrückstandsbestimmung in Klärschlammasche", "±∞ ≤ ≥ × 10⁻⁷ µg/kg °C ″ ′ ₀₁ ν σ α",
    "WWW @@@ %%% mmm MMM", "fill {of} [odd] signs <&> $x^2$ #~|\\/", "жизнь αβγδ ŁŃŻ ½¼‰",
)  # fmt: skip


@pytest.mark.parametrize("text", TEXTS)
@pytest.mark.parametrize("bold", [False, True])
@pytest.mark.parametrize("size", [11.0, 15.0, 20.0])
def test_the_estimated_width_is_never_less_than_what_is_drawn(text, bold, size):
    """Against matplotlib's own extent of the text at 200 dots an inch."""
    paper = Figure((10, 1), dpi=200)
    renderer = FigureCanvasAgg(paper).get_renderer()
    drawn = paper.text(
        0, 0, text, fontsize=size * 0.72, family="DejaVu Sans", weight="bold" if bold else "normal", parse_math=False
    )
    assert drawn.get_window_extent(renderer).width / 2 <= width_of(text, size, bold)


@given(made.text(max_size=80), made.floats(20, 300))
def test_wrapped_lines_fit_and_lose_nothing(text, width):
    """Every line fits, unless it is one sign that is wider, and all signs but white space are there in order."""
    lines = wrapped(text, width, 12)
    assert "".join("".join(lines).split()) == "".join(text.split())
    assert all(width_of(line, 12) <= width or len(line) == 1 for line in lines)


@given(made.text(min_size=1, max_size=60), made.floats(30, 200))
def test_a_shortened_text_fits(text, width):
    """The end goes, and … says so."""
    short = shortened(text, width, 12)
    assert width_of(short, 12) <= width
    assert short == text or short.endswith("…")


@pytest.mark.parametrize(
    ("start", "end", "expected"),
    [((0, 0), (10, 10), True), ((0, 3), (10, 3), False), ((5, 0), (5, 20), True), ((4, 0), (4, 20), False)],
)
def test_a_line_that_enters_a_box_is_seen(start, end, expected):
    """Through the inside counts; along the edge or beside it does not."""
    assert crossed(Box(4, 4, 8, 8), (start, end)) is expected


def test_a_label_takes_the_first_free_place_and_keeps_it():
    """A second label cannot lie where the first one is."""
    obstacles = Obstacles(Box(0, 0, 200, 40), paths=[((20.0, 0.0), (20.0, 40.0))])
    candidates = [Words(20, 10, "target"), Words(60, 10, "target"), Words(60, 30, "target")]
    assert obstacles.place(candidates) == candidates[1]
    assert obstacles.place(candidates) == candidates[2]
    assert obstacles.place(candidates) is None


@given(made.floats(-1e9, 1e9), made.floats(1e-6, 1e9), made.integers(1, 8))
def test_round_marks_lie_inside_evenly_and_are_not_too_many(low, width, most):
    """Steps are 1, 2 or 5 times a power of ten; the texts of two marks always differ."""
    marks = round_marks(low, low + width, most)
    assert len(marks) <= most
    assert all(low <= mark.value <= low + width or abs(mark.value - low) < 1e-12 * abs(low) for mark in marks)
    assert len({mark.text for mark in marks}) == len(marks)
    if most >= 5:
        assert len(marks) >= 2


@pytest.mark.parametrize(
    ("low", "high"),
    [(4.98, 5.06), (-1e300, 1e300), (1e-300, 3e-300), (10_000_000.1, 10_000_000.3), (0, 1e-7), (-0.004, 0.003)],
)
def test_texts_of_an_axis_keep_apart_and_inside(low, high):
    """From the smallest to the largest readings the axis has at least one mark, and no two texts touch."""
    boxes = [words.box for words in below(Scale(low, high, 8, 592), 50, "mg/L", ",", width=600).words]
    assert len(boxes) >= 2
    assert all(box.left >= 0 and box.right <= 600 for box in boxes)
    assert not any(a.meets(b) for i, a in enumerate(boxes) for b in boxes[:i])


def test_the_decimal_sign_of_the_readings_stands_on_the_axis():
    """A decimal comma in the readings is one on the axis."""
    assert [mark.text for mark in marks_that_fit(Scale(0, 1, 0, 300), ",", 300)] == [
        "0,0", "0,2", "0,4", "0,6", "0,8", "1,0",
    ]  # fmt: skip
