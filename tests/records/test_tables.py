"""Tables of many samples and pages of several results: opened again by the libraries of their formats."""

import csv
import io

import docx
import openpyxl
import pytest

from meanlab.records import table_csv, table_xlsx, written_pages
from meanlab.wording import panel_texts

HEADINGS = ["lot", "n", "mean", "flags"]
ROWS = [
    ["A", 4, 5.0205, ""],
    ['=HYPERLINK("x")', 3, float("nan"), None],
    ["-1+1", 3, -0.25, "+cmd"],
    ["@x\x07", 1, 1e-7, "two\nlines"],
]


@pytest.mark.parametrize("sign", [".", ","])
def test_the_csv_holds_every_digit_and_no_formula(sign):
    """Numbers come back equal by their decimal sign; a text that begins like a formula has an apostrophe before it."""
    text = io.StringIO(table_csv(HEADINGS, ROWS, sign).decode("utf-8-sig"))
    lines = list(csv.reader(text, delimiter=";" if sign == "," else ","))
    assert lines[0] == HEADINGS
    assert float(lines[1][2].replace(",", ".")) == 5.0205
    assert lines[2][2:] == ["", ""]
    assert [line[0][0] for line in lines[2:]] == ["'", "'", "'"]
    assert lines[3][2:] == [f"-0{sign}25", "'+cmd"]


def test_the_workbook_holds_numbers_and_texts():
    """Numbers are numbers, texts are texts, whatever they begin with; signs that XML cannot hold are boxes."""
    sheet = openpyxl.load_workbook(io.BytesIO(table_xlsx(HEADINGS, ROWS))).active
    cells = list(sheet.iter_rows())
    assert [cell.value for cell in cells[0]] == HEADINGS
    assert [cell.value for cell in cells[1]][:3] == ["A", 4, 5.0205]
    assert [row[0].data_type for row in cells[1:]] == ["s"] * 4
    assert [row[0].value for row in cells[2:]] == ['=HYPERLINK("x")', "-1+1", "@x□"]
    assert cells[2][2].value is None


def test_each_result_has_a_page_of_its_own(many_kinds):
    """Name, sentence and every figure of the panel of each; a page break between two; the same bytes each time."""
    named = [(f"sample {name}", analysis) for name, analysis in many_kinds.items()]
    content = written_pages(named)
    page = docx.Document(io.BytesIO(content))
    said = [paragraph.text for paragraph in page.paragraphs]
    for name, analysis in named:
        assert name in said
        assert panel_texts(analysis).sentence in said
    assert len(page.tables) == len(named)
    breaks = page.element.xpath('//w:br[@w:type="page"]')
    assert len(breaks) == len(named) - 1
    assert written_pages(named) == content
