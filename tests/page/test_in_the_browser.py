"""The main job in a real browser: paste, type, read the panel; upload; refresh; restart; bad input."""

import re

import openpyxl
import pytest
from axe_playwright_python.sync_playwright import Axe
from driving import Server, paste, type_into
from playwright.sync_api import Page, expect

SENTENCE = re.compile(r"The mean of 12 readings \(taken as independent\), .* nominal value 5\.000")


def result_of(page: Page):
    return page.locator(".st-key-panel")


def show_twelve(page: Page, twelve: str) -> None:
    paste(page, twelve)
    type_into(page, "target", "5.000")
    expect(page.locator(".st-key-conclusion")).to_contain_text(SENTENCE)


@pytest.fixture
def workbook(tmp_path, twelve):
    """A workbook with two sheets; the second holds sample numbers and two columns of readings."""
    book = openpyxl.Workbook()
    book.active.title = "About"
    book.active.append(["Invented export of a bench photometer"])
    sheet = book.create_sheet("Results")
    sheet.append(["Sample", "Nitrate (mg/L)", "Nitrite (mg/L)"])
    for place, reading in enumerate(twelve.split(), 1):
        sheet.append([f"NC-7/{place}", float(reading), 0.1 + place / 1000])
        sheet.cell(sheet.max_row, 2).number_format = "0.000"
    path = tmp_path / "export.xlsx"
    book.save(path)
    return path


def test_paste_type_read(page, twelve):
    """Twelve readings, a target, leaving the field: the panel is there, each figure in one element."""
    show_twelve(page, twelve)
    panel = result_of(page)
    for text in ("t(11) = 4.08", "p = 0.0018", "± 2.20"):
        expect(panel.get_by_text(text, exact=True)).to_be_visible()
    expect(panel.get_by_text("12", exact=True)).to_be_visible()
    expect(panel.get_by_text("differs", exact=True)).to_be_visible()
    expect(page.locator(".ml-saved")).to_contain_text(re.compile(r"Saved \d\d:\d\d"))


def test_typing_on_while_the_server_answers_loses_nothing(page, twelve):
    """What is typed into the target while the pasted readings are being read stays in the field."""
    paste(page, twelve)
    target = page.locator(".st-key-target input")
    target.focus()
    for sign in "5.000":
        page.keyboard.press(sign)
        page.wait_for_timeout(80)
    page.wait_for_timeout(700)
    expect(target).to_have_value("5.000")
    target.press("Tab")
    expect(page.locator(".st-key-conclusion")).to_contain_text(SENTENCE)


def test_control_and_enter_send_the_box(page, twelve):
    """Ctrl+Enter in the box is enough once the target is there."""
    type_into(page, "target", "5.000")
    box = page.locator(".st-key-readings_text textarea")
    box.fill(twelve)
    box.press("Control+Enter")
    expect(result_of(page)).to_contain_text("t(11) = 4.08")


def test_the_panel_is_whole_on_a_small_screen(page, twelve):
    """At 1366 × 650 the whole panel and every input stand beside each other without scrolling."""
    show_twelve(page, twelve)
    page.wait_for_timeout(500)
    box = result_of(page).bounding_box()
    assert box["y"] >= 0
    assert box["y"] + box["height"] <= 560
    assert box["x"] + box["width"] <= 1366
    last = page.locator(".st-key-more").bounding_box()
    assert last["y"] + last["height"] <= 650
    assert page.evaluate("document.documentElement.scrollWidth <= window.innerWidth")


def test_the_panel_is_text_on_white_in_both_themes(page, twelve):
    """The panel's text can be selected, and its ground is white in the dark theme too."""
    page.emulate_media(color_scheme="dark")
    page.reload()
    show_twelve(page, twelve)
    panel = result_of(page)
    assert panel.evaluate("e => getComputedStyle(e).backgroundColor") == "rgb(255, 255, 255)"
    selected = panel.evaluate(
        "e => { const all = getSelection(); all.selectAllChildren(e); const t = String(all); all.empty(); return t; }"
    )
    assert "t(11) = 4.08" in selected


def test_copies_reach_the_clipboard(page, twelve):
    """Sentence and numbers as text, the numbers with headings; the picture as PNG."""
    show_twelve(page, twelve)
    page.get_by_role("button", name="Copy sentence").click()
    expect(page.get_by_text("Copied.", exact=True)).to_be_visible()
    assert SENTENCE.search(page.evaluate("navigator.clipboard.readText()"))
    page.get_by_role("button", name="Copy numbers").click()
    page.wait_for_function("navigator.clipboard.readText().then(text => text.includes('\\t'))")
    headings, figures = page.evaluate("navigator.clipboard.readText()").strip().splitlines()
    assert len(headings.split("\t")) == len(figures.split("\t")) > 10
    page.get_by_role("button", name="Copy picture").click()
    expect(page.get_by_text("Picture copied.", exact=True)).to_be_visible(timeout=15_000)
    assert page.evaluate("navigator.clipboard.read().then(items => items[0].types[0])") == "image/png"


def test_upload_choose_read_refresh(page, workbook, twelve):
    """An .xlsx, its column chosen, gives the panel; a refresh brings file, choice and panel back."""
    page.locator(".st-key-readings_file input[type=file]").set_input_files(str(workbook))
    choose(page, "column", re.compile("Nitrate"))
    type_into(page, "target", "5.000")
    expect(result_of(page)).to_contain_text("t(11) = 4.08")
    page.reload()
    expect(result_of(page)).to_contain_text("t(11) = 4.08")
    expect(page.locator(".st-key-inputs")).to_contain_text("export.xlsx")
    paste(page, "7.1\n7.2\n7.3")
    expect(result_of(page)).to_contain_text("3 of 3 readings")
    page.get_by_role("button", name="Put back the previous readings").click()
    expect(result_of(page)).to_contain_text("t(11) = 4.08")


def choose(page: Page, key: str, text: re.Pattern[str]) -> None:
    page.locator(f".st-key-{key} input").click()
    page.get_by_role("option").filter(has_text=text).first.click()


def test_a_refresh_brings_the_page_back(page, twelve):
    """After a reload readings, target and panel are there again."""
    show_twelve(page, twelve)
    page.reload()
    expect(page.locator(".st-key-conclusion")).to_contain_text(SENTENCE)
    expect(page.locator(".st-key-readings_text textarea")).to_have_value(twelve)
    expect(page.locator(".st-key-target input")).to_have_value("5.000")


def test_markup_in_names_stays_text(page, twelve):
    """A name with markup, a link and a formula is shown letter by letter and runs nothing."""
    show_twelve(page, twelve)
    name = "<img src=x onerror=alert(1)> [a](http://b.c) $y$"
    type_into(page, "quantity", name)
    expect(page.locator(".ml-title")).to_have_text(name)
    assert page.locator(".st-key-panel img[src=x], .st-key-panel .katex").count() == 0
    assert page.locator(".st-key-panel a").count() == 0


@pytest.mark.parametrize(
    ("readings", "target", "said"),
    [
        ("Dear colleague, the samples were fine.", "5.00", re.compile("read", re.I)),
        ("5.02", "5.00", re.compile("not testable")),
        ("5.02\n5.02\n5.02", "5.00", re.compile("not testable")),
        ("5.02\n5.03\n5.04", "five", re.compile("not a number")),
    ],
)
def test_bad_input_gets_a_sentence(page, readings, target, said):
    """Prose, one value, identical readings, a target in words: a sentence, no traceback, and the text stays."""
    paste(page, readings)
    type_into(page, "target", target)
    expect(result_of(page)).to_contain_text(said)
    expect(page.locator(".st-key-readings_text textarea")).to_have_value(readings)
    assert page.locator("[data-testid=stException]").count() == 0


def test_a_renamed_picture_gets_a_sentence(page, tmp_path):
    """A PNG named .xlsx is judged by its content and refused with a sentence."""
    picture = tmp_path / "readings.xlsx"
    picture.write_bytes(b"\x89PNG\r\n\x1a\n" + bytes(range(256)) * 20)
    page.locator(".st-key-readings_file input[type=file]").set_input_files(str(picture))
    expect(page.locator(".st-key-inputs .ml-complaint")).to_be_visible()
    expect(page.locator(".st-key-inputs")).to_contain_text("readings.xlsx")


def test_a_file_over_the_limit_gets_a_sentence(page, tmp_path):
    """50 MB are not taken; the limit and what to do stand beside the button, and the page works on."""
    large = tmp_path / "large.csv"
    large.write_bytes(b"5.012\n" * (50 * 1024 * 1024 // 6))
    page.locator(".st-key-readings_file input[type=file]").set_input_files(str(large))
    expect(page.locator(".st-key-readings_file")).to_contain_text(re.compile(r"10(\.0)? ?MB"))
    type_into(page, "unit", "mg/L")
    expect(result_of(page)).to_contain_text("Paste the readings")


def test_a_restart_of_the_server_brings_the_page_back(page, server: Server, twelve):
    """The server ends and starts again: the open page comes back by itself, a new visit by its address too."""
    show_twelve(page, twelve)
    address = page.url
    assert "nb=" in address
    server.stop()
    server.start()
    page.goto(address)
    expect(page.locator(".st-key-conclusion")).to_contain_text(SENTENCE)
    type_into(page, "target", "5.010")
    expect(page.locator(".st-key-conclusion")).to_contain_text("5.010")


def test_axe_finds_nothing_serious(page, twelve):
    """Neither the empty page nor the one with a result has a serious or critical finding."""
    assert _serious(page) == []
    show_twelve(page, twelve)
    page.locator(".st-key-more summary").click()
    page.wait_for_timeout(500)
    assert _serious(page) == []


def _serious(page: Page) -> list[str]:
    found = Axe().run(page).response["violations"]
    return [
        f"{finding['id']}: {node['html'][:200]}"
        for finding in found
        if finding["impact"] in ("serious", "critical")
        for node in finding["nodes"]
    ]
