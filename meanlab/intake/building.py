"""Builds a Sheet from cells that come in any order, within the room that one file may take."""

import re
from collections.abc import Iterable

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.grid import EMPTY, Cell, Sheet

MOST_CELLS = 2_000_000
MOST_PLACES = 6_000_000
LAST_ROW = 1_048_576
LAST_COLUMN = 16_384
_ROW_GAP = 10_000
_COLUMN_GAP = 1_000
_LONGEST_TEXT = 1_000
_MOST_MERGED = 1_000_000
_NAMED = 3
_LINE_BREAKS = re.compile(r"[\r\n\t\v\f\u2028\u2029]+")
_UNSHOWN = re.compile(r"[\x00-\x1f\x7f-\x9f\ud800-\udfff\ufffe\uffff]")


class Room:
    """How many cells one file may still hold, over all its sheets."""

    def __init__(self) -> None:
        self.cells = MOST_CELLS
        self.places = MOST_PLACES

    def take_cell(self) -> None:
        """Count one filled cell; raises IntakeComplaint beyond the limit."""
        self.cells -= 1
        if self.cells < 0:
            raise IntakeComplaint(
                f"The workbook holds more than {MOST_CELLS:,} filled cells, which is the limit. "
                "Save only the sheet and the columns with the readings, as .xlsx or .csv."
            )

    def take_places(self, count: int) -> None:
        """Count the cells of a finished sheet, empty ones among the filled included."""
        self.places -= count
        if self.places < 0:
            raise IntakeComplaint(
                f"The sheets of the workbook span more than {MOST_PLACES:,} cells, which is the limit. "
                "Copy the readings into a sheet of their own and save it as .xlsx or .csv."
            )


class SheetBuilder:
    """One sheet under construction; rows and columns count from 0."""

    def __init__(self, name: str, room: Room, hidden: bool = False) -> None:
        self.name = shown_text(name)
        self.hidden = hidden
        self.hidden_row_ranges: set[tuple[int, int]] = set()
        self.hidden_columns: set[tuple[int, int]] = set()
        self.struck: list[str] = []
        self.comments: list[tuple[str, str]] = []
        self.twice: list[str] = []
        self.summaries: set[tuple[int, int]] = set()
        self.merged: set[tuple[int, int, int]] = set()
        self._outside = 0
        self._waiting: list[str] = []
        self._room = room
        self._rows: dict[int, dict[int, Cell]] = {}

    def put(self, row: int, column: int, cell: Cell) -> None:
        """Set one cell; an empty one leaves no trace, a second one at the same place counts and is told."""
        if not cell.text:
            return
        if not (0 <= row < LAST_ROW and 0 <= column < LAST_COLUMN):
            self._outside += 1
            return
        self._room.take_cell()
        cells = self._rows.setdefault(row, {})
        if column in cells:
            self.twice.append(place_name(row, column))
        cells[column] = cell
        if cell.kind == "formula":
            self._waiting.append(place_name(row, column))

    def at(self, row: int, column: int) -> Cell:
        """The cell at one place so far."""
        return self._rows.get(row, {}).get(column, EMPTY)

    def _fill_merged(self) -> None:
        """Repeat the text of a cell merged over several rows in each of them; a number stays one reading."""
        left = _MOST_MERGED
        for first_row, last_row, column in sorted(self.merged):
            cell = self.at(first_row, column)
            left -= last_row - first_row
            if left < 0:
                return
            if cell.kind == "text" and cell.text:
                for row in range(first_row + 1, last_row + 1):
                    if row in self._rows and column not in self._rows[row]:
                        self.put(row, column, cell)

    def sheet(self) -> Sheet:
        """The finished sheet; a cell far from all others is left out, which a remark tells."""
        self._fill_merged()
        summaries = self._without_summaries()
        strays: list[str] = []
        last_row = _before_gap(self._rows, _ROW_GAP)
        last_column = _before_gap({column for cells in self._rows.values() for column in cells}, _COLUMN_GAP)
        rows: list[tuple[Cell, ...]] = []
        for row in sorted(self._rows):
            cells = self._rows[row]
            width = max(cells) + 1
            if row > last_row or width > last_column + 1:
                strays.extend(place_name(row, column) for column in cells if row > last_row or column > last_column)
                width = max((column + 1 for column in cells if row <= last_row and column <= last_column), default=0)
            if width:
                self._room.take_places(row + 1 - len(rows) + width)
                rows.extend([()] * (row - len(rows)))
                rows.append(tuple(cells.get(column, EMPTY) for column in range(width)))
        return Sheet(
            name=self.name,
            rows=rows,
            hidden=self.hidden,
            hidden_rows=self._hidden_rows(last_row),
            hidden_columns=frozenset(
                column for first, last in self.hidden_columns for column in range(first, min(last, last_column) + 1)
            ),
            remarks=tuple(self._remarks(strays, summaries)),
        )

    def _without_summaries(self) -> list[str]:
        """Take away the figures calculated from the cells above them, unless a word in their row names them."""
        taken = []
        for row, column in sorted(self.summaries):
            cells = self._rows.get(row, {})
            if column in cells and all(cell.kind != "text" for cell in cells.values()):
                del cells[column]
                taken.append(place_name(row, column))
            if not cells:
                self._rows.pop(row, None)
        return taken

    def _hidden_rows(self, last_row: int) -> frozenset[int]:
        spans = sorted(self.hidden_row_ranges)
        hidden, place, reach = [], 0, -1
        for row in sorted(row for row in self._rows if row <= last_row):
            while place < len(spans) and spans[place][0] <= row:
                reach = max(reach, spans[place][1])
                place += 1
            if row <= reach:
                hidden.append(row)
        return frozenset(hidden)

    def _remarks(self, strays: list[str], summaries: list[str]) -> Iterable[str]:
        if self._waiting:
            yield (
                f"{_cells(self._waiting)} without a result: the formula was never calculated. Open the workbook in a "
                "spreadsheet, let it calculate, and save it."
            )
        if summaries:
            yield f"{_cells(summaries)} calculated from the cells above (mean, scatter or the like) and not read."
        if strays:
            yield f"{_cells(strays)} far from the other cells and left out."
        if self._outside:
            yield f"{self._outside} cells beyond the last row or column that a sheet can have were left out."
        if self.twice:
            yield f"{_cells(self.twice)} stored more than once; the last value is used."
        if self.struck:
            yield f"{_cells(self.struck)} struck through, and read like the others."
        for place, comment in self.comments[:_NAMED]:
            yield f"Cell {place} has a comment: “{comment}”"
        if len(self.comments) > _NAMED:
            yield f"{len(self.comments) - _NAMED} more cells have comments."


def shown_text(text: str) -> str:
    """A text on one line without characters that cannot be shown, cut where no reading or heading would be that long.

    >>> shown_text("Lead\\n(µg/L)\\x00")
    'Lead (µg/L)'
    """
    if not text.isprintable():
        text = _UNSHOWN.sub("", _LINE_BREAKS.sub(" ", text))
    return text if len(text) <= _LONGEST_TEXT else text[:_LONGEST_TEXT] + "…"


def place_name(row: int, column: int) -> str:
    """The usual name of a cell.

    >>> place_name(0, 0), place_name(9, 27)
    ('A1', 'AB10')
    """
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return f"{letters}{row + 1}"


def _cells(places: list[str]) -> str:
    if len(places) == 1:
        return f"Cell {places[0]} is"
    named = ", ".join(places[:_NAMED])
    more = f" and {len(places) - _NAMED} more" if len(places) > _NAMED else ""
    return f"Cells {named}{more} are"


def _before_gap(numbers: Iterable[int], gap: int) -> int:
    """The last number before the first gap of that length, counted from the first number on."""
    last = -1
    for number in sorted(numbers):
        if last >= 0 and number - last > gap:
            break
        last = number
    return last
