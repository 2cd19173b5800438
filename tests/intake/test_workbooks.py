"""Sheets out of workbooks, those of test_older_workbooks.py aside.

The expected cells come from what was put into the file: by openpyxl, by the writers named in
test_files_of_real_writers, or by hand after ECMA-376.
"""

import datetime
import io
import random

import openpyxl
import pytest
from made_workbooks import (
    FILES,
    MAIN,
    RELATIONS,
    SHARED_TEXTS,
    STYLES,
    column,
    file,
    kinds,
    rows,
    texts,
    xlsx,
    xlsx_parts,
    zipped,
)
from openpyxl.comments import Comment
from openpyxl.styles import Font

from meanlab.intake.containers import is_plain_text
from meanlab.intake.workbooks import sheets_of
from meanlab.intake.xlsx_cells import sums_up


def saved(book: openpyxl.Workbook) -> bytes:
    target = io.BytesIO()
    book.save(target)
    return target.getvalue()


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
