"""A drawing as plain facts: strokes, fills, marks and words, placed in pixels from the upper left corner."""

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Literal

from meanlab.pictures.measure import Box, box_of_words

Point = tuple[float, float]
Dash = Literal["solid", "dash", "dot", "dashdot"]
Shape = Literal["dot", "circle", "tick", "cross", "diamond", "left", "right"]
Align = Literal["left", "middle", "right"]
WORDS = 12.0


@dataclass(frozen=True)
class Stroke:
    """A line through points; ``faint`` for what only guides the eye."""

    points: tuple[Point, ...]
    dash: Dash = "solid"
    width: float = 1.4
    faint: bool = False


@dataclass(frozen=True)
class Fill:
    """A closed area, hatched or plain grey."""

    points: tuple[Point, ...]
    hatched: bool = True


@dataclass(frozen=True)
class Mark:
    """A mark of a size in pixels; a tick is upright and as long as its size; ``says`` is read when it is pointed at."""

    x: float
    y: float
    shape: Shape
    size: float = 8.0
    says: str = ""


@dataclass(frozen=True)
class Words:
    """One line of text: x at its left end, middle or right end, y at half of its height."""

    x: float
    y: float
    text: str
    align: Align = "middle"
    size: float = WORDS
    bold: bool = False
    grey: bool = False

    @property
    def box(self) -> Box:
        """The rectangle the text takes up, rather too large than too small."""
        return box_of_words(self.text, self.x, self.y, self.align, self.size, self.bold)


@dataclass(frozen=True)
class Drawing:
    """What is drawn on an area of ``width`` by ``height`` pixels; ``alt`` says it in a sentence."""

    width: float
    height: float
    strokes: tuple[Stroke, ...] = ()
    fills: tuple[Fill, ...] = ()
    marks: tuple[Mark, ...] = ()
    words: tuple[Words, ...] = ()
    alt: str = ""

    def moved(self, right: float, down: float) -> "Drawing":
        """Return the same drawing moved by pixels."""
        return replace(
            self,
            strokes=tuple(replace(one, points=_moved(one.points, right, down)) for one in self.strokes),
            fills=tuple(replace(one, points=_moved(one.points, right, down)) for one in self.fills),
            marks=tuple(replace(one, x=one.x + right, y=one.y + down) for one in self.marks),
            words=tuple(replace(one, x=one.x + right, y=one.y + down) for one in self.words),
        )


def together(width: float, height: float, drawings: Iterable[Drawing], alt: str = "") -> Drawing:
    """Return several drawings as one on an area of this size; their sentences follow each other."""
    parts = tuple(drawings)
    return Drawing(
        width,
        height,
        tuple(one for part in parts for one in part.strokes),
        tuple(one for part in parts for one in part.fills),
        tuple(one for part in parts for one in part.marks),
        tuple(one for part in parts for one in part.words),
        alt or " ".join(part.alt for part in parts if part.alt),
    )


def line(x1: float, y1: float, x2: float, y2: float, dash: Dash = "solid", width: float = 1.4) -> Stroke:
    """Return a straight line."""
    return Stroke(((x1, y1), (x2, y2)), dash, width)


def _moved(points: tuple[Point, ...], right: float, down: float) -> tuple[Point, ...]:
    return tuple((x + right, y + down) for x, y in points)
