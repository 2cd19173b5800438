"""A table of cells with the places they stand at, and what each cell holds."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

from meanlab.intake.characters import one_spelling
from meanlab.intake.entry import Parsed, parse
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.long_column import OneColumn
from meanlab.intake.numerals import leaning, under

FIRST_ROWS = 400
MOST_TURNED = 12  # rows of a table that stands on its side
CLOSE = 1.5  # readings of one quantity beside each other differ by less than this factor
_ENTRIES = ("number", "limit", "missing", "word", "")
_ODD = ("lost power", "formula", "width", "infinite", "two numbers", "malformed")


@dataclass(frozen=True)
class Table:
    """The rows of a text or a sheet.

    rows       texts of the cells, stripped; a blank row is empty
    lines      number of the line each row stands on, None for a sheet, whose places are cell addresses
    sheet      the sheet the rows come from, None for a text
    separator  what parts the cells of a text: "\\t", ";", ",", "|", " " or "" for one entry a line
    remarks    what must be seen about the whole table; ``notes`` what is neutral
    named      the name that stands before every entry of a text with one entry a line
    labels     label of the preparation each line belongs to, by number of line
    turned     True where rows and columns of the text or sheet have changed places; ``first`` is the row then that
               the first column was
    """

    rows: Sequence[Sequence[str]]
    lines: Sequence[int] | None = None
    sheet: Sheet | None = None
    separator: str = ""
    remarks: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    named: str = ""
    labels: Mapping[int, str] | None = None
    turned: bool = False
    first: int = 0

    @property
    def name(self) -> str:
        """The name of the sheet, "" for a text."""
        return self.sheet.name if self.sheet else ""

    def text(self, row: int, column: int) -> str:
        """Return the text of a cell, "" beyond the end of its row."""
        cells = self.rows[row]
        return cells[column] if column < len(cells) else ""

    def kind(self, row: int, column: int) -> str:
        """Return the kind of a cell as the workbook has it; "text" in a text."""
        cell = self.cell(row, column)
        return "text" if cell is None else cell.kind

    def cell(self, row: int, column: int) -> Cell | None:
        """Return a cell as the workbook has it; None in a text and beyond the end of a row."""
        if self.sheet is None:
            return None
        row, column = (column + self.first, row) if self.turned else (row, column)
        cells = self.sheet.rows[row]
        return cells[column] if column < len(cells) else None

    def place(self, row: int, column: int) -> str:
        """Return where a cell stands, in words: "line 3" or "B7"."""
        if self.turned:
            row, column = column + self.first, row
        if self.lines is not None:
            return f"line {self.lines[row]}" + (f", field {column + 1}" if self.turned else "")
        return f"{column_letters(column)}{row + 1}"

    def turn(self) -> "Table":
        """Return the table with its rows as columns."""
        wide = max(map(len, self.rows))
        return replace(
            self,
            rows=[[self.text(row, column) for row in range(len(self.rows))] for column in range(wide)],
            turned=True,
        )


def column_letters(column: int) -> str:
    """Return the letters of a sheet's column.

    >>> column_letters(0), column_letters(27)
    ('A', 'AB')
    """
    letters = ""
    column += 1
    while column:
        column, rest = divmod(column - 1, 26)
        letters = chr(65 + rest) + letters
    return letters


@lru_cache(maxsize=4096)
def parsed(text: str) -> Parsed:
    """Return what a cell's text is."""
    return parse(one_spelling(text).strip(" \t\xa0"))


def sort_of(table: Table, row: int, column: int) -> str:
    """Return what a cell holds: "number", "limit", "missing", "stamp", "odd", "text" or "" where it is empty."""
    text, kind = table.text(row, column), table.kind(row, column)
    if kind == "date":
        return "stamp"
    if kind in ("error", "formula"):
        return "missing"
    return sort_of_text(text)


def sort_of_text(text: str) -> str:
    """Return what a text is taken for: "number", "limit", "missing", "stamp", "odd", "text", "" where it is empty."""
    if not text:
        return ""
    found = parsed(text) if len(text) <= 60 else parse(text)
    if found.kind == "reading":
        return "number" if leaning(found.numeral) != "malformed" else "odd"
    if found.kind in ("below", "above"):
        return "limit" if found.numeral else "word"
    if found.kind == "missing":
        return "missing"
    if found.sort in ("date", "time"):
        return "stamp"
    return "odd" if found.meant or found.sort in _ODD or _is_like_a_number(text) else "text"


def _is_like_a_number(text: str) -> bool:
    """Tell whether a text that could not be read was meant as an entry, not as a heading: "(0.05)", "<", "1.2e"."""
    if text[0] in "<>≤≥" or not any(one.isalpha() or one in "%°‰" for one in text[:200]):
        return True
    return text.lstrip("+-")[:1].isdigit() and not any(sum(map(str.isalpha, word)) > 2 for word in text.split())


def filled_width(cells: Sequence[str]) -> int:
    """Return how many cells a row has up to its last filled one."""
    return next((width for width in range(len(cells), 0, -1) if cells[width - 1]), 0)


def is_blank(cells: Sequence[str]) -> bool:
    """Tell whether a row holds nothing."""
    return not any(cells)


def upright(table: Table) -> Table:
    """Return a table whose quantities stand in rows, "Nitrate; 5.02; 5.04; 4.98", with rows and columns exchanged."""
    if isinstance(table.rows, OneColumn) and table.sheet is None:
        return table
    alone = _only_row(table)
    if alone is not None:
        return alone
    rows = [row for row in range(min(len(table.rows), MOST_TURNED + 1)) if not is_blank(table.rows[row])]
    if not rows or len(rows) > MOST_TURNED or len(table.rows) > 100 or (table.separator == "" and table.sheet is None):
        return table
    for row in rows:
        sorts = [sort_of(table, row, column) for column in range(len(table.rows[row]))]
        numbers = [_size(table.text(row, column)) for column, sort in enumerate(sorts) if sort == "number"]
        if sorts[0] != "text" or len(numbers) < 2 or any(sort not in _ENTRIES for sort in sorts[1:]):
            return table
        counted = numbers == list(range(1, len(numbers) + 1))
        if len(rows) > 1 and not counted and not 0 < max(numbers) < CLOSE * min(numbers):
            return table
    return table.turn()


def _only_row(table: Table) -> Table | None:
    """A row of entries beside each other, alone in its table, as a column; None where there are more rows."""
    filled = [row for row in range(min(len(table.rows), 2000)) if not is_blank(table.rows[row])][:2]
    if len(filled) != 1 or len(table.rows) > 2000 or len(table.rows[filled[0]]) < 2:
        return None
    row = filled[0]
    sorts = [sort_of(table, row, column) for column in range(min(len(table.rows[row]), FIRST_ROWS))]
    if sum(sort in ("number", "limit", "odd") for sort in sorts) < 2:
        return None
    texts = list(table.rows[row])
    while not texts[-1]:
        texts.pop()
    return replace(table, rows=OneColumn(texts), turned=True, first=row)


def _size(text: str) -> float:
    found = parsed(text)
    plain = under(found.numeral, ".") or under(found.numeral, ",") or "0"
    return float(plain) * 10.0 ** max(-300, min(found.exponent, 300))
