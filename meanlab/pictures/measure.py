"""How much room a text takes, and where a label fits: an upper estimate that holds for the page's and the paper's font.

The widths are the advances of DejaVu Sans (the font of the paper renderer) in em, rounded up to 0.025; the page's font
is narrower. tests/pictures compares them with what matplotlib draws.
"""

import unicodedata
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from itertools import pairwise
from types import MappingProxyType

_SETS = {
    0.25: "′",
    0.275: "'",
    0.3: "IJijlí",
    0.325: " \u00a0,.·",
    0.35: "/:;\\|",
    0.375: "-f″",
    0.4: "()[]t",
    0.425: "!r⁰¹²³⁴⁵⁶⁷⁸⁹₀₁₂₃₄₅₆₇₈₉",
    0.475: '"',
    0.5: "*_`°–",
    0.525: "sz",
    0.55: "?c⁺⁻",
    0.575: "Lν",
    0.6: "Fkvxy",
    0.625: "PTYaeoäöéèáàó",
    0.65: "$0123456789ESbdghnpqu{}σμßµüú",
    0.675: "Kα",
    0.7: "ABCRVXZÄ",
    0.75: "NUÜ",
    0.775: "DGH",
    0.8: "&OQÖ",
    0.825: "w",
    0.85: "#+<=>^~±−≤≥×∞÷",
    0.875: "M",
    0.975: "%m",
}
_WIDTHS: Mapping[str, float] = MappingProxyType({sign: width for width, signs in _SETS.items() for sign in signs})
_OTHER = 1.0
_WIDEST = 1.45
_BOLDER = 1.24
LINE = 1.25
BOTH_SIDES = ("=", "<")


@dataclass(frozen=True)
class Box:
    """A rectangle in pixels; y grows downwards."""

    left: float
    top: float
    right: float
    bottom: float

    def meets(self, other: "Box", gap: float = 0.0) -> bool:
        """Tell whether two rectangles come nearer than ``gap`` pixels."""
        return (
            self.left < other.right + gap
            and other.left < self.right + gap
            and self.top < other.bottom + gap
            and other.top < self.bottom + gap
        )

    def within(self, other: "Box") -> bool:
        """Tell whether this rectangle lies inside another."""
        return (
            other.left <= self.left
            and self.right <= other.right
            and other.top <= self.top
            and self.bottom <= other.bottom
        )


def width_of(text: str, size: float, bold: bool = False) -> float:
    """Return an upper estimate of the width of a text in pixels.

    >>> width_of("t = 4.08", 10.0)
    41.75
    """
    em = sum(_WIDTHS.get(sign) or _other(sign) for sign in text)
    return round(em * size * (_BOLDER if bold else 1.0), 6)


def _other(sign: str) -> float:
    if unicodedata.combining(sign) or unicodedata.category(sign) in ("Cf", "Mn"):
        return 0.0
    return _WIDEST if unicodedata.east_asian_width(sign) in "WF" or sign in "‰﷽" else _OTHER


def box_of_words(text: str, x: float, y: float, align: str, size: float, bold: bool = False) -> Box:
    """Return the rectangle of a line of text with its middle height at y."""
    width = width_of(text, size, bold)
    left = x - {"left": 0.0, "middle": width / 2, "right": width}[align]
    half = LINE * size / 2
    return Box(left, y - half, left + width, y + half)


def wrapped(text: str, width: float, size: float, bold: bool = False) -> tuple[str, ...]:
    """Return a text in lines no wider than ``width``; a word that is wider is broken.

    "5 %", "± 0.05" and "p = 0.0018" stay on one line.

    >>> wrapped("the true mean exceeds the limit", 80.0, 10.0)
    ('the true mean', 'exceeds the', 'limit')
    """
    lines, current = [], ""
    for word in _glued(text.split()):
        longer = f"{current} {word}" if current else word
        if width_of(longer, size, bold) <= width:
            current = longer
            continue
        if current:
            lines.append(current)
        *full, current = _broken(word, width, size, bold)
        lines += full
    return (*lines, current) if current or not lines else tuple(lines)


def _glued(words: list[str]) -> list[str]:
    """Return words, each with what must not be parted from it."""
    glued: list[str] = []
    for word in words:
        before = glued[-1] if glued else ""
        if before and (word.startswith("%") or word in BOTH_SIDES or before.split()[-1] in (*BOTH_SIDES, "±")):
            glued[-1] = f"{before} {word}"
        else:
            glued.append(word)
    return glued


def _broken(word: str, width: float, size: float, bold: bool) -> list[str]:
    parts, current = [], ""
    for sign in word:
        if current and width_of(current + sign, size, bold) > width:
            parts.append(current)
            current = ""
        current += sign
    return [*parts, current]


def fitting(text: str, width: float, size: float, smallest: float, bold: bool = False) -> float:
    """Return the size, at most ``size`` and at least ``smallest``, at which a text fits into a width on one line."""
    needed = width_of(text, size, bold)
    return size if needed <= width else max(smallest, size * width / needed)


def shortened(text: str, width: float, size: float) -> str:
    """Return a text that fits into a width, its end replaced by … where it does not.

    >>> shortened("a rather long name", 60.0, 10.0)
    'a rather l…'
    """
    if width_of(text, size) <= width:
        return text
    while text and width_of(text + "…", size) > width:
        text = text[:-1]
    return text.rstrip() + "…"


def crossed(box: Box, points: Iterable[tuple[float, float]]) -> bool:
    """Tell whether a line through points enters a rectangle."""
    return any(_enters(box, start, end) for start, end in pairwise(points))


def _enters(box: Box, start: tuple[float, float], end: tuple[float, float]) -> bool:
    """Clip the piece of line to the rectangle (Liang & Barsky 1984): what remains lies inside."""
    (x, y), (dx, dy) = start, (end[0] - start[0], end[1] - start[1])
    low, high = 0.0, 1.0
    for step, room in ((-dx, x - box.left), (dx, box.right - x), (-dy, y - box.top), (dy, box.bottom - y)):
        if step == 0:
            if room <= 0:
                return False
            continue
        at = room / step
        low, high = (max(low, at), high) if step < 0 else (low, min(high, at))
    return low < high
