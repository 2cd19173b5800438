"""Files that are no workbook, are locked, or do not hang together: each is told in one sentence with what to do."""

import zipfile

import pytest
from made_workbooks import FILES, biff, compound, rows, with_part, xls_stream, xlsx, xlsx_parts, zipped

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.workbooks import sheets_of

ONE = rows("<c><v>5.02</v></c>")
PNG = b"\x89PNG\r\n\x1a\n" + bytes(50)
ODT = {"mimetype": "application/vnd.oasis.opendocument.text", "content.xml": "<a/>"}
LOCKED_ODS = {
    "mimetype": "application/vnd.oasis.opendocument.spreadsheet",
    "META-INF/manifest.xml": "<m><file-entry><encryption-data/></file-entry></m>",
    "content.xml": bytes(range(256)),
}


def zip_with_password() -> bytes:
    """The flag that announces encryption set in both headers of each part (APPNOTE 6.3 §4.4.4)."""
    data = bytearray(xlsx(ONE))
    for mark, offset in ((b"PK\x03\x04", 6), (b"PK\x01\x02", 8)):
        place = data.find(mark)
        while place >= 0:
            data[place + offset] |= 1
            place = data.find(mark, place + 4)
    return bytes(data)


@pytest.mark.parametrize(
    ("data", "name", "words"),
    [
        (b"", "a.xlsx", "empty"),
        (PNG, "a.xlsx", "a picture .PNG. although its name ends in .xlsx"),
        (b"\xff\xd8\xff\xe0" + bytes(50), "a.xls", "a picture .JPEG."),
        (b"%PDF-1.7\n1 0 obj", "a.csv", "a PDF document"),
        (b"MZ\x90\0" + bytes(50), "a.xlsx", "a program"),
        (b"\x1f\x8b\x08\0" + bytes(50), "a.xlsx", "a compressed file"),
        (b"7z\xbc\xaf\x27\x1c", "a.xlsx", "a compressed archive"),
        (b"SQLite format 3\0", "a.ods", "a database"),
        (b"{\\rtf1 5.02}", "a.xls", "a formatted text document"),
        (b"5.02\n5.04\n", "a.xlsx", "The file is a text although its name ends in .xlsx"),
        (bytes(range(256)) * 8, "a.xlsx", "no text and no workbook"),
        (zipped({"readings.csv": "5.02\n"}), "a.xlsx", "a zip archive, no workbook"),
        (zipped({}), "a.xlsx", "a zip archive, no workbook"),
        (
            zipped({"[Content_Types].xml": "<T/>", "word/document.xml": "<d/>"}),
            "a.docx",
            "a text document, no workbook",
        ),
        (zipped({"[Content_Types].xml": "<T/>", "ppt/presentation.xml": "<d/>"}), "a.xlsx", "a set of slides"),
        (zipped(ODT), "a.ods", "a text document, no workbook"),
        (zipped(LOCKED_ODS), "a.ods", "locked with a password"),
        (zip_with_password(), "a.xlsx", "locked with a password"),
        (compound({"EncryptionInfo": b"", "EncryptedPackage": b"x"}), "a.xlsx", "locked with a password"),
        (compound({"WordDocument": b""}), "a.xls", "a text document"),
        (compound({"Notes": b""}), "a.xls", "an office file of another kind"),
        (b"\x09\x08\x08\x00\x00\x05\x05\x00" + bytes(50), "a.xls", "very old kind"),
        (zipped(xlsx_parts(ONE), zipfile.ZIP_LZMA), "a.xlsx", "damaged"),
        (zipped({"[Content_Types].xml": "<T/>"}), "a.xlsx", "damaged"),
        (xlsx("<sheetData/>"), "a.xlsx", "no filled cell"),
        (xlsx(rows('<c t="s"><v>7</v></c>')), "a.xlsx", "damaged"),
        (with_part("xl/worksheets/sheet1.xml", "<?xml version='1.0' encoding='shift_jis'?><a/>"), "a.xlsx", "damaged"),
        (with_part("xl/worksheets/sheet1.xml", "<a><b></a>"), "a.xlsx", "damaged"),
        ((FILES / "damaged_sheet.xlsx").read_bytes(), "a.xlsx", "damaged"),
        (compound({"Workbook": xls_stream(biff(0x203, b"\0"))}), "a.xls", "damaged"),
        (compound({"Workbook": xls_stream(b"")[:-4]}), "a.xls", "damaged"),
    ],
)
def test_a_file_that_cannot_be_read_is_told_with_its_reason(data: bytes, name: str, words: str) -> None:
    """One sentence says what the file is and what to do, whatever its name says."""
    with pytest.raises(IntakeComplaint, match=words) as caught:
        sheets_of(data, name)
    assert any(advice in str(caught.value) for advice in ("Save", "save", "Choose", "choose", "Fetch"))
