"""The blocks of data in a table: which rows are headings, data, computed figures, and which begin something new."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

from meanlab.intake.heading import Heading, heading_of
from meanlab.intake.long_column import OneColumn
from meanlab.intake.table import FIRST_ROWS, Table, is_blank, parsed, sort_of
from meanlab.intake.units import is_unit
from meanlab.intake.words import is_summary


@dataclass(frozen=True)
class Block:
    """A run of data rows under one heading.

    heading     row of the headings, None where there is none; ``units`` and ``group`` rows beside it likewise
    data        the rows with data, in order, without headings that come again and rows of computed figures
    summaries   rows of computed figures ("Mean", "SD"); ``again`` rows where the heading comes again;
                ``tail`` rows of words below the data
    """

    table: Table
    heading: int | None
    units: int | None
    group: int | None
    data: Sequence[int]
    summaries: tuple[int, ...] = ()
    again: tuple[int, ...] = ()
    tail: tuple[int, ...] = ()

    @cached_property
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
        if _is_words(sorts, not starts) or (not starts and _is_counted(table, row, sorts)):
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


def _is_words(sorts: list[str], at_the_top: bool = False) -> bool:
    """Tell whether a row holds words alone; above all data a date may stand among them."""
    filled = [sort for sort in sorts if sort]
    words = ("text", "word", "missing", "stamp") if at_the_top else ("text", "word", "missing")
    return "text" in filled and all(sort in words for sort in filled)


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
    if isinstance(rows, OneColumn):
        return Block(table, heading, units, group, *_one_column(rows.texts, heading, range(start, end)))
    again: list[int] = []
    summaries: list[int] = []
    data: list[int] = []
    heading_cells = list(rows[heading]) if heading is not None else None
    for row in range(start, end):
        cells = rows[row]
        if not cells or not any(cells):
            continue
        if cells == heading_cells:
            again.append(row)
        elif len(cells) > 1 and _is_summary_row(cells):
            summaries.append(row)
        else:
            data.append(row)
    data, tail = _without_tail(table, data)
    if units is not None and again:
        data = [row for row in data if list(rows[row]) != list(rows[units])]
    return Block(table, heading, units, group, data, tuple(summaries), tuple(again), tail)


def _without_tail(table: Table, data: list[int]) -> tuple[list[int], tuple[int, ...]]:
    """Data without the words below them: rows with one text in the first column, where the others have numbers."""
    firsts = [sort_of(table, row, 0) for row in data[:FIRST_ROWS]]
    numbered = sum(sort in ("number", "stamp") for sort in firsts) * 2 > len(firsts)
    end = len(data)
    while end and sum(map(bool, table.rows[data[end - 1]])) == 1 and sort_of(table, data[end - 1], 0) == "text":
        end -= 1
    parted = end < len(data) and is_blank(table.rows[data[end] - 1])
    wide = max((len(table.rows[row]) for row in data[:FIRST_ROWS]), default=0) > 1
    return (data[:end], tuple(data[end:])) if wide and end and (numbered or parted) else (data, ())


def _one_column(
    texts: Sequence[str], heading: int | None, places: range
) -> tuple[Sequence[int], tuple[int, ...], tuple[int, ...]]:
    """Rows of data, of computed figures and of the heading again in a table with one entry a line."""
    data: list[int] = [row for row in places if texts[row]]
    different = set(texts[places.start : places.stop])
    name = texts[heading] if heading is not None else ""
    figures = {text for text in different if text[:1].isalpha() and is_summary(text)}
    marked = {text for text in different if text[-1:] in ")]" and is_summary(parsed(text[:60]).remark)}
    if not figures and not marked and (not name or name not in different):
        return data, (), ()
    again: list[int] = []
    summaries: list[int] = []
    kept: list[int] = []
    figure_follows = False
    for row in data:
        if figure_follows or (kept and texts[row] in figures):
            summaries.append(row)
            figure_follows = not figure_follows
        elif texts[row] in marked:
            summaries.append(row)
        else:
            (again if name and texts[row] == name else kept).append(row)
    return kept, tuple(summaries), tuple(again)


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
