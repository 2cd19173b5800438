"""Many samples in the browser: 2,000 in one table are run, stopped, run again, filtered, opened, taken away, kept."""

import csv
import io
import re

import docx
import numpy as np
import openpyxl
import pytest
from driving import paste, type_into
from playwright.sync_api import Page, expect

import meanlab

SAMPLES, READINGS = 2000, 8
DIFFERING = 20
PATIENCE = 20_000  # the machine that runs the tests may be busy
TARGET = "5.000"


@pytest.fixture(scope="module")
def samples() -> dict[str, list[str]]:
    """Invented lots of eight readings, every hundredth evenly spread far from 5; half have a below-limit reading."""
    generator = np.random.default_rng(20261211)
    found = {}
    for lot in range(SAMPLES):
        values = generator.normal(5.0, 0.04, READINGS)
        if lot % (SAMPLES // DIFFERING) == 0:
            values = 5.87 + 0.01 * np.arange(READINGS) + lot / 1e6
        texts = [f"{value:.3f}" for value in values]
        if lot % 2:
            texts[0] = "<4.9"
        found[f"lot {lot:04}"] = texts
    return found


@pytest.fixture
def table(samples, tmp_path):
    """The lots as a file, one reading a row."""
    path = tmp_path / "lots.csv"
    lines = ["lot;nitrate (mg/L)", *(f"{lot};{text}" for lot, texts in samples.items() for text in texts)]
    path.write_text("\n".join(lines), encoding="utf-8")
    return path


def show_many(page: Page) -> None:
    """Open the part."""
    page.locator(".st-key-part").get_by_text("Many samples", exact=True).click()
    expect(page.locator(".st-key-many_file")).to_be_visible()


def run(page: Page) -> None:
    page.locator(".st-key-many_run button").click()


def rows_of(page: Page):
    return page.locator(".st-key-many_list tbody tr")


def downloaded(page: Page, key: str) -> bytes:
    with page.expect_download(timeout=60_000) as given:
        page.locator(f".st-key-{key} button").click()
    return given.value.path().read_bytes()


@pytest.fixture
def judged(page, table):
    """A page on which the table was run."""
    type_into(page, "target", TARGET)
    show_many(page)
    page.locator(".st-key-many_file input[type=file]").set_input_files(str(table))
    expect(page.locator(".st-key-many_run button")).to_be_visible(timeout=30_000)
    run(page)
    expect(rows_of(page)).to_have_count(200, timeout=60_000)
    return page


def test_a_run_is_stopped_and_run_again(page, table):
    """Stop ends a run, says how far it came and shows nothing of it; the next run is whole."""
    type_into(page, "target", TARGET)
    show_many(page)
    page.locator(".st-key-many_file input[type=file]").set_input_files(str(table))
    run(page)
    page.locator(".st-key-many_stop button").click(timeout=30_000)
    part = page.locator(".st-key-many")
    expect(part).to_contain_text(re.compile(r"Stopped after [\d,]+ of 2,000 samples"), timeout=30_000)
    expect(rows_of(page)).to_have_count(0)
    run(page)
    expect(rows_of(page)).to_have_count(200, timeout=60_000)
    expect(part).to_contain_text(f"Differs: {DIFFERING} of 2,000 samples, after Holm's adjustment")
    expect(part).to_contain_text("family: the 2,000 samples with a p-value")


def test_filter_sort_and_open(judged, samples):
    """The filter leaves the lots that differ; a click opens one in the panel, and the table stays as it is."""
    filters = judged.locator(".st-key-many_filter")
    expect(filters).to_contain_text("cannot tell")
    filters.get_by_text(re.compile("^differs")).click()
    expect(rows_of(judged)).to_have_count(DIFFERING, timeout=PATIENCE)
    judged.locator(".st-key-many_list").get_by_role("button", name="Sample", exact=True).click()
    expect(rows_of(judged).first).to_contain_text("lot 0000")
    judged.locator(".st-key-many_list").get_by_role("button", name=re.compile("^Sample")).click()
    expect(rows_of(judged).first).to_contain_text("lot 1900")
    expect(judged.locator(".st-key-many .js-plotly-plot")).to_have_count(1)
    rows_of(judged).first.get_by_role("button").click()
    expected = meanlab.analyse(samples["lot 1900"], meanlab.Question(TARGET))
    panel = judged.locator(".st-key-panel")
    expect(panel).to_contain_text("lot 1900", timeout=PATIENCE)
    expect(panel).to_contain_text(f"t(7) = {expected.test.statistic:.2f}")
    expect(judged.locator(".st-key-readings_text textarea")).to_have_value("\n".join(samples["lot 1900"]))
    expect(rows_of(judged)).to_have_count(DIFFERING, timeout=PATIENCE)
    rows_of(judged).nth(1).get_by_role("button").click()
    expect(panel).to_contain_text("lot 1800", timeout=PATIENCE)
    judged.get_by_role("button", name="Put back the previous readings").click()
    expect(panel).to_contain_text("lot 1900", timeout=PATIENCE)


def test_what_is_taken_away(judged, samples):
    """CSV and workbook hold every lot with the figures of its own analysis; the document has a page for each chosen."""
    lines = list(csv.DictReader(io.StringIO(downloaded(judged, "many_csv").decode("utf-8-sig"))))
    assert [line["lot"] for line in lines] == list(samples)
    expected = meanlab.analyse(samples["lot 0004"], meanlab.Question(TARGET))
    assert float(lines[4]["mean"]) == expected.summary.mean
    assert float(lines[4]["p"]) == expected.test.p_value
    sheet = openpyxl.load_workbook(io.BytesIO(downloaded(judged, "many_xlsx"))).active
    assert sheet.max_row == SAMPLES + 1
    assert sheet.cell(6, 3).value == expected.summary.mean
    for place in (0, 1):
        rows_of(judged).nth(place).get_by_role("checkbox").check()
        expect(judged.locator(".st-key-many_docx")).to_contain_text(f"{place + 1} chosen")
    names = [rows_of(judged).nth(place).get_by_role("button").inner_text() for place in (0, 1)]
    pages = docx.Document(io.BytesIO(downloaded(judged, "many_docx")))
    said = [paragraph.text for paragraph in pages.paragraphs]
    assert [name in said for name in names] == [True, True]


def test_the_chosen_are_kept_in_the_notebook(judged):
    """All chosen lots become entries in one go, each with its name as title and the family in its note."""
    judged.locator(".st-key-many_filter").get_by_text(re.compile("^differs")).click()
    expect(rows_of(judged)).to_have_count(DIFFERING, timeout=PATIENCE)
    judged.locator(".st-key-many_choose button").click()
    judged.locator(".st-key-many_save button").click()
    expect(judged.locator(".st-key-many")).to_contain_text(
        re.compile(rf"{DIFFERING} saved, entries \d+ to \d+"), timeout=60_000
    )
    judged.locator(".st-key-part").get_by_text("Notebook", exact=True).click()
    expect(judged.locator(".st-key-notebook_part")).to_contain_text("lot 0200", timeout=30_000)


def test_a_pasted_wide_table_with_targets(page):
    """Replicates across the row and a column of targets are proposed as such; names are never taken for markup."""
    paste(
        page,
        "lot\trun 1\trun 2\trun 3\ttarget\n"
        "<b>A</b>\t5.02\t5.04\t4.98\t5.00\n=B\t4.11\t4.12\t4.14\t4.50\nC\t7.0\t\t7.1\t7.0\nD\t3.1\t3.1\t3.1\t3.0",
    )
    show_many(page)
    expect(page.locator(".st-key-many_values")).to_contain_text("run 3")
    expect(page.locator(".st-key-many_target_column input")).to_have_value("target")
    run(page)
    expect(rows_of(page)).to_have_count(4)
    expect(rows_of(page).filter(has_text="=B")).to_contain_text("differs")
    expect(rows_of(page).filter(has_text="<b>A</b>")).to_contain_text("cannot tell")
    expect(rows_of(page).filter(has_text="1 missing")).to_contain_text("C")
    expect(rows_of(page).filter(has_text="identical")).to_contain_text("not testable")
