"""The entries of the picked cells, as the column reads them: texts, kinds, places and signs beside."""

from collections.abc import Sequence

from meanlab.intake.given import Given
from meanlab.intake.long_column import OneColumn
from meanlab.intake.numerals import Sign
from meanlab.intake.picked import Picked
from meanlab.intake.table import Table


def gathered(picked: Picked, decimal: Sign | None) -> Given:
    """Return the entries of the picked cells in reading order; ``decimal`` is the sign that was chosen."""
    table = picked.block.table
    qualifiers = None
    if picked.qualifier is not None:
        qualifiers = [table.text(row, picked.qualifier) for row, _ in picked.places()]
    if len(picked.columns) == 1 and table.sheet is None:
        column, rows = picked.columns[0], picked.rows

        def on_line(i: int) -> str:
            return table.place(rows[i], column)

        texts, sign = _texts(table, rows, column), _plain_sign(picked)
        return Given(texts, on_line, None, frozenset(), qualifiers, decimal, None, picked.unit, sign)
    places = picked.places()
    across = len(picked.columns) > 1 and table.lines is not None

    def at_place(i: int) -> str:
        return table.place(*places[i]) + (f", field {places[i][1] + 1}" if across else "")

    texts = [table.text(row, column) for row, column in places]
    kinds = None if table.sheet is None else [table.kind(row, column) for row, column in places]
    return Given(texts, at_place, kinds, _computed(table, places), qualifiers, decimal, None, picked.unit)


def _plain_sign(picked: Picked) -> str:
    """The only decimal sign of a long text whose lines from the first picked row on are known to be bare numbers."""
    rows = picked.block.table.rows
    known = isinstance(rows, OneColumn) and isinstance(picked.rows, range) and rows.plain_from <= picked.rows[0]
    return rows.sign if known and isinstance(rows, OneColumn) else ""


def _texts(table: Table, rows: Sequence[int], column: int) -> list[str]:
    if isinstance(table.rows, OneColumn):
        texts = table.rows.texts
        return texts[rows.start : rows.stop] if isinstance(rows, range) else [texts[row] for row in rows]
    return [cells[column] if column < len(cells) else "" for cells in map(table.rows.__getitem__, rows)]


def _computed(table: Table, places: Sequence[tuple[int, int]]) -> frozenset[int]:
    if table.sheet is None:
        return frozenset()
    cells = ((i, table.cell(row, column)) for i, (row, column) in enumerate(places))
    return frozenset(i for i, cell in cells if cell is not None and cell.computed)
