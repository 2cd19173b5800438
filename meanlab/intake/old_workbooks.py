"""Workbooks of the older binary kinds (.xls, .xlsb), read by python-calamine.

The library can ask for any amount of memory and end its whole process on a hostile file, so this module is only ever
used by the child process (``child.py``).
"""

import datetime
import io
from dataclasses import replace

import python_calamine

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.building import Room, SheetBuilder, shown_text
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.number_formats import GENERAL, NumberFormat
from meanlab.intake.parts import DAMAGED, LOCKED

_UNSEEN = (
    "In this kind of workbook (.xlsb, or .xls of before 1997) percent formats, hidden rows and cells in error cannot "
    "be seen: compare the readings with the sheet, or save it as .xlsx."
)


def read_old_workbook(data: bytes) -> tuple[Sheet, ...]:
    """All sheets of an .xls or .xlsb workbook; raises IntakeComplaint when it is damaged or locked."""
    try:
        with python_calamine.load_workbook(io.BytesIO(data)) as book:
            room = Room()
            return tuple(
                _sheet(book, about, room)
                for about in book.sheets_metadata
                if about.typ == python_calamine.SheetTypeEnum.WorkSheet
            )
    except python_calamine.PasswordError as error:
        raise IntakeComplaint(LOCKED) from error
    except (python_calamine.CalamineError, ValueError, OSError) as error:
        if isinstance(error, IntakeComplaint):
            raise
        raise IntakeComplaint(DAMAGED) from error


def _sheet(book: python_calamine.CalamineWorkbook, about: python_calamine.SheetMetadata, room: Room) -> Sheet:
    hidden = about.visible != python_calamine.SheetVisibleEnum.Visible
    builder = SheetBuilder(about.name, room, hidden)
    sheet = book.get_sheet_by_name(about.name)
    plain = NumberFormat(GENERAL)
    _, first_column = sheet.start or (0, 0)
    # the library hands over the empty rows before the first cell, but not the empty columns
    for row, values in enumerate(sheet.iter_rows()):
        for column, value in enumerate(values, first_column):
            builder.put(row, column, _cell(value, plain))
    return replace(builder.sheet(), remarks=(_UNSEEN,))


def _cell(value: object, plain: NumberFormat) -> Cell:
    if isinstance(value, bool):
        return Cell("TRUE" if value else "FALSE", "boolean")
    if isinstance(value, int | float):
        return plain.cell(float(value))
    if isinstance(value, datetime.date | datetime.time | datetime.timedelta):
        return Cell(str(value), "date")
    return Cell(shown_text(str(value)))
