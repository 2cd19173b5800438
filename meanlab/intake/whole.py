"""A whole table as columns, for a table of many samples: nothing is taken for a reading yet."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from decimal import Decimal, InvalidOperation

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.blocks import Block, blocks_of
from meanlab.intake.roles import listed, roles_of
from meanlab.intake.separators import ChoiceNeeded
from meanlab.intake.sources import tables_of
from meanlab.intake.table import Table

Entry = str | Decimal | float


@dataclass(frozen=True)
class WholeTable:
    """One table of a text or a file.

    sheet     name of the sheet, "" for a text
    headings  a name for each column, none twice
    units     unit that the heading of each column gives, "" where it gives none
    roles     what each column seems to hold: "readings", "label", "counter", … (`found.Column`)
    columns   the entries of each column: texts as written; stored numbers exactly, computed ones as doubles
    """

    sheet: str
    headings: tuple[str, ...]
    units: tuple[str, ...]
    roles: tuple[str, ...]
    columns: tuple[Sequence[Entry], ...]

    @property
    def height(self) -> int:
        """How many rows."""
        return len(self.columns[0]) if self.columns else 0


def whole_tables(source: str | bytes, filename: str | None = None) -> list[WholeTable]:
    """Return the tables with at least two columns in a pasted text or the bytes of a file, one a sheet.

    Raises IntakeComplaint for what cannot be read.

    >>> whole_tables("lot\\tnitrate\\nA\\t5.02\\nA\\t5.04\\nB\\t4.98")[0].headings
    ('lot', 'nitrate')
    """
    try:
        tables = [_as_written(table) for table in tables_of(source, filename, None)]
        found = [_whole(table) for table in tables]
    except ChoiceNeeded as open_question:
        raise IntakeComplaint(open_question.question) from None
    return [one for one in found if one is not None]


def _as_written(table: Table) -> Table:
    """A table that was turned, because it may be one quantity a row, as it stands in the file."""
    if not table.turned:
        return table
    rows = [[table.text(row, column) for row in range(len(table.rows))] for column in range(_width(table))]
    return replace(table, rows=rows, turned=False)


def _width(table: Table) -> int:
    return max(map(len, table.rows), default=0)


def _whole(table: Table) -> WholeTable | None:
    blocks = blocks_of(table)
    if not blocks:
        return None
    largest = max(blocks, key=lambda block: len(block.data))
    width = largest.width
    if width < 2:
        return None
    headings = [largest.heading_text(column).strip() or f"column {column + 1}" for column in range(width)]
    alike = [block for block in blocks if block.width == width and _headings(block) in ([], _headings(largest))]
    rows = [row for block in alike for row in block.data]
    roles = {column.column_index: column.role for column in listed(largest, roles_of(largest))}
    return WholeTable(
        table.name,
        tuple(_apart(headings)),
        tuple(largest.heading_at(column).unit or "" for column in range(width)),
        tuple(roles.get(column, "text") for column in range(width)),
        tuple([_entry(table, row, column) for row in rows] for column in range(width)),
    )


def _headings(block: Block) -> list[str]:
    return [] if block.heading is None else [block.heading_text(column) for column in range(block.width)]


def _apart(headings: Sequence[str]) -> list[str]:
    """Headings of which none stands twice.

    >>> _apart(["x", "x", "y"])
    ['x', 'x (2)', 'y']
    """
    found: list[str] = []
    for heading in headings:
        name, count = heading, 1
        while name in found:
            count += 1
            name = f"{heading} ({count})"
        found.append(name)
    return found


def _entry(table: Table, row: int, column: int) -> Entry:
    text, cell = table.text(row, column), table.cell(row, column)
    if cell is None or cell.kind != "number":
        return text
    try:
        return float(text) if cell.computed else Decimal(text)
    except (InvalidOperation, ValueError):
        return text
