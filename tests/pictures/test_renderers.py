"""Both renderers draw everything that is described, in black and grey, and no text of a user becomes markup."""

import re
from io import BytesIO

import numpy as np
import pytest
from matplotlib.image import imread

from meanlab import Question, analyse
from meanlab.pictures import for_page, for_paper, normality_picture, readings_picture, sampling_distribution
from meanlab.pictures.drawing import Drawing, Fill, Mark, Stroke, Words

TWELVE = ["5.012", "5.043", "5.028", "5.009", "5.051", "5.017", "5.026", "5.033", "4.998", "4.987", "5.021", "5.034"]
EVERYTHING = Drawing(
    300,
    120,
    (Stroke(((0, 60), (300, 60))), Stroke(((10, 10), (90, 10)), "dot"), Stroke(((10, 20), (90, 20)), faint=True)),
    (Fill(((10, 100), (50, 70), (90, 100))), Fill(((110, 100), (150, 70), (190, 100)), hatched=False)),
    tuple(
        Mark(20 + 30 * place, 40, shape, says=f"a {shape}")
        for place, shape in enumerate(("dot", "circle", "tick", "cross", "diamond", "left", "right"))
    ),
    (Words(150, 110, "<b>$x_2$</b> & Co", bold=True), Words(5, 50, "left", "left", grey=True)),
)


def drawings():
    analysis = analyse(TWELVE, Question("5.000", unit="mg/L"))
    return [sampling_distribution(analysis.test), readings_picture(analysis), normality_picture(analysis), EVERYTHING]


@pytest.mark.parametrize("place", range(4))
def test_the_paper_is_black_white_and_grey_and_the_same_each_time(place):
    """Every pixel has the same red, green and blue; a second drawing gives the same bytes."""
    drawing = drawings()[place]
    content = for_paper.png(drawing)
    pixels = imread(BytesIO(content), format="png")
    assert pixels.shape[:2] == (round(2 * drawing.height), round(2 * drawing.width))
    assert np.ptp(pixels[..., :3], axis=2).max() == 0
    assert pixels[..., :3].min() < 0.05
    assert for_paper.png(drawing) == content
    assert for_paper.svg(drawing) == for_paper.svg(drawing)


@pytest.mark.parametrize("place", range(4))
def test_the_page_shows_everything_in_black_and_grey(place):
    """As many points as described, no colour but grey levels, no text under 12 px, no axes of plotly's own."""
    drawing = drawings()[place]
    figure = for_page.figure(drawing).to_dict()
    marks = [trace for trace in figure["data"] if trace["mode"] == "markers"]
    texts = [trace for trace in figure["data"] if trace["mode"] == "text"]
    assert sum(len(trace["x"]) for trace in marks) == len(drawing.marks)
    assert sum(len(trace["x"]) for trace in texts) == len(drawing.words)
    assert all(size >= 12 for trace in texts for size in trace["textfont"]["size"])
    for colour in re.findall(r"#[0-9a-fA-F]{6}", str(figure)):
        assert colour[1:3] == colour[3:5] == colour[5:7]
    assert len(figure["data"]) <= (8 if place < 3 else 13)
    assert not figure["layout"]["xaxis"]["visible"]


def test_texts_of_a_user_stay_texts():
    """Markup and formulas in a unit are shown as typed, on the page and on paper."""
    figure = for_page.figure(EVERYTHING).to_dict()
    text = next(trace for trace in figure["data"] if trace["mode"] == "text")["text"][0]
    assert text == "<b>&lt;b&gt;$x_2$&lt;/b&gt; &amp; Co</b>"
    assert all(not words.get_parse_math() for words in for_paper.figure(EVERYTHING).texts)
    assert [words.get_text() for words in for_paper.figure(EVERYTHING).texts] == ["<b>$x_2$</b> & Co", "left"]


def test_a_sign_without_a_glyph_becomes_a_box():
    """No warning and no gap for a script that the font of the paper does not hold."""
    assert for_paper.with_glyphs("硝酸 mg/L") == "□□ mg/L"
    assert for_paper.png(Drawing(100, 30, words=(Words(50, 15, "硝酸"),)))


def test_the_sentence_goes_into_the_svg():
    """The description of an SVG is the alternative text, escaped."""
    svg = for_paper.svg(Drawing(50, 20, alt="t < 2 & more"))
    assert "t &lt; 2 &amp; more" in svg
    assert "<date>" not in svg
