"""The cells of one sheet of an .xlsx workbook, walked once in the order of the file.

Source: ECMA-376-1 §18.3.1 (cells, their kinds and values), §22.4.2.4 (escapes in texts).
"""

import re
from functools import lru_cache

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.building import LAST_COLUMN, SheetBuilder, place_name, shown_text
from meanlab.intake.grid import EMPTY, Cell
from meanlab.intake.markup import Attributes, Walker
from meanlab.intake.parts import DAMAGED
from meanlab.intake.styles import Styles

TRUE = ("1", "true", "on")
_ESCAPE = re.compile(r"_x([0-9A-Fa-f]{4})_")
_LONGEST_FORMULA = 60
_LONGEST_SUMMARY = 200
_CELL = r"(\$?[A-Z]{1,3}\$?\d{1,7})"
_AGGREGATE = re.compile(rf"(?:AVERAGE|MEDIAN|SUM|COUNTA?|MINA?|MAXA?|STDEV[.A-Z]*|VAR[.A-Z]*)\({_CELL}:{_CELL}\)")
_CELL_NAME = re.compile(r"[A-Z]\$?\d")


class SheetCells(Walker):
    """The cells, rows, columns and merged cells of one sheet on their way into the builder."""

    def __init__(self, builder: SheetBuilder, texts: list[str], styles: Styles) -> None:
        self._builder = builder
        self._texts = texts
        self._styles = styles
        self._row = self._column = -1
        self._attributes: Attributes = {}
        self._collected: list[str] | None = None
        self._value = self._inline = ""
        self._formula: str | None = None
        self._pronunciation = False

    def start(self, name: str, attributes: Attributes) -> None:
        if name in ("v", "f", "t"):
            self._collected = None if self._pronunciation else []
        elif name == "c":
            self._attributes = attributes
            self._value = self._inline = ""
            self._formula = None
            place = place_of(attributes.get("r", ""))
            self._row, self._column = place if place else (self._row, self._column + 1)
        elif name == "row":
            self._begin_row(attributes)
        elif name == "rPh":
            self._pronunciation = True
        elif name == "col":
            self._take_columns(attributes)
        elif name == "mergeCell":
            self._merge(attributes.get("ref", ""))

    def text(self, text: str) -> None:
        if self._collected is not None:
            self._collected.append(text)

    def end(self, name: str) -> None:
        if name == "c":
            self._put(self._cell())
        elif name in ("v", "f", "t"):
            text = "".join(self._collected or ())
            self._collected = None
            if name == "v":
                self._value = text
            elif name == "t":
                self._inline += text
            else:
                self._formula = text
        elif name == "rPh":
            self._pronunciation = False

    def _put(self, cell: Cell) -> None:
        if self._formula and cell.kind == "number" and sums_up(self._formula, self._row, self._column):
            self._builder.summaries.add((self._row, self._column))
        self._builder.put(self._row, self._column, cell)
        if self._styles.struck_fonts and cell.text and self._styles.struck(whole(self._attributes.get("s"))):
            self._builder.struck.append(place_name(self._row, self._column))

    def _begin_row(self, attributes: Attributes) -> None:
        self._row = whole(attributes.get("r"), self._row + 2) - 1
        self._column = -1
        if attributes.get("hidden") in TRUE or _is_zero(attributes.get("ht")):
            self._builder.hidden_row_ranges.add((self._row, self._row))

    def _take_columns(self, attributes: Attributes) -> None:
        if attributes.get("hidden") in TRUE or _is_zero(attributes.get("width")):
            first, last = whole(attributes.get("min")), whole(attributes.get("max"))
            self._builder.hidden_columns.add((first - 1, min(last, LAST_COLUMN) - 1))

    def _merge(self, reference: str) -> None:
        first, _, last = reference.partition(":")
        begin, end = place_of(first), place_of(last)
        if begin and end and end[0] > begin[0]:
            self._builder.merged.add((begin[0], end[0], begin[1]))

    def _cell(self) -> Cell:
        kind = self._attributes.get("t", "n")
        value = self._value
        if kind == "n" and value:
            return self._number(value)
        if kind == "s" and value:
            place = whole(value, -1)
            if not 0 <= place < len(self._texts):
                raise IntakeComplaint(DAMAGED)
            return Cell(shown_text(self._texts[place]))
        if kind in ("inlineStr", "str"):
            return Cell(shown_text(plain_text(self._inline or value)))
        if not value.strip():
            return EMPTY if self._formula is None else Cell(f"={self._formula[:_LONGEST_FORMULA]}", "formula")
        if kind == "b":
            return Cell("TRUE" if value.strip() in TRUE else "FALSE", "boolean")
        if kind == "d":
            return Cell(shown_text(value.replace("T", " ")), "date")
        return Cell(shown_text(value), "error" if kind == "e" else "text")

    def _number(self, value: str) -> Cell:
        try:
            number = float(value)
        except ValueError:
            return Cell(shown_text(value))
        if number - number != 0:
            return Cell(shown_text(value), "error")
        return self._styles.cell(number, whole(self._attributes.get("s")))


def sums_up(formula: str, row: int, column: int) -> bool:
    """True for a formula that makes one figure (mean, scatter, sum …) of cells above it in its own column and no more.

    >>> sums_up("STDEV.S(B2:B7)/AVERAGE(B2:B7)*100", 8, 1), sums_up("AVERAGE(B2:D2)", 1, 4), sums_up("B2*40", 2, 1)
    (True, False, False)
    """
    ranges = _AGGREGATE.findall(formula[:_LONGEST_SUMMARY])
    if not ranges or _CELL_NAME.search(_AGGREGATE.sub("", formula)):
        return False
    places = [(place_of(first), place_of(last)) for first, last in ranges]
    return all(first and last and first[1] == last[1] == column and last[0] < row for first, last in places)


def plain_text(text: str) -> str:
    """A text with its escapes (``_x000D_``) resolved."""
    return _ESCAPE.sub(lambda found: chr(int(found[1], 16)), text) if "_x" in text else text


def place_of(reference: str) -> tuple[int, int] | None:
    """Row and column, counted from 0, of a cell named like B7; None where it is no such name.

    >>> place_of("B7"), place_of("$AB$10"), place_of("7B")
    ((6, 1), (9, 27), None)
    """
    letters = reference.rstrip("0123456789")
    digits = reference[len(letters) :]
    column = _column_of(letters)
    return (int(digits) - 1, column) if 0 < len(digits) < 8 and column >= 0 else None


@lru_cache(maxsize=1024)
def _column_of(letters: str) -> int:
    letters = letters.replace("$", "").upper()
    if not (0 < len(letters) < 4 and letters.isascii() and letters.isalpha()):
        return -1
    column = 0
    for letter in letters:
        column = column * 26 + ord(letter) - 64
    return column - 1


def whole(text: str | None, otherwise: int = 0) -> int:
    """A whole number out of an attribute."""
    try:
        return int(text) if text is not None and len(text) < 12 else otherwise
    except ValueError:
        return otherwise


def _is_zero(text: str | None) -> bool:
    try:
        return text is not None and float(text) == 0
    except ValueError:
        return False
