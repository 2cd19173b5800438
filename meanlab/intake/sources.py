"""From a pasted text or the bytes of a file to tables: what a file is, is judged by its content, not by its name."""

import codecs
import re

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.containers import is_plain_text
from meanlab.intake.layout import table_of
from meanlab.intake.table import Table, upright
from meanlab.intake.workbooks import sheets_of

MOST_BYTES = 50_000_000
_CONTROL = re.compile(r"[\x00-\x08\x0e-\x1b\x7f\ufffe\uffff]")
_MARKS = (
    (codecs.BOM_UTF8, "utf-8-sig"),
    (codecs.BOM_UTF32_LE, "utf-32"),
    (codecs.BOM_UTF32_BE, "utf-32"),
    (codecs.BOM_UTF16_LE, "utf-16"),
    (codecs.BOM_UTF16_BE, "utf-16"),
)
_SAVE_AS = "Save the readings as CSV, text or a spreadsheet and choose that file."


def tables_of(source: str | bytes, filename: str | None, decimal: str | None) -> list[Table]:
    """Return the tables of a pasted text or of a file.

    Raises IntakeComplaint for what cannot be read, ChoiceNeeded as `layout.table_of` does.
    """
    if len(source) > MOST_BYTES:
        raise IntakeComplaint(
            f"The {'text' if isinstance(source, str) else 'file'} has {len(source) / 1e6:,.0f} MB; the limit is 50 MB. "
            "Split it, or export only the column with the readings."
        )
    if isinstance(source, str):
        return [upright(table_of(_no_controls(source.removeprefix("\ufeff"), "text"), decimal))]
    if not source.strip():
        raise IntakeComplaint("The file is empty: there is nothing to read in it. Choose the file with the readings.")
    if is_plain_text(source):
        return [upright(table_of(text_of(source), decimal))]
    return [
        upright(Table([[cell.text.strip() for cell in row] for row in sheet.rows], None, sheet))
        for sheet in sheets_of(source, filename or "")
    ]


def text_of(source: bytes) -> str:
    """Return the text of a file: by its mark, as UTF-8, as UTF-16 without a mark, or as Windows-1252.

    Raises IntakeComplaint for bytes that are no text, and for texts that are no tables (web pages, XML, JSON).

    >>> text_of("Länge;µm".encode("cp1252"))
    'Länge;µm'
    """
    text = _no_controls(_decoded(source), "file")
    start = text[:2000].lstrip().casefold()
    if start.startswith(("<!doctype", "<html", "<meta", "<head", "<body")):
        raise IntakeComplaint(f"The file is a web page (HTML) without a table. {_SAVE_AS}")
    if start.startswith("<?xml") or re.match(r"<[a-z][\w:.-]*[\s/>]", start):
        raise IntakeComplaint(f"The file is XML, not a table of readings. {_SAVE_AS}")
    if start.startswith(("{", "[{", "[[", "[\n")) and text.rstrip()[-1:] in "}]":
        raise IntakeComplaint(f"The file is JSON, which is not supported. {_SAVE_AS}")
    return text


def _decoded(source: bytes) -> str:
    name = next((name for mark, name in _MARKS if source.startswith(mark)), "") or _without_mark(source[:4000])
    try:
        return source.decode(name or "utf-8").removeprefix("\ufeff")
    except UnicodeDecodeError as error:
        if name:
            raise IntakeComplaint(
                f"The text of the file is damaged: its encoding ({name}) does not fit. Save it again as UTF-8."
            ) from error
        return source.decode("cp1252", "replace")


def _without_mark(start: bytes) -> str:
    """UTF-16 without its mark: every second byte is zero."""
    if b"\x00" not in start:
        return ""
    for name, zeros in (("utf-16-le", start[1::2]), ("utf-16-be", start[0::2])):
        if zeros.count(0) * 10 >= len(zeros) * 8:
            return name
    raise IntakeComplaint(f"The file is neither text nor a spreadsheet that can be read. {_SAVE_AS}")


def _no_controls(text: str, what: str) -> str:
    """Raise IntakeComplaint where control characters say that this is no text."""
    start = text[:20000]
    if "\x00" in start or len(_CONTROL.findall(start)) > len(start) // 200:
        raise IntakeComplaint(f"The {what} holds characters that are no text. {_SAVE_AS}")
    return text
