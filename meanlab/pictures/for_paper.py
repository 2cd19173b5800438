"""Drawings on paper: a matplotlib figure (never pyplot), as PNG, SVG or PDF; the same bytes each time."""

from functools import lru_cache
from io import BytesIO
from threading import Lock
from typing import Any

import matplotlib
from matplotlib.backends.backend_agg import FigureCanvasAgg
from matplotlib.backends.backend_pdf import FigureCanvasPdf
from matplotlib.backends.backend_svg import FigureCanvasSVG
from matplotlib.figure import Figure
from matplotlib.font_manager import FontProperties, findfont, get_font
from matplotlib.lines import Line2D
from matplotlib.patches import Polygon

from meanlab.core.printable import printable
from meanlab.pictures.drawing import Drawing, Mark, Words

PIXELS_PER_INCH = 100
DOTS_PER_INCH = 200
POINTS_PER_PIXEL = 72 / PIXELS_PER_INCH
FONT = "DejaVu Sans"
INK, GREY, FAINT = "#000000", "#444444", "#bbbbbb"
DASHES: Any = {"solid": "solid", "dash": (0, (5, 3)), "dot": (0, (1.2, 2)), "dashdot": (0, (6, 2, 1.2, 2))}
SHAPES = {"dot": "o", "circle": "o", "tick": "|", "cross": "x", "diamond": "D", "left": "<", "right": ">"}
HOLLOW = ("circle",)
NO_GLYPH = "□"
_SAME_IDS: Any = {"svg.hashsalt": "meanlab", "svg.fonttype": "path"}
_SELECTABLE: Any = {"pdf.fonttype": 42}
_ONE_AT_A_TIME = Lock()


def figure(drawing: Drawing) -> Figure:
    """Return a drawing as a figure, 100 pixels an inch."""
    paper = Figure((drawing.width / PIXELS_PER_INCH, drawing.height / PIXELS_PER_INCH), dpi=PIXELS_PER_INCH)
    area = paper.add_axes((0, 0, 1, 1))
    area.set_axis_off()
    area.set_xlim(0, drawing.width)
    area.set_ylim(drawing.height, 0)
    for fill in drawing.fills:
        area.add_patch(
            Polygon(fill.points, fill=not fill.hatched, facecolor="#dddddd", edgecolor=INK, linewidth=0,
                    hatch="////" if fill.hatched else None, hatch_linewidth=0.8)
        )  # fmt: skip
    for stroke in drawing.strokes:
        xs, ys = zip(*stroke.points, strict=True)
        area.add_line(
            Line2D(xs, ys, color=FAINT if stroke.faint else INK, linewidth=stroke.width * POINTS_PER_PIXEL,
                   linestyle=DASHES[stroke.dash], dash_capstyle="butt", solid_capstyle="butt")
        )  # fmt: skip
    for mark in drawing.marks:
        area.add_line(_mark(mark))
    for words in drawing.words:
        _write(paper, drawing, words)
    return paper


def png(drawing: Drawing) -> bytes:
    """Return a drawing as PNG, 200 dots an inch."""
    paper = figure(drawing)
    FigureCanvasAgg(paper)
    content = BytesIO()
    paper.savefig(content, format="png", dpi=DOTS_PER_INCH, metadata={"Software": None})
    return content.getvalue()


def svg(drawing: Drawing) -> str:
    """Return a drawing as SVG; its sentence stands in it as the description."""
    paper = figure(drawing)
    FigureCanvasSVG(paper)
    content = BytesIO()
    facts = {"Date": None, "Creator": None, "Description": printable(drawing.alt)}
    with _ONE_AT_A_TIME, matplotlib.rc_context(_SAME_IDS):
        paper.savefig(content, format="svg", metadata=facts)
    return content.getvalue().decode("utf-8")


def pdf(drawing: Drawing) -> bytes:
    """Return a drawing as PDF of its own size: lines and letters, the text selectable, its sentence as the title."""
    paper = figure(drawing)
    FigureCanvasPdf(paper)
    content = BytesIO()
    moment = dict.fromkeys(("CreationDate", "ModDate", "Creator", "Producer"))
    with _ONE_AT_A_TIME, matplotlib.rc_context(_SELECTABLE):
        paper.savefig(content, format="pdf", metadata={**moment, "Title": printable(drawing.alt)})
    return content.getvalue()


def with_glyphs(text: str) -> str:
    """Return a text whose signs the font can show; a box stands for one that it cannot.

    >>> with_glyphs("pH 7 µg")
    'pH 7 µg'
    """
    known = _known_signs()
    return "".join(sign if ord(sign) in known else NO_GLYPH for sign in text)


@lru_cache(maxsize=1)
def _known_signs() -> frozenset[int]:
    return frozenset(get_font(findfont(FontProperties(family=FONT))).get_charmap())


def _mark(mark: Mark) -> Line2D:
    size = mark.size * POINTS_PER_PIXEL
    return Line2D(
        [mark.x], [mark.y], linestyle="none", marker=SHAPES[mark.shape], markersize=size, color=INK,
        markerfacecolor="white" if mark.shape in HOLLOW else INK, markeredgecolor=INK,
        markeredgewidth=1.2 * POINTS_PER_PIXEL,
    )  # fmt: skip


def _write(paper: Figure, drawing: Drawing, words: Words) -> None:
    paper.text(
        words.x / drawing.width,
        1 - words.y / drawing.height,
        with_glyphs(words.text),
        ha={"left": "left", "middle": "center", "right": "right"}[words.align],
        va="center_baseline",
        fontsize=words.size * POINTS_PER_PIXEL,
        fontweight="bold" if words.bold else "normal",
        family=FONT,
        color=GREY if words.grey else INK,
        parse_math=False,
    )
