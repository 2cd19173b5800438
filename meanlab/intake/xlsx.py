"""Workbooks of the Office Open XML kind (.xlsx, .xlsm, .xltx), read as a stream.

Each sheet is walked once, cell by cell, and only cells that hold something take memory. What is kept of a cell is what
decides a reading: the stored number with the zeros its format shows, texts, dates, errors, formulas without a result,
and what is hidden, struck through or commented.

Source: ECMA-376-1 §18 (SpreadsheetML), ECMA-376-2 (packages and their relationships).
"""

import posixpath
import re
from urllib.parse import unquote

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.building import LAST_COLUMN, Room, SheetBuilder, place_name, shown_text
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.markup import Attributes, Walker, walk
from meanlab.intake.number_formats import GENERAL
from meanlab.intake.parts import DAMAGED, Parts
from meanlab.intake.styles import Styles

_REFERENCE = re.compile(r"\$?([A-Za-z]{1,3})\$?([0-9]{1,7})")
_ESCAPE = re.compile(r"_x([0-9A-Fa-f]{4})_")
_TRUE = ("1", "true", "on")
_LONGEST_FORMULA = 60
_MOST_SHEETS = 1_000


def read_xlsx(parts: Parts) -> tuple[Sheet, ...]:
    """All sheets of a workbook, hidden ones included; raises IntakeComplaint when it is damaged or too large."""
    book_name = next(
        (target for kind, target in _relations(parts, "").values() if kind == "officeDocument"), "xl/workbook.xml"
    )
    book = _Book()
    walk(parts.chunks(book_name), book)
    relations = _relations(parts, book_name)
    by_kind = dict(relations.values())
    texts, styles = _Texts(), Styles()
    if by_kind.get("sharedStrings", "") in parts:
        walk(parts.chunks(by_kind["sharedStrings"]), texts)
    if by_kind.get("styles", "") in parts:
        walk(parts.chunks(by_kind["styles"]), _StyleSheet(styles))
    styles.since_1904 = book.since_1904
    room = Room()
    sheets = []
    for name, identity, hidden in book.sheets[:_MOST_SHEETS]:
        kind, target = relations.get(identity, ("", ""))
        if kind != "worksheet":
            continue
        builder = SheetBuilder(name, room, hidden)
        walk(parts.chunks(target), _Cells(builder, texts.texts, styles))
        _add_comments(parts, target, builder)
        sheets.append(builder.sheet())
    return tuple(sheets)


def _add_comments(parts: Parts, sheet_name: str, builder: SheetBuilder) -> None:
    for kind, target in _relations(parts, sheet_name).values():
        if kind == "comments" and target in parts:
            walk(parts.chunks(target), _Comments(builder))


def _relations(parts: Parts, source: str) -> dict[str, tuple[str, str]]:
    """What one part points to: identity → (kind, name of the part); ``""`` is the package itself."""
    folder, name = posixpath.split(source)
    part = posixpath.join(folder, "_rels", f"{name}.rels")
    if part not in parts:
        return {}
    found = _Relations(folder)
    walk(parts.chunks(part), found)
    return found.relations


class _Relations(Walker):
    def __init__(self, folder: str) -> None:
        self.relations: dict[str, tuple[str, str]] = {}
        self._folder = folder

    def start(self, name: str, attributes: Attributes) -> None:
        if name == "Relationship" and attributes.get("TargetMode", "").lower() != "external":
            target = unquote(attributes.get("Target", "")).replace("\\", "/")
            path = posixpath.normpath(posixpath.join("/", self._folder, target)).lstrip("/")
            kind = attributes.get("Type", "").rpartition("/")[2]
            self.relations[attributes.get("Id", "")] = (kind, path)


class _Book(Walker):
    """The list of sheets: name, identity of the part, hidden or not."""

    def __init__(self) -> None:
        self.sheets: list[tuple[str, str, bool]] = []
        self.since_1904 = False

    def start(self, name: str, attributes: Attributes) -> None:
        if name == "sheet":
            hidden = attributes.get("state", "visible") != "visible"
            self.sheets.append((attributes.get("name", ""), attributes.get("id", ""), hidden))
        elif name == "workbookPr":
            self.since_1904 = attributes.get("date1904", "") in _TRUE


class _Texts(Walker):
    """The shared texts in their order; a text in several fonts is joined, a pronunciation is left away."""

    def __init__(self) -> None:
        self.texts: list[str] = []
        self._pieces: list[str] = []
        self._inside = False
        self._pronunciation = False

    def start(self, name: str, attributes: Attributes) -> None:
        if name == "t":
            self._inside = not self._pronunciation
        elif name == "rPh":
            self._pronunciation = True
        elif name == "si":
            self._pieces.clear()

    def text(self, text: str) -> None:
        if self._inside:
            self._pieces.append(text)

    def end(self, name: str) -> None:
        if name == "t":
            self._inside = False
        elif name == "rPh":
            self._pronunciation = False
        elif name == "si":
            self.texts.append(_plain_text("".join(self._pieces)))


class _StyleSheet(Walker):
    """The number format and the font of each cell style."""

    def __init__(self, styles: Styles) -> None:
        self._styles = styles
        self._fonts = 0
        self._within = ""

    def start(self, name: str, attributes: Attributes) -> None:
        if name in ("fonts", "cellXfs", "cellStyleXfs", "dxfs"):
            self._within = name
        elif name == "numFmt" and self._within != "dxfs":
            self._styles.codes[_whole(attributes.get("numFmtId"))] = attributes.get("formatCode", GENERAL)
        elif name == "font" and self._within == "fonts":
            self._fonts += 1
        elif name == "strike" and self._within == "fonts" and attributes.get("val", "1") in _TRUE:
            self._styles.struck_fonts.add(self._fonts - 1)
        elif name == "xf" and self._within == "cellXfs":
            self._styles.styles.append((_whole(attributes.get("numFmtId")), _whole(attributes.get("fontId"))))

    def end(self, name: str) -> None:
        if name == self._within:
            self._within = ""


class _Cells(Walker):
    """The cells of one sheet on their way into the builder."""

    def __init__(self, builder: SheetBuilder, texts: list[str], styles: Styles) -> None:
        self._builder = builder
        self._texts = texts
        self._styles = styles
        self._row = self._column = -1
        self._attributes: Attributes = {}
        self._pieces: dict[str, list[str]] = {"v": [], "f": [], "t": []}
        self._inside: list[str] | None = None
        self._is_formula = self._pronunciation = False

    def start(self, name: str, attributes: Attributes) -> None:
        if name == "c":
            self._begin_cell(attributes)
        elif name in self._pieces:
            self._inside = None if self._pronunciation else self._pieces[name]
            self._is_formula = self._is_formula or name == "f"
        elif name == "row":
            self._begin_row(attributes)
        elif name == "rPh":
            self._pronunciation = True
        elif name == "col":
            if attributes.get("hidden") in _TRUE or _size(attributes.get("width")) == 0:
                first, last = _whole(attributes.get("min")), _whole(attributes.get("max"))
                self._builder.hidden_columns.add((first - 1, min(last, LAST_COLUMN) - 1))
        elif name == "mergeCell":
            self._merge(attributes.get("ref", ""))

    def text(self, text: str) -> None:
        if self._inside is not None:
            self._inside.append(text)

    def end(self, name: str) -> None:
        if name in self._pieces:
            self._inside = None
        elif name == "rPh":
            self._pronunciation = False
        elif name == "c":
            cell = self._cell()
            self._builder.put(self._row, self._column, cell)
            if cell.text and self._styles.struck(_whole(self._attributes.get("s"))):
                self._builder.struck.append(place_name(self._row, self._column))

    def _begin_row(self, attributes: Attributes) -> None:
        self._row = _whole(attributes.get("r"), self._row + 2) - 1
        self._column = -1
        if attributes.get("hidden") in _TRUE or _size(attributes.get("ht")) == 0:
            self._builder.hidden_row_ranges.add((self._row, self._row))

    def _begin_cell(self, attributes: Attributes) -> None:
        place = _place(attributes.get("r", ""))
        self._row, self._column = place if place else (self._row, self._column + 1)
        self._attributes = attributes
        for pieces in self._pieces.values():
            pieces.clear()
        self._is_formula = False

    def _merge(self, reference: str) -> None:
        first, _, last = reference.partition(":")
        begin, end = _place(first), _place(last)
        if begin and end and end[0] > begin[0]:
            self._builder.merged.append((begin[0], end[0], begin[1]))

    def _cell(self) -> Cell:
        kind = self._attributes.get("t", "n")
        value = "".join(self._pieces["v"])
        if kind == "inlineStr":
            return Cell(shown_text(_plain_text("".join(self._pieces["t"]))))
        if not value.strip() and kind != "str":
            formula = "".join(self._pieces["f"])[:_LONGEST_FORMULA]
            return Cell(f"={formula}", "formula") if self._is_formula else Cell("")
        if kind == "s":
            place = _whole(value, -1)
            if not 0 <= place < len(self._texts):
                raise IntakeComplaint(DAMAGED)
            return Cell(shown_text(self._texts[place]))
        if kind == "str":
            return Cell(shown_text(_plain_text(value)))
        if kind == "b":
            return Cell("TRUE" if value.strip() in _TRUE else "FALSE", "boolean")
        if kind == "e":
            return Cell(shown_text(value), "error")
        if kind == "d":
            return Cell(shown_text(value.replace("T", " ")), "date")
        return self._number(value)

    def _number(self, value: str) -> Cell:
        try:
            number = float(value)
        except ValueError:
            return Cell(shown_text(value))
        if number in (float("inf"), float("-inf")) or number != number:
            return Cell(shown_text(value), "error")
        return self._styles.cell(number, _whole(self._attributes.get("s")))


class _Comments(Walker):
    """The comments on one sheet: the cell and the text."""

    def __init__(self, builder: SheetBuilder) -> None:
        self._builder = builder
        self._place = ""
        self._pieces: list[str] = []
        self._inside = False

    def start(self, name: str, attributes: Attributes) -> None:
        if name == "comment":
            self._place = attributes.get("ref", "")[:10]
            self._pieces.clear()
        self._inside = name == "t"

    def text(self, text: str) -> None:
        if self._inside:
            self._pieces.append(text)

    def end(self, name: str) -> None:
        self._inside = False
        if name == "comment":
            self._builder.comments.append((self._place, shown_text("".join(self._pieces))[:80].strip()))


def _plain_text(text: str) -> str:
    return _ESCAPE.sub(lambda found: chr(int(found[1], 16)), text) if "_x" in text else text


def _place(reference: str) -> tuple[int, int] | None:
    """Row and column from 0 of a cell named like B7."""
    found = _REFERENCE.fullmatch(reference)
    if not found:
        return None
    column = 0
    for letter in found[1].upper():
        column = column * 26 + ord(letter) - 64
    return int(found[2]) - 1, column - 1


def _whole(text: str | None, otherwise: int = 0) -> int:
    try:
        return int(text) if text is not None and len(text) < 12 else otherwise
    except ValueError:
        return otherwise


def _size(text: str | None) -> float:
    try:
        return float(text) if text is not None else 1.0
    except ValueError:
        return 1.0
