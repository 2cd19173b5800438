"""Workbook files: which kind a file is, judged by its content, and its sheets."""

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.grid import Sheet
from meanlab.intake.parts import Parts
from meanlab.intake.xlsx import read_xlsx


def sheets_of(data: bytes, filename: str = "") -> tuple[Sheet, ...]:
    """The sheets of a workbook file; raises IntakeComplaint when it is none, damaged, locked or too large."""
    if not data:
        raise IntakeComplaint("The file is empty. Choose the file that holds the readings.")
    return read_xlsx(Parts(data))
