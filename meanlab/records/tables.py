"""A table of results as CSV and as a workbook: numbers in full, texts that no spreadsheet takes for a formula."""

import csv
import io
from collections.abc import Iterable, Sequence
from math import isnan
from typing import Any

from openpyxl import Workbook
from openpyxl.cell import WriteOnlyCell

from meanlab.core.printable import printable
from meanlab.records.numbers import COMMANDS, safe

MOST_IN_A_CELL = 32_000  # the format holds 32,767 characters


def table_csv(headings: Sequence[str], rows: Iterable[Sequence[Any]], sign: str = ".") -> bytes:
    """Return a table as CSV in UTF-8; with a decimal comma the fields stand between semicolons.

    >>> table_csv(["lot", "mean"], [["=A1", 5.5]], ",").decode("utf-8-sig")
    "lot;mean\\r\\n'=A1;5,5\\r\\n"
    """
    text = io.StringIO()
    writer = csv.writer(text, delimiter=";" if sign == "," else ",", lineterminator="\r\n")
    writer.writerow([safe(str(heading)) for heading in headings])
    for row in rows:
        writer.writerow([_field(value, sign) for value in row])
    return text.getvalue().encode("utf-8-sig", "replace")


def _field(value: Any, sign: str) -> str:
    if _is_nothing(value):
        return ""
    if isinstance(value, int | float) and not isinstance(value, bool):
        return repr(value).replace(".", sign)
    return safe(str(value))


def _is_nothing(value: Any) -> bool:
    return value is None or (isinstance(value, float) and isnan(value))


def table_xlsx(headings: Sequence[str], rows: Iterable[Sequence[Any]], name: str = "Samples") -> bytes:
    """Return a table as a workbook of one sheet; every text is a text, whatever it begins with."""
    book = Workbook(write_only=True)
    sheet = book.create_sheet(name)
    sheet.freeze_panes = "A2"
    for row in (headings, *rows):
        sheet.append([_cell(sheet, value) for value in row])
    content = io.BytesIO()
    book.save(content)
    return content.getvalue()


def _cell(sheet: Any, value: Any) -> Any:
    if _is_nothing(value):
        return None
    if isinstance(value, int | float) and not isinstance(value, bool):
        return value
    text = printable(str(value))[:MOST_IN_A_CELL]
    cell = WriteOnlyCell(sheet, value=text)
    if text.startswith(COMMANDS):
        cell.data_type, cell.quotePrefix = "s", True
    return cell
