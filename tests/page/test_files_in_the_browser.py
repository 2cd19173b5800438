"""Files as technicians have them, in the browser: a comma and a unit, three sheets, a file made to take everything."""

import zipfile
from pathlib import Path

from driving import paste, type_into
from playwright.sync_api import Page, expect

FILES = Path(__file__).resolve().parents[1] / "intake" / "files"


def upload(page: Page, path: Path) -> None:
    page.locator(".st-key-readings_file input[type=file]").set_input_files(str(path))


def test_a_decimal_comma_and_a_unit_in_every_line(page):
    """The sentence has the unit of the lines and the comma, and the counts say how it was read."""
    paste(page, "5,01 mg/L\n5,04 mg/L\n\n5,02 mg/L\n5,00 mg/L\n5,05 mg/L")
    type_into(page, "target", "5,00")
    expect(page.locator(".st-key-conclusion")).to_contain_text("5,024 mg/L")
    expect(page.locator(".st-key-counts")).to_contain_text("5 read · 0 refused · decimal comma · 2 places")


def test_a_workbook_with_three_sheets_asks_for_what_cannot_be_told(page):
    """The sheets and their columns stand to be chosen, and the choice leads to the panel."""
    upload(page, FILES / "three_sheets.xlsx")
    sheet = page.locator(".st-key-sheet input")
    expect(sheet).to_be_visible(timeout=20_000)
    sheet.click()
    page.get_by_role("option").first.click()
    type_into(page, "target", "5")
    expect(page.locator(".st-key-counts")).to_contain_text("read")


def test_a_workbook_made_to_take_everything_is_refused_and_the_page_lives_on(page, tmp_path, twelve):
    """A workbook that unpacks to 400 MB gets a sentence at once, and a paste afterwards gives its result."""
    bomb = tmp_path / "export.xlsx"
    with zipfile.ZipFile(bomb, "w", zipfile.ZIP_DEFLATED) as parts:
        parts.writestr(
            "[Content_Types].xml", '<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"/>'
        )
        parts.writestr("xl/workbook.xml", "<workbook/>")
        parts.writestr("xl/worksheets/sheet1.xml", b" " * 400_000_000)
    upload(page, bomb)
    expect(page.locator(".st-key-counts .ml-complaint")).to_be_visible(timeout=20_000)
    paste(page, twelve)
    type_into(page, "target", "5.000")
    expect(page.locator(".st-key-conclusion")).to_contain_text("t(11) = 4.08")
