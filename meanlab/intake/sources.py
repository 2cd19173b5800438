"""From a pasted text or the bytes of a file to tables: what a file is, is judged by its content, not by its name."""

import codecs
import re

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.layout import table_of
from meanlab.intake.table import Table

MOST_BYTES = 50_000_000
_BINARY = {
    b"%PDF": "a PDF document",
    b"\x89PNG": "a PNG picture",
    b"\xff\xd8\xff": "a JPEG picture",
    b"GIF8": "a GIF picture",
    b"BM": "",
    b"MZ": "a program",
    b"\x7fELF": "a program",
    b"\x1f\x8b": "a compressed archive (gzip)",
    b"BZh": "a compressed archive (bzip2)",
    b"\xfd7zXZ": "a compressed archive (xz)",
    b"7z\xbc\xaf": "a compressed archive (7z)",
    b"Rar!": "a compressed archive (rar)",
    b"II*\x00": "a TIFF picture",
    b"MM\x00*": "a TIFF picture",
    b"SQLite format 3": "a database",
    b"{\\rtf": "a rich-text document",
    b"PAR1": "a Parquet file",
    b"\x89HDF": "an HDF5 file",
    b"RIFF": "a media file",
    b"OggS": "a media file",
    b"ID3": "a media file",
}
_CONTROL = re.compile(r"[\x00-\x08\x0e-\x1b\x7f\ufffe\uffff]")
_MARKS = (
    (codecs.BOM_UTF8, "utf-8-sig"),
    (codecs.BOM_UTF32_LE, "utf-32"),
    (codecs.BOM_UTF32_BE, "utf-32"),
    (codecs.BOM_UTF16_LE, "utf-16"),
    (codecs.BOM_UTF16_BE, "utf-16"),
)


def tables_of(source: str | bytes, filename: str | None, decimal: str | None) -> list[Table]:
    """Return the tables of a pasted text or of a file.

    Raises IntakeComplaint for a file that is none of those that can be read, ChoiceNeeded as `layout.table_of` does.
    """
    if len(source) > MOST_BYTES:
        raise IntakeComplaint(
            f"The {'text' if isinstance(source, str) else 'file'} has {len(source) / 1e6:,.0f} MB; the limit is 50 MB. "
            "Split it, or export only the column with the readings."
        )
    if isinstance(source, str):
        return [_pasted(source, decimal)]
    if source[:4] in (b"PK\x03\x04", b"PK\x05\x06", b"PK\x07\x08") or source[:8] == b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1":
        return _workbook(source, filename or "")
    return [_text_file(source, decimal)]


def _workbook(source: bytes, filename: str) -> list[Table]:
    from meanlab.intake.workbooks import sheets_of  # type: ignore[import-not-found,unused-ignore]

    return [Table([[cell.text.strip() for cell in row] for row in sheet.rows], None, sheet) for sheet in sheets_of(source, filename)]


def _pasted(text: str, decimal: str | None) -> Table:
    if "\x00" in text:
        raise IntakeComplaint("The text holds characters that are no text: copy the readings again.")
    return table_of(text.removeprefix("\ufeff"), decimal)


def _text_file(source: bytes, decimal: str | None) -> Table:
    if not source.strip():
        raise IntakeComplaint("The file is empty: there is nothing to read in it.")
    for start, kind in _BINARY.items():
        if kind and source.startswith(start):
            raise IntakeComplaint(f"The file is {kind}, not a table. Save the readings as CSV, text or a spreadsheet.")
    text = decoded(source)
    start = text[:2000].lstrip().casefold()
    if start.startswith(("<!doctype html", "<html", "<table", "<meta", "<head", "<body")):
        raise IntakeComplaint("The file is a web page (HTML), whatever its name says. Open it and save it as .xlsx or CSV.")
    if start.startswith("<"):
        raise IntakeComplaint("The file is XML, not a table. Open it in the program it comes from and save it as CSV.")
    if start.startswith(("{", "[{", "[[")) and source.rstrip()[-1:] in b"}]":
        raise IntakeComplaint("The file is JSON, which is not supported. Save the readings as CSV, text or a spreadsheet.")
    return table_of(text, decimal)


def decoded(source: bytes) -> str:
    """Return the text of a file: by its mark, as UTF-8, as UTF-16 without a mark, or as Windows-1252.

    Raises IntakeComplaint for bytes that are no text.
    """
    for mark, name in _MARKS:
        if source.startswith(mark):
            return _checked(source, name)
    half = source[:4000]
    if b"\x00" in half:
        for name, low in (("utf-16-le", half[1::2]), ("utf-16-be", half[0::2])):
            if low.count(0) * 10 >= len(low) * 8:
                return _checked(source, name)
        raise IntakeComplaint("The file is no text and no spreadsheet that can be read. Save it as CSV or .xlsx.")
    try:
        return _no_controls(source.decode("utf-8"))
    except UnicodeDecodeError:
        return _no_controls(source.decode("cp1252", "replace"))


def _checked(source: bytes, name: str) -> str:
    try:
        return _no_controls(source.decode(name).removeprefix("\ufeff"))
    except UnicodeDecodeError as error:
        raise IntakeComplaint(
            "The file's text is damaged: it says it is Unicode but cannot be read as such. Save it again as UTF-8."
        ) from error


def _no_controls(text: str) -> str:
    if len(_CONTROL.findall(text[:20000])) > len(text[:20000]) // 200:
        raise IntakeComplaint("The file is no text and no spreadsheet that can be read. Save it as CSV or .xlsx.")
    return text
