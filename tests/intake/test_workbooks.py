"""Sheets out of workbooks of every kind.

The expected cells come from what was put into the file: by openpyxl, xlwt (files/many_kinds.xls, files/summaries.xls),
a spreadsheet program or by hand after ECMA-376, OpenDocument 1.3, [MS-XLS] and [MS-XLSB]; openpyxl and python-calamine
are asked as independent readers.
"""

import datetime
import io
import random
import struct
from pathlib import Path

import openpyxl
import pytest
import python_calamine
from made_workbooks import (
    MAIN,
    RELATIONS,
    SHARED_TEXTS,
    STYLES,
    biff,
    compound,
    ods,
    ods_content,
    rows,
    xls_stream,
    xlsb,
    xlsx,
    xlsx_parts,
    zipped,
)
from openpyxl.comments import Comment
from openpyxl.styles import Font

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.containers import is_plain_text
from meanlab.intake.grid import Sheet
from meanlab.intake.number_formats import NumberFormat, number_text
from meanlab.intake.workbooks import sheets_of
from meanlab.intake.xlsx_cells import sums_up

FILES = Path(__file__).parent / "files"


def texts(sheet: Sheet) -> list[list[str]]:
    return [[cell.text for cell in row] for row in sheet.rows]


def column(sheet: Sheet, place: int) -> list[str]:
    return [row[place].text if place < len(row) else "" for row in sheet.rows]


def kinds(sheet: Sheet, place: int) -> list[str]:
    return [row[place].kind if place < len(row) else "text" for row in sheet.rows]


def file(name: str) -> tuple[Sheet, ...]:
    return sheets_of((FILES / name).read_bytes(), name)


def saved(book: openpyxl.Workbook) -> bytes:
    target = io.BytesIO()
    book.save(target)
    return target.getvalue()


@pytest.mark.parametrize(
    ("code", "number", "text", "kind"),
    [
        ("0.00", 5.1, "5.10", "number"),
        ("0.0", 5.0234, "5.0234", "number"),
        ("General", 5.1, "5.1", "number"),
        ("", 4.0, "4", "number"),
        ("0.0##", 5.12, "5.12", "number"),
        ("#.##", 5.1, "5.1", "number"),
        ("#,##0.00", 1234.5, "1234.50", "number"),
        ("_-* #,##0.00_-;-* #,##0.00_-", -1234.5, "-1234.50", "number"),
        ("[Red]0.000", -5.1, "-5.100", "number"),
        ("0.00;(0.00)", -5.1, "-5.10", "number"),
        ("0.00%", 0.0381, "3.81%", "number"),
        ("0.00%", 0.38, "38.00%", "number"),
        ("0%", 0.0381, "3.81%", "number"),
        ("0.00E+00", 5.1, "5.10E+0", "number"),
        ("0.0,", 12345.0, "12345", "number"),
        ("# ?/?", 0.5, "0.5", "number"),
        (";;;", 3.0, "3", "number"),
        ("@", 5.1, "5.1", "number"),
        ('0.00" mg/L"', 5.1, "5.10 mg/L", "number"),
        ('0.0\\ "°C"', 20.0, "20.0 °C", "number"),
        ('0.00" kg (dry)"', 5.1, "5.10 kg (dry)", "number"),
        ('"<"0.00', 0.05, "<0.05", "number"),
        ('[<0.05]"<0.05";0.00', 0.02, "<0.05", "text"),
        ('[<0.05]"<0.05";0.00', 0.2, "0.20", "number"),
        ('0.00;-0.00;"n.d."', 0.0, "n.d.", "text"),
        ("yyyy-mm-dd", 46058.0, "2026-02-05", "date"),
        ("[$-407]d. mmm", 46058.5, "2026-02-05 12:00:00", "date"),
        ("hh:mm", 0.35, "08:24:00", "date"),
        ("[h]:mm", 0.35, "08:24:00", "date"),
        ("mm:ss.0", 0.001, "00:01:26", "date"),
        ('"day "0', 3.0, "day 3", "number"),
    ],
)
def test_a_number_takes_from_its_format_what_decides_a_reading(code: str, number: float, text: str, kind: str) -> None:
    """The stored number stays whole; the format adds zeros, percent, unit or limit sign, or makes it a date."""
    cell = NumberFormat(code).cell(number)
    assert (cell.text, cell.kind) == (text, kind)


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (0.1 + 0.2, "0.3"),
        (5.02 * 3 / 3 + 0.0, "5.02"),
        (5.0199999999999996, "5.02"),
        (2 / 3, "0.6666666666666666"),
        (5e-05, "0.00005"),
        (1e300, "1E+300"),
        (-0.0, "0"),
        (12345678901.5, "12345678901.5"),
        (123456789012345.0, "123456789012345"),
    ],
)
def test_a_stored_number_is_written_as_short_as_it_is(number: float, text: str) -> None:
    """Binary dust behind the fifteen digits a spreadsheet shows is no resolution; true digits stay."""
    assert number_text(number) == text
    assert float(text) == pytest.approx(number, rel=1e-15)


def test_numbers_come_back_exactly_as_openpyxl_wrote_them() -> None:
    """A thousand drawn numbers in drawn formats keep their value to the last bit."""
    draw = random.Random(20)
    book = openpyxl.Workbook()
    numbers = [round(draw.uniform(-1, 1) * 10 ** draw.randint(-6, 6), draw.randint(0, 9)) for _ in range(1000)]
    for row, number in enumerate(numbers, 1):
        book.active.cell(row, 1, number).number_format = draw.choice(["0.00", "General", "0.0000", "#,##0.0"])
    (sheet,) = sheets_of(saved(book))
    assert [float(text) for text in column(sheet, 0)] == numbers


def test_a_long_computed_number_is_marked() -> None:
    """A third is computed; the same number cut to four decimals and one with mere dust are not."""
    (sheet,) = sheets_of(xlsx(rows(*(f"<c><v>{number!r}</v></c>" for number in (5 / 3, 1.6667, 0.1 + 0.2)))))
    assert [row[0].computed for row in sheet.rows] == [True, False, False]


def test_kinds_of_cells_are_told_apart() -> None:
    """Text, number, truth, date, error, formulas with and without a stored result each have their kind."""
    book = openpyxl.Workbook()
    for row in (["5,02"], [5.02], [True], [datetime.date(2026, 3, 4)], ["#N/A"], ["=A2*2"]):
        book.active.append(row)
    (sheet,) = sheets_of(saved(book))
    assert column(sheet, 0) == ["5,02", "5.02", "TRUE", "2026-03-04", "#N/A", "=A2*2"]
    assert kinds(sheet, 0) == ["text", "number", "boolean", "date", "error", "formula"]
    assert sheet.remarks[0].startswith("Cell A6 is without a result")


def test_days_count_from_1904_where_the_workbook_says_so() -> None:
    """The same calendar day comes out of both ways to count days, as openpyxl writes them."""
    book = openpyxl.Workbook()
    book.epoch = openpyxl.utils.datetime.CALENDAR_MAC_1904
    book.active["A1"] = datetime.datetime(2026, 3, 4, 8, 30)
    assert column(sheets_of(saved(book))[0], 0) == ["2026-03-04 08:30:00"]


def test_hidden_rows_columns_and_sheets_are_told() -> None:
    """What openpyxl hides is hidden here, by flag, by width 0 and for both kinds of hidden sheets."""
    book = openpyxl.Workbook()
    sheet = book.active
    for row in range(1, 6):
        sheet.append([row, row * 2, row * 3])
    sheet.row_dimensions[2].hidden = sheet.row_dimensions[4].hidden = True
    sheet.column_dimensions["B"].hidden = True
    for state in ("hidden", "veryHidden"):
        more = book.create_sheet(state)
        more.append([1])
        more.sheet_state = state
    found = sheets_of(saved(book))
    assert (found[0].hidden_rows, found[0].hidden_columns) == (frozenset({1, 3}), frozenset({1}))
    assert [sheet.hidden for sheet in found] == [False, True, True]


def test_a_label_merged_over_rows_counts_for_each_of_them_and_a_number_only_once() -> None:
    """Choosing the rows of a merged sample label finds them all; one merged number stays one reading."""
    book = openpyxl.Workbook()
    for row in (["Sample", "mg/L"], ["S1", 5.02], [None, 5.04], [None, None]):
        book.active.append(row)
    book.active.merge_cells("A2:A4")
    book.active.merge_cells("B3:B4")
    (sheet,) = sheets_of(saved(book))
    assert texts(sheet) == [["Sample", "mg/L"], ["S1", "5.02"], ["S1", "5.04"]]


def test_strike_through_and_comments_are_told() -> None:
    """Formatting that carries a meaning is said in words, with the cell."""
    book = openpyxl.Workbook()
    for number in (5.02, 5.04):
        book.active.append([number])
    book.active["A2"].font = Font(strike=True)
    book.active["A2"].comment = Comment("bubble in the cell", "lab")
    assert sheets_of(saved(book))[0].remarks == (
        "Cell A2 is struck through, and read like the others.",
        "Cell A2 has a comment: “bubble in the cell”",
    )


def test_texts_in_all_their_forms() -> None:
    """Shared, in several fonts, with pronunciation, inline, escaped and broken over lines: each is one plain text."""
    parts = xlsx_parts(
        rows(
            '<c t="s"><v>0</v></c><c t="s"><v>1</v></c><c t="s"><v>2</v></c>',
            '<c t="inlineStr"><is><r><t>Ni</t></r><r><t>trate</t></r></is></c><c t="str"><f>A1</f><v>5,02</v></c>',
        ),
        more_relations=SHARED_TEXTS,
    )
    parts["xl/sharedStrings.xml"] = (
        f'<sst {MAIN}><si><r><t>Nitrate</t></r><r><t xml:space="preserve"> (mg/L)</t></r></si>'
        "<si><t>試料</t><rPh><t>シリョウ</t></rPh></si><si><t>Lead_x000D_\n(µg/L)</t></si></sst>"
    )
    assert texts(sheets_of(zipped(parts))[0]) == [["Nitrate (mg/L)", "試料", "Lead (µg/L)"], ["Nitrate", "5,02"]]


def test_other_spellings_of_the_same_workbook() -> None:
    """Prefixed elements, cells without their place, absolute targets and unusual names of parts are read the same."""
    parts = xlsx_parts(workbook="-")
    del parts["xl/workbook.xml"], parts["xl/_rels/workbook.xml.rels"]
    space = MAIN.replace("xmlns", "xmlns:x")
    parts["_rels/.rels"] = str(parts["_rels/.rels"]).replace("xl/workbook.xml", "/book.xml")
    parts["book.xml"] = (
        f'<x:workbook {space} xmlns:q="{RELATIONS}"><x:sheets><x:sheet name="R" sheetId="7" q:id="z"/></x:sheets>'
        "</x:workbook>"
    )
    parts["_rels/book.xml.rels"] = (
        f'<r><Relationship Id="z" Type="{RELATIONS}/worksheet" Target="/Data/My%20sheet.xml"/></r>'
    )
    parts["data/my sheet.xml"] = (
        f"<x:worksheet {space}><x:sheetData><x:row><x:c><x:v>5.02</x:v></x:c><x:c><x:v>5.04</x:v></x:c></x:row>"
        '<x:row r="4"><x:c r="C4"><x:v>4.98</x:v></x:c></x:row></x:sheetData></x:worksheet>'
    )
    (sheet,) = sheets_of(zipped(parts))
    assert (sheet.name, texts(sheet)) == ("R", [["5.02", "5.04"], [], [], ["", "", "4.98"]])


def test_cells_in_any_order_and_twice() -> None:
    """Cells out of order find their place; of two in one place the last is used and said."""
    (sheet,) = sheets_of(
        xlsx(
            '<dimension ref="A1"/><sheetData><row r="3"><c r="B3"><v>3</v></c><c r="A3"><v>2</v></c></row>'
            '<row r="1"><c r="A1"><v>1</v></c></row><row r="3"><c r="A3"><v>4</v></c></row></sheetData>'
        )
    )
    assert texts(sheet) == [["1"], [], ["4", "3"]]
    assert sheet.remarks == ("Cell A3 is stored more than once; the last value is used.",)


def test_a_style_that_is_not_there_shows_the_plain_number() -> None:
    """Absurd style numbers and format codes neither fail nor change the number."""
    parts = xlsx_parts(rows(*(f'<c s="{style}"><v>5.1</v></c>' for style in ("0", "9999999", "-1", "x"))))
    parts["xl/_rels/workbook.xml.rels"] = str(parts["xl/_rels/workbook.xml.rels"]).replace("</R", STYLES + "</R")
    parts["xl/styles.xml"] = (
        f'<styleSheet {MAIN}><numFmts><numFmt numFmtId="200" formatCode="0.{"0" * 50}[[[&quot;;;;;"/></numFmts>'
        '<cellXfs><xf numFmtId="200"/></cellXfs></styleSheet>'
    )
    assert [float(text) for text in column(sheets_of(zipped(parts))[0], 0)] == [5.1] * 4


@pytest.mark.parametrize(
    ("formula", "expected"),
    [
        ("AVERAGE(B2:B7)", True),
        ("STDEV.S(B2:B7)/AVERAGE(B2:B7)*100", True),
        ("ROUND(AVERAGE($B$2:$B$7),3)", True),
        ("AVERAGE(C2:C7)", False),
        ("AVERAGE(A9:D9)", False),
        ("B2*40", False),
        ("B8-AVERAGE(B2:B7)", False),
    ],
)
def test_a_figure_of_the_cells_above_is_known_by_its_formula(formula: str, expected: bool) -> None:
    """Only a formula that sums up cells above in its own column makes a figure that is no reading (common practice)."""
    assert sums_up(formula, 8, 1) is expected


def test_a_mean_below_the_readings_is_no_reading() -> None:
    """Without a word beside it the calculated mean is left out and said; with a word it stays, for the word tells."""
    mean = "<c><f>AVERAGE(A1:A2)</f><v>5.03</v></c>"
    (sheet,) = sheets_of(xlsx(rows("<c><v>5.02</v></c>", "<c><v>5.04</v></c>", mean)))
    assert column(sheet, 0) == ["5.02", "5.04"]
    assert sheet.remarks[0].startswith("Cell A3 is calculated from the cells above")
    named = mean + '<c t="inlineStr"><is><t>Mean</t></is></c>'
    assert len(sheets_of(xlsx(rows("<c><v>5.02</v></c>", "<c><v>5.04</v></c>", named)))[0].rows) == 3


def test_a_far_stray_cell_is_left_out_and_said() -> None:
    """One value in the last corner of the sheet does not make a million rows."""
    far = '<row r="1048576"><c r="XFD1048576"><v>3</v></c></row></sheetData>'
    (sheet,) = sheets_of(xlsx("<sheetData><row><c><v>5.02</v></c></row>" + far))
    assert texts(sheet) == [["5.02"]]
    assert sheet.remarks == ("Cell XFD1048576 is far from the other cells and left out.",)


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


@pytest.mark.parametrize(
    ("name", "place", "expected"),
    [
        ("two_decimals.xlsx", 0, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.01", "5.03", "4.97"]),
        ("shown_shorter.xlsx", 0, ["Nitrate (mg/L)", "5.0234", "5.0411", "4.9832", "5.0109"]),
        ("merged_headings.xlsx", 2, ["", "", "", "spot 2", "47.9", "50.7", "50.1"]),
        ("merged_headings.ods", 2, ["", "", "", "spot 2", "47.9", "50.7", "50.1"]),
        ("hidden_column_and_sheet.xlsx", 2, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.01"]),
        ("readings_turned_into_dates.xlsx", 0, ["Nitrate (mg/L)", "5.02", "2026-02-05", "4.98", "2026-04-05", "5.01"]),
        ("readings_turned_into_dates.xls", 0, ["Nitrate (mg/L)", "5.02", "2026-02-05", "4.98", "2026-04-05", "5.01"]),
        ("percent_format.xlsx", 0, ["Fat", "3.81%", "3.79%", "3.84%", "3.80%"]),
        ("percent_cells.ods", 0, ["Fat", "3.81%", "3.79%", "3.84%", "3.80%"]),
        ("cells_in_error.xlsx", 0, ["Nitrate (mg/L)", "5.02", "#DIV/0!", "5.04", "#N/A", "4.98"]),
        ("binary_dust.xlsx", 0, ["Nitrate (mg/L)", "0.3", "15.3", "1.21"]),
        ("below_limit.xls", 1, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.01", "5.03", "4.97", "<0.05"]),
        ("filtered_rows.ods", 0, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.01", "5.03", "4.97"]),
        ("calculated.xlsx", 1, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.012", "5.032", "4.968"]),
        ("calculated.xls", 1, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.012", "5.032", "4.968"]),
        ("saved_as_web_page.xls", 0, ["Nitrate (mg/L)", "5.02", "5.04", "4.98", "5.01", "5.03", "4.97"]),
    ],
)
def test_files_of_real_writers(name: str, place: int, expected: list[str]) -> None:
    """Files written by spreadsheet programs and libraries give the column that was put in."""
    assert column(file(name)[0], place) == expected


def test_files_of_real_writers_tell_what_is_hidden_or_odd() -> None:
    """Filtered rows, hidden columns, strike-through, comments and formulas without results are told."""
    assert file("filtered_rows.ods")[0].hidden_rows == {3, 5}
    assert file("hidden_column_and_sheet.xlsx")[0].hidden_columns == {1}
    assert [sheet.hidden for sheet in file("hidden_column_and_sheet.xlsx")] == [False, True]
    assert kinds(file("formulas_never_calculated.xlsx")[0], 1)[1:] == ["formula"] * 6
    assert kinds(file("summaries.xls")[0], 0)[4:8] == ["formula"] * 4
    assert "rejected, bubble in cell" in " ".join(file("struck_and_commented.xlsx")[0].remarks)
    assert kinds(file("cells_in_error.xlsx")[0], 0)[2] == "error"


def test_plain_text_is_told_from_everything_else() -> None:
    """Readings as text, in any encoding and whatever letters they begin with, are no workbook."""
    for text in ("5.02\n5.04", "MZ;5.02", "BM 3\t5.02", "GIF8;1", "<0.05\n5.02", "Rar! 5.02"):
        assert is_plain_text(text.encode())
    assert is_plain_text("Länge;5,02\n".encode("utf-16"))
    assert is_plain_text("Länge;5,02\n".encode("utf-16-le"))
    assert is_plain_text(b"")
    for name in ("two_decimals.xlsx", "calculated.xls", "percent_cells.ods", "saved_as_web_page.xls"):
        assert not is_plain_text((FILES / name).read_bytes())
