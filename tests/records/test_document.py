"""The written record: opened again by python-docx, everything that can be defended is in it, and the same each time."""

import io
import time
import zipfile
from xml.dom import minidom

import docx
import pytest

from meanlab.core.printable import printable
from meanlab.core.source import source_of
from meanlab.core.written import Written
from meanlab.records import panel_pdf, panel_svg, written_record
from meanlab.wording import panel_texts

WRITTEN = Written(
    title="Nitrate, run 7", by="A. Keller", note="second line\nfollows", instrument="IC 2", method="M-17",
    set_times={"equivalence limit": "2026-12-01T09:00:00+01:00"}, number=7, time="2026-12-01T08:30:00.5+00:00",
    zone="UTC+01:00 (CET)", digest="ab" * 32, amends_number=3, reason="air bubble found in the log",
)  # fmt: skip


def texts_of(content: bytes) -> str:
    page = docx.Document(io.BytesIO(content))
    cells = [cell.text for table in page.tables for row in table.rows for cell in row.cells]
    return "\n".join([*(paragraph.text for paragraph in page.paragraphs), *cells])


def test_the_record_opens_again_with_everything_in_it(many_kinds):
    """Sentence, every row of the panel's table, checks, reasons, cautions and readings of every kind of result."""
    for analysis in many_kinds.values():
        content = written_record(analysis)
        said, panel = texts_of(content), panel_texts(analysis)
        wanted = [
            panel.title, panel.verdict_word, panel.sentence, panel.why, analysis.provenance.fingerprint,
            *(text for row in panel.rows for text in row), *analysis.route.reasons[1:], *analysis.cautions,
            *(check.message for check in analysis.checks), *analysis.readings.typed,
            *(one.typed for one in analysis.readings.censored), *analysis.readings.left_out.values(),
            *(f"{name} {version}" for name, version in analysis.provenance.versions.items()),
        ]  # fmt: skip
        assert [text for text in wanted if text not in said] == []
        pictures = docx.Document(io.BytesIO(content)).inline_shapes
        assert len(pictures) == (1 if analysis.test is None else 2)
        assert all(shape._inline.docPr.get("descr") for shape in pictures)


def test_the_record_of_an_entry_says_who_when_and_which(many_kinds):
    """Number, time, digest, the amended entry and the reason, instrument, method, note, and when parts were set."""
    said = texts_of(written_record(many_kinds["agreement with a certificate"], written=WRITTEN))
    for text in (
        "Nitrate, run 7", "A. Keller", "IC 2", "M-17", "no. 7, saved 2026-12-01 08:30:00 UTC", "ab" * 32,
        "entry no. 3: air bubble found in the log", "second line\nfollows", "Set: equivalence limit",
        "2026-12-01 08:00:00 UTC", "UTC+01:00 (CET)",
    ):  # fmt: skip
        assert text in said


def test_the_file_and_the_place_in_it_are_named(analysis):
    """Of readings from a file: name, checksum, and what was chosen."""
    source = source_of(b"x;y", analysis.readings, file_name="run3.csv", selection={"sheet": "Run 3"})
    said = texts_of(written_record(analysis, source))
    assert "run3.csv, 3 bytes" in said
    assert source.checksum in said
    assert "sheet: Run 3" in said


def test_numbers_have_the_decimal_sign_of_the_readings(analysed):
    """Readings with a comma: no number of the record has a point, versions and the limits of text apart."""
    analysis = analysed(equivalence_limit=0.05, sigma=0.02, sigma_origin="control chart", target_uncertainty=0.004)
    page = docx.Document(io.BytesIO(written_record(analysis)))
    tables = {row.cells[0].text: row.cells[-1].text for table in page.tables for row in table.rows}
    assert tables["Equivalence limit E"] == "0,05 mg/L"
    assert tables["Known σ"] == "0,02 mg/L, from control chart"
    assert tables["Mean"] == panel_texts(analysis).numbers.estimate
    assert "." not in tables["Mean"] + tables["Difference"] + tables["Standard uncertainty u of the target"]


def test_the_same_result_gives_the_same_bytes(analysis):
    """The moment of writing is nowhere: neither in the parts nor in the packing (DOCX), nor in the PDF."""
    first = written_record(analysis, written=WRITTEN), panel_pdf(analysis)
    time.sleep(2.1)  # the clock of a zip file has steps of two seconds
    assert (written_record(analysis, written=WRITTEN), panel_pdf(analysis)) == first
    facts = docx.Document(io.BytesIO(first[0])).core_properties
    assert facts.created.isoformat() == "2026-12-01T08:30:00+00:00"
    assert (facts.author, facts.last_modified_by) == ("A. Keller", "")


@pytest.mark.parametrize(
    "text",
    [
        "<w:p>&amp;</w:p>",
        "=cmd|' /C calc'!A0",
        "a\x00b\x07\x1b[31m",
        "\ud800 half",
        "x" * 300,
        "🧪 µg ≤ \u202e reversed",
        "{ DDEAUTO c:\\\\x }",
        "line\r\nline\rline",
    ],
)
def test_any_text_of_the_user_is_plain_text(analysed, text):
    """Markup, formulas, control and direction signs in names and notes give a record that opens, as plain text."""
    analysis = analysed(material=text, units_are=text, quantity=text)
    content = written_record(analysis, written=Written(title=text, by=text, note=text, reason=text, amends_number=1))
    said = texts_of(content)
    assert printable(text).split("\n")[0] in said
    with zipfile.ZipFile(io.BytesIO(content)) as parts:
        body = parts.read("word/document.xml").decode("utf-8")
        assert parts.testzip() is None
    assert "\u202e" not in body
    assert not any(field in body for field in ("w:fldSimple", "w:instrText", "w:hyperlink"))
    assert panel_pdf(analysis).startswith(b"%PDF-")
    minidom.parseString(panel_svg(analysis).encode("utf-8"))


def test_a_long_list_of_readings_stands_as_text(analysed):
    """Of a thousand readings each text is in the record, and those left out stand in the table with their cause."""
    readings = [f"{5 + place % 37 / 1000:.3f}" for place in range(1000)]
    said = texts_of(written_record(analysed(readings, left_out={500: "pump stopped"})))
    assert "; ".join(readings) in said
    assert "left out: pump stopped" in said


def test_the_page_is_a4_with_the_origin_on_each(analysis):
    """A4 paper; versions and fingerprint at the foot of every page."""
    page = docx.Document(io.BytesIO(written_record(analysis)))
    section = page.sections[0]
    assert (round(section.page_width.mm), round(section.page_height.mm)) == (210, 297)
    assert panel_texts(analysis).origin in section.footer.paragraphs[0].text


@pytest.mark.parametrize("kind", ["agreement with a certificate", "sign", "one reading"])
def test_the_pdf_has_its_letters_as_text(many_kinds, kind):
    """One page with embedded TrueType fonts, and no moment of writing."""
    content = panel_pdf(many_kinds[kind])
    assert content.startswith(b"%PDF-")
    assert content.rstrip().endswith(b"%%EOF")
    assert b"/Count 1" in content
    assert b"/FontFile2" in content
    assert b"CreationDate" not in content
