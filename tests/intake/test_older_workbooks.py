"""Sheets out of .xls, .xlsb, .ods, one XML text and a web page.

The expected cells are what was put in: by xlwt (files/many_kinds.xls), or by hand after [MS-XLS], [MS-XLSB] and
OpenDocument 1.3; python-calamine is asked as an independent reader.
"""

import struct

import pytest
import python_calamine
from made_workbooks import FILES, biff, column, compound, file, ods, ods_content, texts, xls_stream, xlsb

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.workbooks import sheets_of

LEAD = [
    "Lead (µg/L)",
    "5.10",
    "5.20",
    "5.00",
    "5.25",
    "1234.50",
    "-0.05",
    "2026-03-04",
    "5.50 mg/L",
    *["S1"] * 3,
    "abcd",
]


def test_an_old_workbook_gives_all_that_a_new_one_gives() -> None:
    """Zeros, percent, dates, truth, errors, units, merged labels, fonts and what is hidden are read from .xls."""
    bench, old, _ = file("many_kinds.xls")
    assert (bench.name, old.hidden) == ("Bench µ", True)
    assert column(bench, 0) == LEAD
    assert column(bench, 1)[1:9] == ["5.10%", "5.20%", "5.00%", "5.25%", "1234.50%", "-0.05%", "TRUE", "5.50"]
    assert (bench.rows[7][3].text, bench.rows[7][3].kind) == ("#DIV/0!", "error")
    assert (bench.hidden_rows, bench.hidden_columns) == (frozenset({3}), frozenset({2}))
    assert bench.remarks == ("Cell B9 is struck through, and read like the others.",)


def test_long_texts_of_an_old_workbook_agree_with_another_reader() -> None:
    """Texts in one and two bytes a letter that go on over records are the same as python-calamine reads."""
    theirs = python_calamine.load_workbook(str(FILES / "many_kinds.xls")).get_sheet_by_name("Long").to_python()
    assert [[row[0].text, float(row[1].text)] for row in file("many_kinds.xls")[2].rows] == theirs


def test_an_old_workbook_made_by_hand() -> None:
    """Short numbers, comments and results of formulas are read record by record as [MS-XLS] lays them down."""

    def at(row: int, more: bytes) -> bytes:
        return struct.pack("<3H", row, 0, 0) + more

    result = struct.pack("<B5xH", 0, 0xFFFF)
    stream = xls_stream(
        biff(0x27E, at(0, struct.pack("<i", (502 << 2) | 3)))
        + biff(0x27E, at(1, struct.pack("<i", 7 << 2 | 2)))
        + biff(0x27E, at(2, struct.pack("<d", 2.5)[4:]))
        + biff(0x06, at(3, struct.pack("<d", 5.25) + b"\0" * 8))
        + biff(0x06, at(4, result + b"\0" * 8))
        + biff(0x207, struct.pack("<HB", 5, 0) + b"<0.05")
        + biff(0x5D, struct.pack("<4H", 0x15, 18, 0x19, 9) + b"\0" * 14)
        + biff(0x1B6, b"\0" * 10 + struct.pack("<HHI", 6, 0, 0))
        + biff(0x3C, b"\0bubble")
        + biff(0x1C, struct.pack("<4H", 1, 0, 0, 9) + b"\0" * 4)
    )
    (sheet,) = sheets_of(compound({"Workbook": stream}))
    assert column(sheet, 0) == ["5.02", "7", "2.5", "5.25", "<0.05"]
    assert sheet.remarks == ("Cell A2 has a comment: “bubble”",)


def test_figures_of_the_cells_above_are_known_in_an_old_workbook() -> None:
    """A mean, a scatter and a sum of the cells above, each stored with its result, are left out and said."""
    range_above = b"\x25" + struct.pack("<4H", 0, 1, 0xC000, 0xC000)
    formulas = [range_above + end for end in (b"\x42\x01\x05\x00", b"\x42\x01\x0c\x00", b"\x19\x10\x00\x00")]
    records = b"".join(biff(0x203, struct.pack("<3Hd", row, 0, 0, 5 + row / 8)) for row in range(2))
    for row, tokens in enumerate(formulas, 2):
        records += biff(0x06, struct.pack("<3HdH4xH", row, 0, 0, 5.0625, 0, len(tokens)) + tokens)
    (sheet,) = sheets_of(compound({"Workbook": xls_stream(records)}))
    assert column(sheet, 0) == ["5", "5.125"]
    assert sheet.remarks[0].startswith("Cells A3, A4, A5 are calculated from the cells above")


def test_a_locked_old_workbook_is_told() -> None:
    """A workbook with the record that announces its encryption is refused with the word password."""
    with pytest.raises(IntakeComplaint, match="password"):
        sheets_of(compound({"Workbook": xls_stream(b"", before=biff(0x2F, b"\0" * 54))}))


def test_a_workbook_before_1997_and_a_binary_one_are_read_with_a_word_on_what_they_hide() -> None:
    """Both come through the child process with their numbers in place and one remark."""
    number = biff(0x203, struct.pack("<3Hd", 2, 1, 0, 5.02))
    (old,) = sheets_of(compound({"Book": xls_stream(number, version=0x500)}))
    assert texts(old) == [[], [], ["", "5.02"]]
    (binary,) = sheets_of(xlsb([5.02, 5.04, 4.98], first_row=2, column=1))
    assert texts(binary) == [["0.5"], [], ["", "5.02"], ["", "5.04"], ["", "4.98"]]
    assert ".xlsb" in binary.remarks[0]
    assert old.remarks == binary.remarks


def test_an_open_document_workbook_shows_its_zeros_in_any_language() -> None:
    """The text beside the number tells the zeros, whichever decimal and thousands sign it is written with."""

    def cell(value: str, shown: str, kind: str = "float") -> str:
        return (
            f'<table:table-row><table:table-cell office:value-type="{kind}" office:value="{value}">'
            f"<text:p>{shown}</text:p></table:table-cell></table:table-row>"
        )

    pairs = [("5.1", "5.10"), ("5.1", "5,10"), ("1234.5", "1.234,50"), ("1234", "1,234"), ("5.0234", "5.0")]
    pairs += [("0.05", "&lt;0.05"), ("-5.1", "-5.100")]
    (sheet,) = sheets_of(
        ods(
            '<table:table table:name="R">'
            + "".join(cell(*pair) for pair in pairs)
            + cell("0.0381", "3,81 %", "percentage")
            + cell("5.5", "5,50 €", "currency")
            + "</table:table>"
        )
    )
    expected = ["5.10", "5.10", "1234.50", "1234", "5.0234", "<0.05", "-5.100", "3.81%", "5.50"]
    assert column(sheet, 0) == expected


def test_an_open_document_workbook_gives_all_kinds_of_cells() -> None:
    """Dates, times, truth, errors, formulas, repeats, spans, comments, strike-through and hiding are read from .ods."""
    styles = (
        '<style:style style:name="away"><style:table-properties table:display="false"/></style:style>'
        '<style:style style:name="gone"><style:text-properties style:text-line-through-style="solid"/></style:style>'
    )
    tables = (
        '<table:table table:name="R"><table:table-column/><table:table-column table:visibility="collapse"/>'
        '<table:table-row table:number-rows-repeated="2"/>'
        '<table:table-row><table:table-cell office:value-type="date" office:date-value="2026-03-04T08:30:00"/>'
        '<table:table-cell office:value-type="time" office:time-value="PT8H05M00S"/>'
        '<table:table-cell office:value-type="boolean" office:boolean-value="true"><text:p>WAHR</text:p>'
        '</table:table-cell><table:table-cell table:formula="of:=1/0" office:value-type="string"><text:p>#DIV/0!'
        '</text:p></table:table-cell><table:table-cell table:formula="of:=[.A1]*2"/></table:table-row>'
        '<table:table-row table:visibility="filter"><table:table-cell table:number-columns-repeated="2" '
        'office:value-type="float" office:value="5" table:style-name="gone"><text:p>5</text:p>'
        "<office:annotation><text:p>bubble</text:p></office:annotation></table:table-cell>"
        '<table:covered-table-cell/><table:table-cell office:value-type="string"><text:p>a<text:s text:c="2"/>b'
        "</text:p><text:p>c</text:p></table:table-cell></table:table-row></table:table>"
        '<table:table table:name="Old" table:style-name="away"><table:table-row><table:table-cell '
        'office:value-type="string"><text:p>x</text:p></table:table-cell></table:table-row></table:table>'
    )
    sheet, old = sheets_of(ods(tables, styles))
    assert texts(sheet) == [
        [],
        [],
        ["2026-03-04 08:30:00", "08:05:00", "TRUE", "#DIV/0!", "=[.A1]*2"],
        ["5", "5", "", "a  b c"],
    ]
    assert [cell.kind for cell in sheet.rows[2]] == ["date", "date", "boolean", "error", "formula"]
    assert (sheet.hidden_rows, sheet.hidden_columns, old.hidden) == (frozenset({3}), frozenset({1}), True)
    said = " ".join(sheet.remarks)
    assert "E3 is without a result" in said
    assert "A4 is struck through" in said
    assert "A4 has a comment: “bubble”" in said


def test_a_flat_open_document_and_a_spreadsheet_xml_are_read() -> None:
    """Workbooks in one XML text give their zeros, percent, hidden rows, errors and dates."""
    kind = "application/vnd.oasis.opendocument.spreadsheet"
    flat = ods_content(
        '<table:table table:name="R"><table:table-row><table:table-cell office:value-type="float" '
        'office:value="5.1"><text:p>5.10</text:p></table:table-cell></table:table-row></table:table>'
    ).replace("document-content", "document", 1)
    flat = flat.replace("<office:document ", f'<office:document office:mimetype="{kind}" ')
    flat = flat.replace("</office:document-content>", "</office:document>")
    assert texts(sheets_of(flat.encode(), "a.fods")[0]) == [["5.10"]]
    (sheet,) = sheets_of(SPREADSHEET_2003.encode(), "a.xls")
    assert texts(sheet) == [["Nitrate (mg/L)"], [], ["5.10", "3.81%", "=A1"], ["", "#N/A", "2026-03-01"]]
    assert (sheet.hidden_rows, sheet.hidden_columns) == (frozenset({3}), frozenset({1}))
    assert "B3 is struck through" in " ".join(sheet.remarks)


SPREADSHEET_2003 = """<?xml version="1.0"?>
<Workbook xmlns="urn:schemas-microsoft-com:office:spreadsheet" xmlns:ss="urn:schemas-microsoft-com:office:spreadsheet">
<Styles><Style ss:ID="n"><NumberFormat ss:Format="0.00"/></Style>
<Style ss:ID="p"><NumberFormat ss:Format="Percent"/><Font ss:StrikeThrough="1"/></Style></Styles>
<Worksheet ss:Name="R"><Table><Column ss:Index="2" ss:Hidden="1"/>
<Row><Cell><Data ss:Type="String">Nitrate (mg/L)</Data></Cell></Row>
<Row ss:Index="3"><Cell ss:StyleID="n"><Data ss:Type="Number">5.1</Data></Cell>
<Cell ss:StyleID="p"><Data ss:Type="Number">0.0381</Data></Cell><Cell ss:Formula="=A1"/></Row>
<Row ss:Hidden="1"><Cell ss:Index="2"><Data ss:Type="Error">#N/A</Data></Cell>
<Cell><Data ss:Type="DateTime">2026-03-01T00:00:00.000</Data></Cell></Row></Table></Worksheet></Workbook>"""


def test_tables_of_a_web_page_are_read() -> None:
    """Cells that span rows and columns keep the others in place, and scripts are no text."""
    (sheet,) = sheets_of(
        b"<html><body><p>Report</p><table><tr><th rowspan=2>Sample<th colspan=2>Nitrate</tr><tr><th>a<th>b</tr>"
        b"<tr><td rowspan=2>S1<td>&lt;0.05<td>6,1<script>9</script></tr><tr><td>7&nbsp;<td>8</table></body>",
        "export.xls",
    )
    assert texts(sheet) == [["Sample", "Nitrate"], ["Sample", "a", "b"], ["S1", "<0.05", "6,1"], ["S1", "7", "8"]]
