"""Workbook files: which kind a file is, judged by its content, and its sheets."""

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.child import sheets_from_child
from meanlab.intake.compound import Compound
from meanlab.intake.containers import Workbook, workbook_kind
from meanlab.intake.grid import Sheet
from meanlab.intake.ods import read_ods
from meanlab.intake.page_tables import read_page
from meanlab.intake.parts import Parts
from meanlab.intake.xls import is_readable, read_xls
from meanlab.intake.xlsx import read_xlsx
from meanlab.intake.xml_workbooks import read_xml_workbook

SMALL = 2 * 2**20


def sheets_of(data: bytes, filename: str = "") -> tuple[Sheet, ...]:
    """The sheets of a workbook file; raises IntakeComplaint when it is none, damaged, locked or too large.

    Small .xlsx and .ods files are read here: their reader counts what it takes. Everything else is read in a child
    process with limits.
    """
    kind, parts = workbook_kind(data, filename)
    size = parts.unpacked if parts else len(data)
    if size > SMALL or kind in ("xlsb", "page") or (kind == "xls" and not _is_readable_xls(data)):
        sheets = sheets_from_child(data, kind)
    else:
        sheets = read_kind(data, kind)
    if not any(sheet.rows for sheet in sheets):
        raise IntakeComplaint("The workbook holds no filled cell. Choose the workbook that holds the readings.")
    return sheets


def read_kind(data: bytes, kind: Workbook) -> tuple[Sheet, ...]:
    """The sheets of a workbook of a known kind, read in this process."""
    if kind == "xlsx":
        return read_xlsx(Parts(data))
    if kind == "ods":
        return read_ods(Parts(data))
    if kind == "xml":
        return read_xml_workbook(data)
    if kind == "page":
        return read_page(data)
    if kind == "xls" and _is_readable_xls(data):
        return read_xls(Compound(data).stream("Workbook"))
    from meanlab.intake.old_workbooks import read_old_workbook

    return read_old_workbook(data)


def _is_readable_xls(data: bytes) -> bool:
    book = Compound(data)
    return "Workbook" in book.names() and is_readable(book.stream("Workbook"))
