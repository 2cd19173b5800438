"""Workbooks of the Office Open XML kind (.xlsx, .xlsm, .xltx), read as a stream.

Each sheet is walked once, cell by cell, and only cells that hold something take memory. What is kept of a cell is what
decides a reading: the stored number with the zeros its format shows, texts, dates, errors, formulas without a result,
and what is hidden, struck through or commented.

Source: ECMA-376-1 §18 (SpreadsheetML), ECMA-376-2 (packages and their relationships).
"""

import posixpath
from urllib.parse import unquote

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.building import Room, SheetBuilder, shown_text
from meanlab.intake.grid import Sheet
from meanlab.intake.markup import Attributes, Walker, walk
from meanlab.intake.number_formats import GENERAL
from meanlab.intake.parts import Parts
from meanlab.intake.styles import Styles
from meanlab.intake.xlsx_cells import TRUE, SheetCells, plain_text, whole

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
    walker: Walker
    for kind, walker in (("sharedStrings", texts), ("styles", _StyleSheet(styles))):
        if kind in by_kind and by_kind[kind] in parts:
            walk(parts.chunks(by_kind[kind]), walker)
    styles.since_1904 = book.since_1904
    room = Room()
    sheets = []
    if len(book.sheets) > _MOST_SHEETS:
        raise IntakeComplaint(
            f"The workbook holds {len(book.sheets):,} sheets; {_MOST_SHEETS:,} is the limit. "
            "Save only the sheet with the readings, as .xlsx or .csv."
        )
    for name, identity, hidden in book.sheets:
        kind, target = relations.get(identity, ("", ""))
        if kind != "worksheet":
            continue
        builder = SheetBuilder(name, room, hidden)
        walk(parts.chunks(target), SheetCells(builder, texts.texts, styles))
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
            identity = next(
                (value for key, value in attributes.items() if key.endswith(":id")), attributes.get("id", "")
            )
            self.sheets.append((attributes.get("name", ""), identity, hidden))
        elif name == "workbookPr":
            self.since_1904 = attributes.get("date1904", "") in TRUE


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
            self.texts.append(plain_text("".join(self._pieces)))


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
            self._styles.codes[whole(attributes.get("numFmtId"))] = attributes.get("formatCode", GENERAL)
        elif name == "font" and self._within == "fonts":
            self._fonts += 1
        elif name == "strike" and self._within == "fonts" and attributes.get("val", "1") in TRUE:
            self._styles.struck_fonts.add(self._fonts - 1)
        elif name == "xf" and self._within == "cellXfs":
            self._styles.styles.append((whole(attributes.get("numFmtId")), whole(attributes.get("fontId"))))

    def end(self, name: str) -> None:
        if name == self._within:
            self._within = ""


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
