"""The panel on paper: whole, readable, the same each time, with every text of the page's panel."""

from io import BytesIO
from itertools import combinations

import numpy as np
import pytest
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.image import imread
from matplotlib.transforms import Bbox

from meanlab import Question, ReadingSet, analyse
from meanlab.pictures import for_paper
from meanlab.records.panel import HEIGHT, WIDTH, panel, panel_png, panel_svg
from meanlab.wording import panel_texts

TWELVE = ["5.012", "5.043", "5.028", "5.009", "5.051", "5.017", "5.026", "5.033", "4.998", "4.987", "5.021", "5.034"]
LONG = {
    "quantity": "Gesamtstickstoffgehaltsbestimmung nach Aufschluss (zweifach im Mikrowellendruckaufschlussgerät)",
    "material": "Klärschlammtrocknungsrückstandsrückstellmusterflasche KTR-2026/118-B der Sammelprobe Nordwest",
    "unit": "mg/kg Trockenrückstand",
    "units_are": "Einwaagen aus getrennten Flaschen, an drei Tagen von zwei Personen aufgeschlossen und gemessen",
}
MARKUP = {"quantity": "$x_2$ <b>lead</b> & 100 %", "material": "\\alpha {} #1 ~ ^", "unit": "$\\mu$g/L"}
BELOW = [{"index": 1, "kind": "below", "limit": "4.9"}]


def cases():
    """Return one analysis for each verdict, kind of readings and kind of text."""
    limit = {"equivalence_limit": "0.04"}
    yield "differs", TWELVE, {"target": "5.000", "target_kind": "certified value", "unit": "mg/L"}
    yield "within", TWELVE, {"target": "5.000", **limit}
    yield "agrees", TWELVE, {"target": "5.02", **limit}
    yield "cannot tell", TWELVE, {"target": "5.02"}
    yield "not testable", ["5.0"], {"target": "5.1"}
    yield "identical", ["5.0"] * 4, {"target": "5.1"}
    for side in ("greater", "less"):
        yield side, TWELVE, {"target": "5.03", "alternative": side, "target_kind": "upper limit", **limit}
    for procedure in ("guarded_t", "signed_rank", "sign"):
        yield procedure, TWELVE, {"target": "5.0", "procedure": procedure}
    yield "z", TWELVE[:2], {"target": "5.0", "sigma": "0.02", "sigma_origin": "control chart 2025", **LONG, **limit}
    yield "below a limit", ReadingSet(tuple(TWELVE), censored=BELOW, left_out={4: "bubble"}), {"target": "5.0", **LONG}
    nested = ReadingSet(tuple(TWELVE), preparations=tuple("AAABBBCCCDDD"), left_out={11: "spilled"})
    yield (
        "preparations",
        nested,
        {"target": "5.0", **LONG, "set_after": ("alternative", "equivalence limit"), "look": 4},
    )
    yield "decimal comma", [text.replace(".", ",") for text in TWELVE], {"target": "5,02", **LONG, **limit}
    yield "markup", TWELVE, {"target": "5.0", **MARKUP}
    yield "another script", TWELVE, {"target": "5.0", "quantity": "硝酸塩", "material": "Нитрат في الماء"}
    yield "one long word", TWELVE, {"target": "5.0", "quantity": "Überlänge" * 60, "material": "W" * 300}


CASES = {name: (readings, question) for name, readings, question in cases()}


def analysis_of(name):
    readings, question = CASES[name]
    return analyse(readings, Question(**question))


@pytest.fixture(scope="module", params=CASES)
def drawn(request):
    """One analysis with its panel and the extents of its texts as matplotlib draws them, in pixels."""
    analysis = analysis_of(request.param)
    drawing = panel(analysis)
    paper = for_paper.figure(drawing)
    renderer = FigureCanvasAgg(paper).get_renderer()
    return analysis, drawing, [(text, text.get_window_extent(renderer)) for text in paper.texts], paper.bbox


def test_nothing_is_clipped_and_no_text_lies_on_another(drawn):
    """Every text lies inside the frame, and no two texts share a pixel."""
    _, _, extents, frame = drawn
    assert extents
    for text, box in extents:
        assert box.x0 >= frame.x0 + 2, text.get_text()
        assert box.x1 <= frame.x1 - 2, text.get_text()
        assert box.y0 >= frame.y0 + 2, text.get_text()
        assert box.y1 <= frame.y1 - 2, text.get_text()
    overlaps = [
        (a[0].get_text(), b[0].get_text()) for a, b in combinations(extents, 2) if Bbox.intersection(a[1], b[1])
    ]
    assert overlaps == []


def test_every_text_of_the_page_stands_in_it(drawn):
    """Title, verdict, sentence, every row of the table, why, caution and origin, word by word and as typed."""
    analysis, drawing, extents, _ = drawn
    texts = panel_texts(analysis)
    shown = "".join("".join(text.get_text() for text, _ in extents).split())
    parts = [texts.title, texts.verdict_word, texts.sentence, texts.why, texts.caution, texts.origin]
    for part in [*parts, *(text for row in texts.rows for text in row)]:
        assert "".join(for_paper.with_glyphs(part).split()) in shown
    assert all(not text.get_parse_math() for text, _ in extents)
    assert texts.sentence in drawing.alt


def test_its_proportions_are_half_a_page(drawn):
    """990 pixels wide, 490 high with usual texts; longer ones make it higher, never wider."""
    analysis, drawing, _, _ = drawn
    assert drawing.width == WIDTH
    assert drawing.height >= HEIGHT
    if len(analysis.conclusion) < 330 and not analysis.question.material:
        assert drawing.height <= HEIGHT + 80


@pytest.mark.parametrize("name", ["differs", "markup", "not testable"])
def test_the_same_bytes_each_time_at_200_dots_an_inch(name):
    """Drawing the same analysis twice gives the same PNG and SVG; the PNG has 2 pixels for each of the drawing."""
    analysis = analysis_of(name)
    content = panel_png(analysis)
    assert panel_png(analysis) == content
    assert panel_svg(analysis) == panel_svg(analysis)
    drawing = panel(analysis)
    pixels = imread(BytesIO(content), format="png")
    assert pixels.shape[:2] == (round(2 * drawing.height), round(2 * drawing.width))
    assert np.ptp(pixels[..., :3], axis=2).max() == 0


def test_markup_in_names_is_escaped_in_the_svg():
    """What a user typed is text in the SVG, not elements of it."""
    svg = panel_svg(analysis_of("markup"))
    assert "<b>" not in svg
    assert "&lt;b&gt;lead&lt;/b&gt; &amp; 100 %" in svg
