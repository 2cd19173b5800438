"""Numbers that stand in a text but not among its entries: none is passed over in silence."""

import re

from meanlab.intake.picked import Picked
from meanlab.intake.table import Table, sort_of

_DECIMAL = re.compile(r"(?<![\w.,])[-+<>≤≥]?\d+[.,]\d")
MOST_ROWS = 20_000
MOST_COLUMNS = 60


def overlooked(picked: Picked) -> list[tuple[str, str]]:
    """Return place and text of the cells with a number that belongs to nothing else and was not read.

    Columns with a role of their own (counters, times, labels, other readings) and facts above the table, "Cell length
    (mm), 10", are no such numbers.
    """
    table, block = picked.block.table, picked.block
    if table.sheet is not None or len(block.data) > MOST_ROWS or block.width > MOST_COLUMNS:
        return []
    places = [*_above(table, _first_row(picked)), *_beside(picked), *_in_heading(picked)]
    return [(table.place(row, column), table.text(row, column)) for row, column in places]


def _first_row(picked: Picked) -> int:
    block = picked.block
    return block.data[0] if block.heading is None else block.heading


def _above(table: Table, first: int) -> list[tuple[int, int]]:
    """Rows above the heading that are no facts, each a name and its value."""
    found: list[tuple[int, int]] = []
    for row in range(min(first, MOST_ROWS)):
        cells = [column for column, text in enumerate(table.rows[row]) if text]
        numbers = [column for column in cells if sort_of(table, row, column) in ("number", "limit", "odd")]
        is_fact = len(cells) == 2 and numbers == cells[1:]
        loose = [column for column in cells if _DECIMAL.match(table.text(row, column))]
        found.extend((row, column) for column in (numbers if not is_fact else []) or loose[:1] if loose)
    return found


def _beside(picked: Picked) -> list[tuple[int, int]]:
    """Cells with a number in columns without a role, of rows without a heading, and odd cells under one."""
    table, block = picked.block.table, picked.block
    open_columns = [
        column
        for column, role in enumerate(picked.roles)
        if role.role in ("text", "empty") and column not in picked.columns
    ]
    return [
        (row, column)
        for row in picked.rows
        for column in open_columns
        if _DECIMAL.search(table.text(row, column))
        and (block.heading is None or sort_of(table, row, column) in ("odd", "number"))
    ]


def _in_heading(picked: Picked) -> list[tuple[int, int]]:
    """A heading of a lone column that holds a number with decimals is perhaps a line of readings."""
    block, column = picked.block, picked.columns[0]
    if block.heading is None or len(picked.columns) > 1 or (block.table.separator and not block.table.turned):
        return []
    return [(block.heading, column)] if _DECIMAL.search(block.heading_text(column)) else []
