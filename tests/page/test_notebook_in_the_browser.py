"""The notebook and the records in a real browser: saved, found after a refresh and a restart, downloaded, printed."""

import csv
import io
import re
from collections.abc import Iterator
from pathlib import Path
from xml.etree import ElementTree

import docx
import pytest
from axe_playwright_python.sync_playwright import Axe
from driving import Server, paste, type_into
from playwright.sync_api import Page, expect

from meanlab.notebook import Notebook, recompute

MARGINS = dict.fromkeys(("top", "left", "right", "bottom"), "12mm")
PAGE_OF_PDF = re.compile(rb"/Type\s*/Page[^s]")


@pytest.fixture(scope="module")
def server(tmp_path_factory: pytest.TempPathFactory) -> Iterator[Server]:
    """A server with a notebook of its own, so that what is remembered here meets no other test."""
    running = Server(tmp_path_factory.mktemp("notebook bench"))
    running.start()
    yield running
    running.stop()
    assert "Traceback" not in running.log(), running.log()


def show_result(page: Page, readings: str, target: str = "5.000") -> None:
    paste(page, readings)
    type_into(page, "target", target)
    expect(page.locator(".st-key-save_entry button")).to_be_visible(timeout=15_000)


def save(page: Page, **written: str) -> None:
    page.get_by_role("button", name="Save entry").click()
    for name, text in written.items():
        type_into(page, f"written_{name}", text)
    page.get_by_role("button", name="Save", exact=True).click()
    expect(page.locator(".ml-entry")).to_have_text(re.compile(r"Entry \d+ saved \d\d:\d\d"), timeout=15_000)


def show_entries(page: Page) -> None:
    page.locator(".st-key-part").get_by_text("Notebook").click()
    expect(page.get_by_text("Search", exact=True)).to_be_visible(timeout=15_000)


def book_of(server: Server) -> Notebook:
    return Notebook(server.environment["MEANLAB_DATABASE_URL"])


def test_an_entry_outlives_a_refresh_and_a_restart(page, server, twelve):
    """Saved, refreshed, the server ended and started again: the entry is in the list and opens with its readings."""
    show_result(page, twelve)
    save(page, title="Control NC-7, morning", by="A. Keller")
    page.reload()
    expect(page.locator(".ml-entry")).to_have_text(re.compile(r"Entry \d+ saved"), timeout=15_000)
    server.stop()
    server.start()
    page.goto(server.url)
    expect(page.locator(".st-key-readings_text textarea")).to_have_value("")
    page.get_by_role("button", name="Notebook", exact=True).click()
    page.get_by_role("button", name="Show the entries").click()
    type_into(page, "search", "nc-7 keller")
    page.get_by_role("button", name=re.compile(r"^Show entry \d+$")).first.click()
    expect(page.get_by_text("every digit is the same")).to_be_visible(timeout=15_000)
    page.locator(".st-key-entry_open button").click()
    expect(page.locator(".st-key-readings_text textarea")).to_have_value(twelve)
    expect(page.locator(".st-key-panel")).to_contain_text("t(11) = 4.08")
    expect(page.locator(".ml-entry")).to_contain_text("saved")


def download(page: Page, ending: str, folder: Path) -> Path:
    with page.expect_download(timeout=30_000) as waited:
        page.locator(f'[class*="st-key-file{ending.replace(".", "-")}"] button').click()
    path = folder / waited.value.suggested_filename
    waited.value.save_as(path)
    return path


def test_every_record_is_downloaded_and_opens_again(page, server, twelve, tmp_path):
    """Each file is what its name says and holds the result: picture, text, readings, every digit."""
    show_result(page, twelve, "5.001")
    save(page, title="Record", note="=1+1 <b>")
    entry = book_of(server).entry(book_of(server).entries()[-1].key)
    page.get_by_role("button", name="Files", exact=True).click()
    files = {
        ending: download(page, ending, tmp_path)
        for ending in (".png", ".svg", ".pdf", ".docx", ".meanlab.json", ".csv")
    }
    assert {path.name for path in files.values()} == {f"entry-{entry.number}{ending}" for ending in files}
    assert files[".png"].read_bytes().startswith(b"\x89PNG\r\n\x1a\n")
    assert files[".pdf"].read_bytes().startswith(b"%PDF-")
    assert ElementTree.parse(files[".svg"]).getroot().tag == "{http://www.w3.org/2000/svg}svg"
    record = docx.Document(str(files[".docx"]))
    paragraphs = "\n".join(paragraph.text for paragraph in record.paragraphs)
    cells = {cell.text for table in record.tables for row in table.rows for cell in row.cells}
    assert entry.analysis.conclusion in paragraphs
    assert set(twelve.split()) <= cells
    assert {"=1+1 <b>", entry.digest} <= cells
    opened = Notebook.open_file(files[".meanlab.json"])
    again = opened.entry(opened.entries()[0].key)
    assert again.analysis == entry.analysis
    assert recompute(again) == []
    rows = list(csv.reader(io.StringIO(files[".csv"].read_text(encoding="utf-8-sig"))))
    assert ["result", "sentence", entry.analysis.conclusion] in rows


def test_a_whole_notebook_is_exported_and_opened_to_read(page, server, twelve, tmp_path):
    """The exported file is verified as it is opened on the page; an entry of it can be looked at, not amended."""
    show_result(page, twelve, "5.002")
    save(page)
    show_entries(page)
    with page.expect_download() as waited:
        page.get_by_role("button", name="Export all").click()
    path = tmp_path / waited.value.suggested_filename
    waited.value.save_as(path)
    count = len(book_of(server).entries())
    assert len(Notebook.open_file(path).entries()) == count
    page.locator(".st-key-record_file input[type=file]").set_input_files(str(path))
    expect(page.get_by_text("opened to read")).to_be_visible(timeout=15_000)
    expect(page.get_by_text("as it was saved").or_(page.get_by_text("as they were saved"))).to_be_visible()
    page.get_by_role("button", name="Close the record file").click()
    show_entries(page)
    assert len(book_of(server).entries()) == count


def test_an_amendment_is_said_under_the_panel_and_in_the_list(page, twelve):
    """The amended entry stays; the new one names it, also in the list."""
    show_result(page, twelve, "5.003")
    save(page, title="Evening")
    number = int(re.search(r"\d+", page.locator(".ml-entry").inner_text()).group())
    type_into(page, "target", "5.004")
    show_entries(page)
    page.get_by_role("button", name=f"Show entry {number}", exact=True).click()
    page.locator(".st-key-amend summary").click()
    type_into(page, "amend_reason", "the target was typed wrongly")
    page.get_by_role("button", name="Save amendment").click()
    expect(page.locator(".ml-entry")).to_contain_text(f"Entry {number + 1} saved", timeout=15_000)
    expect(page.get_by_text(f"entry no. {number}: the target was typed wrongly")).to_be_visible()
    page.get_by_role("button", name="All entries").click()
    expect(page.get_by_text(f"Evening (amended by entry {number + 1})")).to_be_visible()


def test_markup_in_the_list_stays_text(page, twelve):
    """A title with markup is shown letter by letter in the list and the entry, and runs nothing."""
    title = "<img src=x onerror=alert(1)> [a](http://b.c) $y$"
    show_result(page, twelve, "5.005")
    save(page, title=title)
    show_entries(page)
    expect(page.get_by_text(title).first).to_be_visible()
    page.get_by_role("button", name=re.compile(r"^Show entry \d+$")).first.click()
    expect(page.locator(".st-key-notebook_part .ml-h")).to_contain_text(title)
    assert page.locator(".st-key-notebook_part img, .st-key-notebook_part a, .st-key-notebook_part .katex").count() == 0


def test_the_form_and_the_files_are_seen_whole_on_a_small_screen(page, twelve):
    """At 1366 × 650 what is written about an entry, and all files, stand in view without scrolling."""
    show_result(page, twelve, "5.006")
    for opener, last in (("Save entry", ".st-key-save_now"), ("Files", '[class*="st-key-file-csv"]')):
        page.get_by_role("button", name=opener, exact=True).click()
        expect(page.locator(last)).to_be_visible(timeout=15_000)
        page.wait_for_timeout(300)
        box = page.locator(last).bounding_box()
        assert box["x"] + box["width"] <= 1366
        assert box["y"] + box["height"] <= 650


@pytest.mark.parametrize("lying", [False, True])
@pytest.mark.parametrize("width", [900, 1366, 1920])
def test_the_page_prints_as_one_page(page, twelve, width, lying):
    """Printed upright or lying, from any width, the panel is one page, and nothing else is."""
    page.set_viewport_size({"width": width, "height": 700})
    show_result(page, twelve, "5.007")
    page.wait_for_timeout(1_500)
    content = page.pdf(format="A4", landscape=lying, margin=MARGINS)
    assert len(PAGE_OF_PDF.findall(content)) == 1
    page.emulate_media(media="print")
    page.set_viewport_size({"width": 1032, "height": 703} if lying else {"width": 703, "height": 1032})
    outside = page.evaluate(
        """() => [...document.querySelectorAll(".st-key-panel, .st-key-panel svg.main-svg, .ml-table, .ml-foot")]
            .map(one => one.getBoundingClientRect())
            .filter(box => box.left < 0 || box.right > innerWidth || box.bottom > innerHeight).length"""
    )
    assert outside == 0


def test_axe_finds_nothing_serious_in_the_notebook(page, twelve):
    """Neither the list nor an entry, the form nor the files have a serious or critical finding."""
    show_result(page, twelve, "5.008")
    save(page)
    page.get_by_role("button", name="Files", exact=True).click()
    show_entries(page)
    page.wait_for_timeout(500)
    assert serious(page) == []
    page.get_by_role("button", name=re.compile(r"^Show entry \d+$")).first.click()
    page.locator(".st-key-amend summary").click()
    page.wait_for_timeout(500)
    assert serious(page) == []


def serious(page: Page) -> list[str]:
    found = Axe().run(page).response["violations"]
    return [
        f"{finding['id']}: {node['html'][:200]}"
        for finding in found
        if finding["impact"] in ("serious", "critical")
        for node in finding["nodes"]
    ]
