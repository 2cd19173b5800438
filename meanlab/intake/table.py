"""A table of cells with the places they stand at, and the blocks of data in it with their headings."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from functools import lru_cache

from meanlab.intake.characters import one_spelling
from meanlab.intake.entry import Parsed, parse
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.heading import Heading, heading_of
from meanlab.intake.long_column import OneColumn
from meanlab.intake.numerals import leaning, under
from meanlab.intake.units import is_unit
from meanlab.intake.words import is_summary

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
    turned     True where rows and columns of the text or sheet have changed places
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
        row, column = (column, row) if self.turned else (row, column)
        cells = self.sheet.rows[row]
        return cells[column] if column < len(cells) else None

    def place(self, row: int, column: int) -> str:
        """Return where a cell stands, in words: "line 3" or "B7"."""
        if self.turned:
            row, column = column, row
        if self.lines is not None:
            return f"line {self.lines[row]}" + (f", field {column + 1}" if self.turned else "")
        return f"{column_letters(column)}{row + 1}"

    def turn(self) -> "Table":
        """Return the table with its rows as columns."""
        wide = max(map(len, self.rows))
        return replace(self, rows=[[self.text(row, column) for row in range(len(self.rows))] for column in range(wide)], turned=True)


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


@dataclass(frozen=True)
class Block:
    """A run of data rows under one heading.

    heading     row of the headings, None where there is none; ``units`` and ``group`` rows beside it likewise
    data        the rows with data, in order, without headings that come again and rows of computed figures
    summaries   rows of computed figures ("Mean", "SD"); ``again`` rows where the heading comes again
    """

    table: Table
    heading: int | None
    units: int | None
    group: int | None
    data: Sequence[int]
    summaries: tuple[int, ...] = ()
    again: tuple[int, ...] = ()

    @property
    def width(self) -> int:
        """How many columns the block has."""
        rows = self.table.rows
        sample = self.data if len(self.data) <= 2 * FIRST_ROWS else self.data[:FIRST_ROWS]
        widest = max((len(rows[row]) for row in sample), default=0)
        return max(widest, len(rows[self.heading]) if self.heading is not None else 0)

    def heading_text(self, column: int) -> str:
        """Return the heading of a column as written, "" where there is none."""
        return "" if self.heading is None else self.table.text(self.heading, column)

    def heading_at(self, column: int) -> Heading:
        """Return the heading of a column with name and unit, the unit also from the row of units or of groups."""
        found = heading_of(self.heading_text(column))
        if found.unit is not None:
            return found
        if self.units is not None:
            unit = self.table.text(self.units, column).strip("()[] ")
            return Heading(found.text, found.name, unit if is_unit(unit) else None)
        if self.group is not None and self.heading is not None:
            return Heading(found.text, found.name, self._group_unit(column))
        return found

    def _group_unit(self, column: int) -> str | None:
        assert self.group is not None
        for left in range(column, -1, -1):
            text = self.table.text(self.group, left)
            if text:
                alone = sum(map(bool, self.table.rows[self.group])) == 1
                return heading_of(text).unit if left == column or not (alone and left == 0) else None
        return None


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
    if text[0] in "<>≤≥" or not any(one.isalpha() or one in "%°‰" for one in text):
        return True
    return text.lstrip("+-")[:1].isdigit() and not any(sum(map(str.isalpha, word)) > 2 for word in text.split())


def filled_width(cells: Sequence[str]) -> int:
    """Return how many cells a row has up to its last filled one."""
    return next((width for width in range(len(cells), 0, -1) if cells[width - 1]), 0)


def is_blank(cells: Sequence[str]) -> bool:
    """Tell whether a row holds nothing."""
    return not any(cells)


def blocks_of(table: Table) -> list[Block]:
    """Return the blocks of data in a table, in order; the rows before, between and behind them are no data."""
    rows = table.rows
    starts = _starts(table)
    found = []
    for first, (heading_rows, start) in enumerate(starts):
        end = starts[first + 1][0][0] if first + 1 < len(starts) and starts[first + 1][0] else None
        if end is None:
            end = starts[first + 1][1] if first + 1 < len(starts) else len(rows)
        found.append(_block(table, heading_rows, start, end))
    return [block for block in found if block.data]


def upright(table: Table) -> Table:
    """Return a table whose quantities stand in rows, "Nitrate; 5.02; 5.04; 4.98", with rows and columns exchanged."""
    rows = [row for row in range(min(len(table.rows), MOST_TURNED + 1)) if not is_blank(table.rows[row])]
    if not rows or len(rows) > MOST_TURNED or len(table.rows) > 100 or table.separator == "" and table.sheet is None:
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


def _size(text: str) -> float:
    found = parsed(text)
    plain = under(found.numeral, ".") or under(found.numeral, ",") or "0"
    return float(plain) * 10.0 ** max(-300, min(found.exponent, 300))


def _starts(table: Table) -> list[tuple[list[int], int]]:
    """Rows where data begin, each with the heading rows directly above."""
    starts: list[tuple[list[int], int]] = []
    words: list[int] = []  # text rows directly above the row looked at
    numeric: set[int] = set()  # columns with numbers in the block so far
    blank_before = False
    for row, cells in enumerate(table.rows[: FIRST_ROWS * 5]):
        if is_blank(cells):
            blank_before = blank_before or bool(starts)
            words = [] if not words or len(table.rows[words[-1]]) > 1 else words
            continue
        sorts = [sort_of(table, row, column) for column in range(min(len(cells), 300))]
        if _is_words(sorts) or (not starts and _is_counted(table, row, sorts)):
            if words and words[-1] != row - 1 and table.separator:
                words = []
            words.append(row)
            continue
        columns = {column for column, sort in enumerate(sorts) if sort in ("number", "limit")}
        if _begins(table, starts, words, numeric, columns, sorts, blank_before):
            starts.append((words[-3:], row))
            numeric = set()
        numeric |= columns
        words, blank_before = [], False
    return starts


def _begins(
    table: Table,
    starts: list[tuple[list[int], int]],
    words: list[int],
    numeric: set[int],
    columns: set[int],
    sorts: list[str],
    blank_before: bool,
) -> bool:
    """Tell whether a row with data begins a block: the first, or one whose heading says that something new comes."""
    if not starts:
        return True
    if not words or not columns:
        return False
    heading = table.rows[words[-1]]
    first_heading = table.rows[starts[0][0][-1]] if starts[0][0] else ()
    if list(heading) == list(first_heading):
        return False
    headed = {column for column, text in enumerate(heading) if text}
    if not columns & headed:
        return False
    if numeric and not numeric & columns:
        return True
    if len(headed) > 1:
        return blank_before or bool((columns & headed) - numeric)
    is_quantity = heading_of(heading[min(headed)]).unit is not None or bool(starts[-1][0])
    return blank_before and is_quantity and not table.separator


def _is_words(sorts: list[str]) -> bool:
    filled = [sort for sort in sorts if sort]
    return "text" in filled and all(sort in ("text", "word", "missing") for sort in filled)


def _is_counted(table: Table, row: int, sorts: list[str]) -> bool:
    """Tell whether a row is a heading whose columns are numbered: "Sample, 1, 2, 3"."""
    numbers = [table.text(row, column) for column, sort in enumerate(sorts) if sort == "number"]
    if len(numbers) < 2 or numbers != [str(i) for i in range(1, len(numbers) + 1)] or sorts[0] not in ("", "text"):
        return False
    following = next((cells for cells in table.rows[row + 1 :] if not is_blank(cells)), None)
    return following is not None and sum("." in text or "," in text for text in following) >= 2


def _block(table: Table, above: list[int], start: int, end: int) -> Block:
    heading, units, group = _heading_rows(table, above)
    rows = table.rows
    if isinstance(rows, OneColumn) and rows.plain_from <= start and end == len(rows):
        return Block(table, heading, units, group, range(start, end))
    again, summaries, data = [], [], []
    heading_cells = list(rows[heading]) if heading is not None else None
    figure_follows = False
    for row in range(start, end):
        cells = rows[row]
        if not cells or not any(cells):
            continue
        if figure_follows or (len(cells) == 1 and data and cells[0][0].isalpha() and is_summary(cells[0])):
            summaries.append(row)
            figure_follows = not figure_follows
            continue
        if cells == heading_cells:
            again.append(row)
        elif len(cells) > 1 and _is_summary_row(cells):
            summaries.append(row)
        else:
            data.append(row)
    if units is not None and again:
        data = [row for row in data if list(rows[row]) != list(rows[units])]
    return Block(table, heading, units, group, data, tuple(summaries), tuple(again))


def _heading_rows(table: Table, above: list[int]) -> tuple[int | None, int | None, int | None]:
    if above and not table.separator and table.sheet is None and _is_fact(table.rows[above[-1]][0]):
        above = []
    if not above:
        return None, None, None
    cells = [text for text in table.rows[above[-1]] if text]
    bare = [text.strip("()[] ") for text in cells]
    if len(above) > 1 and all(is_unit(text) or text in ("", "-") for text in bare):
        return above[-2], above[-1], None
    group = above[-2] if len(above) > 1 and len(table.rows[above[-2]]) > 1 else None
    return above[-1], None, group


def _is_fact(text: str) -> bool:
    """Tell whether a line above the readings is a name with a value of its own: "Date: 2026-03-04"."""
    name, mark, value = text.partition(":")
    return bool(mark and value.strip() and name.strip()) and heading_of(text).unit is None


def _is_summary_row(cells: Sequence[str]) -> bool:
    """Tell whether a row holds computed figures: its first filled cell is a word such as "Mean"."""
    first = cells[0] or next(filter(None, cells))
    return not first[0].isdigit() and len(first) <= 40 and is_summary(first)
