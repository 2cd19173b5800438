"""Numbers that stand in a text but not among its entries: none is passed over in silence."""

import re

from meanlab.intake.picked import Picked
from meanlab.intake.table import sort_of

_DECIMAL = re.compile(r"(?<![\w.,])[-+<>≤≥]?\d+[.,]\d")
_DECIMAL_AT_END = re.compile(r"(?:^|\s)[-+<>≤≥]?\d+[.,]\d+$")
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
    places = [*_above(picked), *_beside(picked), *_in_heading(picked)]
    return [(table.place(row, column), table.text(row, column)) for row, column in places]


def _above(picked: Picked) -> list[tuple[int, int]]:
    """Rows above the heading that are no facts, each a name and its value; without a heading facts are no facts."""
    table, block = picked.block.table, picked.block
    first = block.data[0] if block.heading is None else block.heading
    found: list[tuple[int, int]] = []
    for row in range(min(first, MOST_ROWS)):
        cells = [column for column, text in enumerate(table.rows[row]) if text]
        numbers = [column for column in cells if sort_of(table, row, column) in ("number", "limit", "odd")]
        is_fact = len(cells) == 2 and numbers == cells[1:] and block.heading is not None
        loose = [column for column in cells if _is_loose(table.text(row, column), block.heading is not None)]
        found.extend((row, column) for column in (numbers if not is_fact else []) or loose[:1] if loose)
    return found


def _is_loose(text: str, is_headed: bool) -> bool:
    """Tell whether a number with decimals stands in a text that is no fact, "Cell length: 10.0 mm"."""
    found = _DECIMAL.search(text)
    return bool(found) and not (is_headed and found is not None and found.start() and any(one in text for one in ":="))


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
        and (not block.heading_text(column) or sort_of(table, row, column) in ("odd", "number"))
    ]


def _in_heading(picked: Picked) -> list[tuple[int, int]]:
    """A heading that ends in a number with decimals, "Blank 4.95", is perhaps a line of readings."""
    block = picked.block
    if block.heading is None:
        return []
    lone = len(picked.columns) == 1 and (not block.table.separator or block.table.turned)
    number = _DECIMAL if lone else _DECIMAL_AT_END
    columns = picked.columns if lone else range(len(block.table.rows[block.heading]))
    return [(block.heading, column) for column in columns if number.search(block.heading_text(column))]
