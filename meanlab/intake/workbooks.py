"""Workbook files: which kind a file is, judged by its content, and its sheets."""

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.child import sheets_from_child
from meanlab.intake.compound import Compound
from meanlab.intake.containers import Workbook, workbook_kind
from meanlab.intake.grid import Sheet
from meanlab.intake.ods import read_ods
from meanlab.intake.page_tables import read_page
from meanlab.intake.parts import Parts
from meanlab.intake.xls import read_xls
from meanlab.intake.xlsx import read_xlsx
from meanlab.intake.xml_workbooks import read_xml_workbook

SMALL = 2 * 2**20
SMALL_PAGE = 2**16
_ONLY_IN_A_CHILD = ("xlsb", "early xls")


def sheets_of(data: bytes, filename: str = "") -> tuple[Sheet, ...]:
    """The sheets of a workbook file; raises IntakeComplaint when it is none, damaged, locked or too large.

    A file of usual size is read here, where its reader counts what it takes. A large one, and one of the kinds whose
    reader cannot be trusted with a hostile file, is read in a child process with limits.
    """
    kind, parts = workbook_kind(data, filename)
    size = parts.unpacked if parts else len(data)
    if kind in _ONLY_IN_A_CHILD or size > (SMALL_PAGE if kind == "page" else SMALL):
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
    if kind == "xls":
        return read_xls(Compound(data).stream("Workbook"))
    if kind == "xml":
        return read_xml_workbook(data)
    if kind == "page":
        return read_page(data)
    from meanlab.intake.old_workbooks import read_old_workbook

    return read_old_workbook(data)
