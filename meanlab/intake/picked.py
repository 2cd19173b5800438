"""The cells that are to be read, in reading order, with what goes with them."""

from collections.abc import Sequence
from dataclasses import dataclass, field

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.blocks import Block
from meanlab.intake.roles import Role


class NothingToRead(IntakeComplaint):
    """No column of the table holds a reading."""


@dataclass
class Picked:
    """Rows and columns of a block that hold the readings.

    roles        what each column of the block is
    name, unit   as the headings give them
    qualifier    column that holds "<" and ">", None where there is none
    preparation  column that holds the labels of the preparations; ``is_chosen`` where it was chosen, not only found
    is_pool      lines of numbers that make one set: an empty place in them is no missing entry
    """

    block: Block
    rows: Sequence[int]
    columns: list[int]
    roles: Sequence[Role] = ()
    name: str | None = None
    unit: str | None = None
    qualifier: int | None = None
    preparation: int | None = None
    is_chosen: bool = False
    is_pool: bool = False
    warnings: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)

    def places(self) -> list[tuple[int, int]]:
        """Return row and column of each entry, in reading order."""
        table = self.block.table
        return [
            (row, column) for row in self.rows for column in self.columns if not self.is_pool or table.text(row, column)
        ]
