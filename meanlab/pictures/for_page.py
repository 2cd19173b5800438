"""Drawings on the page: a plotly figure; black on white, told apart by dash and hatch."""

from collections.abc import Iterable, Mapping
from types import MappingProxyType
from typing import Any

import plotly.graph_objects as go

from meanlab.pictures.drawing import Drawing, Fill, Mark, Stroke, Words

FONT = '"Source Sans", "Source Sans 3", sans-serif'
INK, GREY, FAINT = "#000000", "#444444", "#bbbbbb"
DASHES: Mapping[str, str] = MappingProxyType(
    {"solid": "solid", "dash": "7px,4px", "dot": "2px,3px", "dashdot": "8px,3px,2px,3px"}
)
SHAPES: Mapping[str, str] = MappingProxyType(
    {
        "dot": "circle", "circle": "circle-open", "tick": "line-ns-open", "cross": "x-thin-open", "diamond": "diamond",
        "left": "triangle-left", "right": "triangle-right",
    }
)  # fmt: skip
PLACES: Mapping[str, str] = MappingProxyType(
    {"left": "middle right", "middle": "middle center", "right": "middle left"}
)
PICTURE_CONFIG: Mapping[str, Any] = MappingProxyType({"displayModeBar": False, "scrollZoom": False, "showTips": False})


def figure(drawing: Drawing) -> go.Figure:
    """Return a drawing as a figure as high as it is and as wide as its place on the page."""
    traces = [*_fills(drawing.fills), *_strokes(drawing.strokes), *_marks(drawing.marks), *_words(drawing.words)]
    axis = {"visible": False, "fixedrange": True}
    layout = {
        "height": drawing.height,
        "margin": {"l": 0, "r": 0, "t": 0, "b": 0, "pad": 0},
        "xaxis": {**axis, "range": [0, drawing.width]},
        "yaxis": {**axis, "range": [drawing.height, 0]},
        "paper_bgcolor": "#ffffff",
        "plot_bgcolor": "#ffffff",
        "showlegend": False,
        "dragmode": False,
        "hovermode": "closest",
        "font": {"family": FONT, "color": INK, "size": 12},
        "hoverlabel": {"bgcolor": "#ffffff", "bordercolor": INK, "font": {"family": FONT, "color": INK, "size": 13}},
    }
    chart = go.Figure({"data": traces, "layout": layout})
    chart.layout.template = None  # plotly's own look: 7 kB in each chart, and colours
    return chart


def _fills(fills: Iterable[Fill]) -> list[dict[str, Any]]:
    traces = []
    for hatched in (False, True):
        chosen = [fill.points for fill in fills if fill.hatched == hatched]
        if not chosen:
            continue
        pattern = {"shape": "/", "size": 6, "solidity": 0.25, "fgcolor": INK, "bgcolor": "#ffffff"}
        xs, ys = _apart(chosen)
        traces.append(
            {"type": "scatter", "x": xs, "y": ys, "mode": "lines", "fill": "toself", "line": {"width": 0},
             "hoverinfo": "skip"}
            | ({"fillpattern": pattern} if hatched else {"fillcolor": "#dddddd"})
        )  # fmt: skip
    return traces


def _strokes(strokes: Iterable[Stroke]) -> list[dict[str, Any]]:
    looks: dict[tuple[str, float, bool], list[Any]] = {}
    for stroke in strokes:
        looks.setdefault((stroke.dash, stroke.width, stroke.faint), []).append(stroke.points)
    traces = []
    for (dash, width, faint), paths in looks.items():
        xs, ys = _apart(paths)
        traces.append(
            {"type": "scatter", "x": xs, "y": ys, "mode": "lines", "hoverinfo": "skip", "cliponaxis": False,
             "line": {"color": FAINT if faint else INK, "width": width, "dash": DASHES[dash]}}
        )  # fmt: skip
    return traces


def _marks(marks: Iterable[Mark]) -> list[dict[str, Any]]:
    shapes: dict[str, list[Mark]] = {}
    for mark in marks:
        shapes.setdefault(mark.shape, []).append(mark)
    return [
        {
            "type": "scatter", "mode": "markers", "x": [one.x for one in group], "y": [one.y for one in group],
            "text": [_plain(one.says) for one in group], "hovertemplate": "%{text}<extra></extra>",
            "hoverinfo": "text" if any(one.says for one in group) else "skip", "cliponaxis": False,
            "marker": {"symbol": SHAPES[shape], "color": INK, "size": [_size(one) for one in group],
                       "line": {"width": 1.3, "color": INK}, "opacity": 1},
        }
        for shape, group in shapes.items()
    ]  # fmt: skip


def _words(words: Iterable[Words]) -> list[dict[str, Any]]:
    chosen = tuple(words)
    if not chosen:
        return []
    return [
        {
            "type": "scatter", "mode": "text", "x": [one.x for one in chosen], "y": [one.y for one in chosen],
            "text": [f"<b>{_plain(one.text)}</b>" if one.bold else _plain(one.text) for one in chosen],
            "textposition": [PLACES[one.align] for one in chosen], "hoverinfo": "skip", "cliponaxis": False,
            "textfont": {"size": [one.size for one in chosen], "color": [GREY if one.grey else INK for one in chosen]},
        }
    ]  # fmt: skip


def _size(mark: Mark) -> float:
    """A line symbol of plotly is 1.4 times as long as its size, so that it covers the circle of that size."""
    return mark.size / 1.4 if mark.shape in ("tick", "cross") else mark.size


def _plain(text: str) -> str:
    """Return a text in which the browser finds no markup."""
    return text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;")


def _apart(paths: Iterable[Iterable[tuple[float, float]]]) -> tuple[list[float | None], list[float | None]]:
    """Return all paths as one list of x and one of y, with a gap between neighbours."""
    xs: list[float | None] = []
    ys: list[float | None] = []
    for path in paths:
        for x, y in path:
            xs.append(round(x, 2))
            ys.append(round(y, 2))
        xs.append(None)
        ys.append(None)
    return xs[:-1], ys[:-1]
