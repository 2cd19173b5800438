"""Workbooks of the OpenDocument kind (.ods), read as a stream.

A number counts as stored; the text beside it, which is what the sheet shows, tells its zeros and its percent sign.

Source: OASIS OpenDocument 1.3, part 3, §9 (tables) and §19.385 (office:value).
"""

import re

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.building import LAST_COLUMN, LAST_ROW, Room, SheetBuilder, place_name, shown_text
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.markup import Attributes, Walker, walk
from meanlab.intake.number_formats import Section, number_cell
from meanlab.intake.parts import LOCKED, Parts
from meanlab.intake.xlsx_cells import sums_up

_HIDDEN = ("collapse", "filter")
_LONGEST_FORMULA = 60
_DECIMALS = re.compile(r"[.,](\d+)\D*$")
_LIMIT_SIGN = re.compile(r"^\s*([<>≤≥])")
_DURATION = re.compile(r"PT(\d+)H(\d+)M(\d+)")


def read_ods(parts: Parts) -> tuple[Sheet, ...]:
    """All sheets of an OpenDocument workbook; raises IntakeComplaint when it is damaged, locked or too large."""
    if "META-INF/manifest.xml" in parts:
        walk(parts.chunks("META-INF/manifest.xml"), _Locks())
    content = _Content()
    walk(parts.chunks("content.xml"), content)
    return tuple(content.sheets)


def read_flat_ods(data: bytes) -> tuple[Sheet, ...]:
    """All sheets of an OpenDocument workbook that is one XML text."""
    content = _Content()
    walk([data], content)
    return tuple(content.sheets)


class _Locks(Walker):
    def start(self, name: str, attributes: Attributes) -> None:
        if name == "encryption-data":
            raise IntakeComplaint(LOCKED)


class _Content(Walker):
    """The styles that hide or strike through, then the sheets with their rows and cells."""

    def __init__(self) -> None:
        self.sheets: list[Sheet] = []
        self._room = Room()
        self._builder: SheetBuilder | None = None
        self._hiding: set[str] = set()
        self._striking: set[str] = set()
        self._style = ""
        self._row = self._column = 0
        self._rows_repeated = 1
        self._cell: Attributes | None = None
        self._pieces: list[str] = []
        self._comment: list[str] | None = None
        self._in_paragraph = False
        self._inner_tables = 0

    def start(self, name: str, attributes: Attributes) -> None:
        if name in ("table-cell", "covered-table-cell"):
            if self._inner_tables <= 1:
                self._cell, self._pieces, self._comment = attributes, [], None
        elif name == "table-row":
            self._begin_row(attributes)
        elif name == "table":
            self._begin_table(attributes)
        elif name == "table-column" and self._builder:
            count = _repeated(attributes, "number-columns-repeated", LAST_COLUMN)
            if attributes.get("visibility") in _HIDDEN:
                self._builder.hidden_columns.add((self._column, self._column + count - 1))
            self._column += count
        elif self._cell is not None:
            self._inside_cell(name, attributes)
        elif name == "style":
            self._style = attributes.get("name", "")
        elif name == "table-properties" and attributes.get("display") == "false":
            self._hiding.add(self._style)
        elif name == "text-properties" and attributes.get("text-line-through-style", "none") != "none":
            self._striking.add(self._style)

    def text(self, text: str) -> None:
        if self._in_paragraph and self._cell is not None:
            (self._pieces if self._comment is None else self._comment).append(text)

    def end(self, name: str) -> None:
        if name == "p":
            self._in_paragraph = False
        elif name in ("table-cell", "covered-table-cell") and self._inner_tables <= 1:
            self._end_cell()
        elif name == "annotation" and self._comment is not None:
            self._end_comment()
        elif name == "table-row" and self._inner_tables <= 1:
            self._row += self._rows_repeated
        elif name == "table":
            self._inner_tables -= 1
            if self._builder and self._inner_tables == 0:
                self.sheets.append(self._builder.sheet())
                self._builder = None

    def _begin_table(self, attributes: Attributes) -> None:
        self._inner_tables += 1
        if self._inner_tables == 1:
            hidden = attributes.get("style-name", "") in self._hiding or attributes.get("display") == "false"
            self._builder = SheetBuilder(attributes.get("name", ""), self._room, hidden)
            self._row = self._column = 0

    def _begin_row(self, attributes: Attributes) -> None:
        if self._inner_tables > 1 or not self._builder:
            return
        self._column = 0
        self._rows_repeated = _repeated(attributes, "number-rows-repeated", LAST_ROW)
        if attributes.get("visibility") in _HIDDEN:
            self._builder.hidden_row_ranges.add((self._row, self._row + self._rows_repeated - 1))

    def _inside_cell(self, name: str, attributes: Attributes) -> None:
        target = self._pieces if self._comment is None else self._comment
        if name == "p":
            if target:
                target.append(" ")
            self._in_paragraph = True
        elif name == "annotation":
            self._comment = []
        elif name == "s":
            target.append(" " * _repeated(attributes, "c", 100))
        elif name in ("tab", "line-break"):
            target.append(" ")

    def _end_comment(self) -> None:
        if self._builder and self._comment is not None:
            text = shown_text("".join(self._comment))[:80].strip()
            self._builder.comments.append((place_name(self._row, self._column), text))
        self._comment = None

    def _end_cell(self) -> None:
        attributes, self._cell = self._cell, None
        if attributes is None or not self._builder:
            return
        count = _repeated(attributes, "number-columns-repeated", LAST_COLUMN)
        cell = _cell(attributes, "".join(self._pieces))
        if cell.text:
            # beyond the last row and column one cell tells that something was there
            for row in range(self._row, max(self._row + 1, min(self._row + self._rows_repeated, LAST_ROW))):
                for column in range(self._column, max(self._column + 1, min(self._column + count, LAST_COLUMN))):
                    self._builder.put(row, column, cell)
            formula = attributes.get("formula", "").replace("[.", "").replace(":.", ":").replace("]", "")
            if formula and cell.kind == "number" and sums_up(formula.partition("=")[2], self._row, self._column):
                self._builder.summaries.add((self._row, self._column))
            if attributes.get("style-name") in self._striking:
                self._builder.struck.append(place_name(self._row, self._column))
            spanned = _repeated(attributes, "number-rows-spanned", LAST_ROW)
            if spanned > 1:
                self._builder.merged.add((self._row, self._row + spanned - 1, self._column))
        self._column += count


def _repeated(attributes: Attributes, name: str, most: int) -> int:
    text = attributes.get(name, "1")
    return min(max(int(text), 1), most) if text.isascii() and text.isdigit() and len(text) < 12 else 1


def _cell(attributes: Attributes, shown: str) -> Cell:
    kind = attributes.get("value-type", "")
    formula = attributes.get("formula", "")
    if shown.startswith(("#", "Err:")) and formula:
        return Cell(shown_text(shown), "error")
    if kind in ("float", "percentage", "currency"):
        return _number(attributes.get("value", ""), kind, shown)
    if kind == "date":
        return Cell(shown_text(attributes.get("date-value", shown).replace("T", " ")), "date")
    if kind == "time":
        found = _DURATION.match(attributes.get("time-value", ""))
        return Cell(":".join(part.zfill(2) for part in found.groups()) if found else shown_text(shown), "date")
    if kind == "boolean":
        return Cell(attributes.get("boolean-value", shown).upper()[:5], "boolean")
    if not kind and formula and not shown:
        return Cell(shown_text("=" + formula.partition("=")[2])[:_LONGEST_FORMULA], "formula")
    return Cell(shown_text(shown or attributes.get("string-value", "")))


def _number(stored: str, kind: str, shown: str) -> Cell:
    try:
        number = float(stored)
    except ValueError:
        return Cell(shown_text(shown))
    if number in (float("inf"), float("-inf")) or number != number:
        return Cell(shown_text(shown or stored), "error")
    sign = _LIMIT_SIGN.match(shown)
    percent = kind == "percentage"
    return number_cell(
        number,
        Section(
            decimals=_shown_decimals(number * 100 if percent else number, shown),
            percent=int(percent),
            before=sign[1] if sign else "",
            after="%" if percent else "",
        ),
    )


def _shown_decimals(number: float, shown: str) -> int:
    """How many decimals the shown text has, where it shows this number and not another form of it.

    Either sign may be the decimal sign; all digits are compared, so that a group of thousands is told from decimals.
    """
    found = _DECIMALS.search(shown)
    if not found or len(found[1]) > 20:
        return 0
    digits = re.sub(r"\D", "", shown)
    return len(found[1]) if digits == re.sub(r"\D", "", f"{abs(number):.{len(found[1])}f}") else 0
