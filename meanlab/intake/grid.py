"""A table as cells: what a delimited text or one sheet of a workbook is before anything is taken for a reading."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

Kind = Literal["text", "number", "date", "error", "formula", "boolean"]


@dataclass(frozen=True, slots=True)
class Cell:
    """One cell.

    text      what the file holds, as text: a number by its shortest decimal text, with the zeros its number format
              shows ("5.10"); "" for an empty cell
    kind      "formula" is a formula without a stored result, "error" a cell in error, both with what is shown in text
    computed  True for a stored number with more digits than an instrument shows
    """

    text: str
    kind: Kind = "text"
    computed: bool = False


EMPTY = Cell("")


@dataclass(frozen=True)
class Sheet:
    """One sheet, or the one table of a delimited text.

    name            of the sheet, "" for a text
    rows            cells from the first row and column on, each row without its trailing empty cells
    hidden          True for a hidden sheet; hidden_rows and hidden_columns are counted from 0
    remarks         sentences about this sheet that must be seen
    """

    name: str
    rows: Sequence[Sequence[Cell]]
    hidden: bool = False
    hidden_rows: frozenset[int] = frozenset()
    hidden_columns: frozenset[int] = frozenset()
    remarks: tuple[str, ...] = ()
