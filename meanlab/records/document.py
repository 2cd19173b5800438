"""The written record of a result as DOCX: text and tables to edit, the pictures, everything that was looked at.

The same result gives the same bytes: the moment of writing is nowhere in the file.
"""

import zipfile
from collections.abc import Sequence
from datetime import UTC, datetime
from io import BytesIO
from typing import Any

import docx
from docx.document import Document
from docx.enum.table import WD_TABLE_ALIGNMENT
from docx.oxml import OxmlElement
from docx.oxml.ns import qn
from docx.shared import Emu, Mm, Pt, RGBColor
from docx.text.paragraph import Paragraph

from meanlab.core.printable import printable
from meanlab.core.results import Analysis
from meanlab.core.source import Source, entries_of
from meanlab.core.written import Written
from meanlab.pictures import Drawing, readings_picture, sampling_distribution
from meanlab.pictures.for_paper import png
from meanlab.records.account import Part, account
from meanlab.wording import panel_texts
from meanlab.wording.names import short_noun

FONT = "Arial"
TEXT, SMALL, HEADING, TITLE = Pt(10), Pt(9), Pt(12), Pt(16)
PAGE, MARGIN = (Mm(210), Mm(297)), Mm(20)
WIDTH = Mm(170)
PICTURE = (660.0, 200.0, 150.0)  # pixels: width, height of the distribution and of the readings
AFTER_BORDERS = tuple(qn(f"w:{name}") for name in ("shd", "tblLayout", "tblCellMar", "tblLook"))
NO_MOMENT = (1980, 1, 1, 0, 0, 0)


def written_record(analysis: Analysis, source: Source | None = None, written: Written | None = None) -> bytes:
    """Return the written record of a result as DOCX.

    ``source`` says where the readings came from (by default the readings as typed), ``written`` what the technician
    wrote and under which number it is kept.
    """
    source = source or Source(entries=entries_of(analysis.readings))
    written = written or Written()
    texts = panel_texts(analysis)
    page = empty_page()
    write(page, texts.title, TITLE, bold=True)
    write(page, texts.verdict_word, HEADING, bold=True)
    write(page, texts.sentence)
    for drawing in pictures(analysis):
        place_picture(page, drawing)
    for part in account(analysis, texts, source, written):
        _part(page, part)
    _foot(page, texts.origin)
    _describe(page, analysis, texts.title, written)
    content = BytesIO()
    page.save(content)
    return without_moment(content.getvalue())


def pictures(analysis: Analysis) -> tuple[Drawing, ...]:
    """Return the pictures of the record: the distribution with the statistic, and the readings with their interval."""
    width, upper, lower = PICTURE
    below = readings_picture(analysis, width, lower)
    if analysis.test is None:
        return (below,)
    noun = short_noun(analysis.question.target_kind)
    return sampling_distribution(analysis.test, analysis.readings.decimal_sign, noun, width, upper), below


def empty_page() -> Document:
    """Return an empty A4 page in the type of the records."""
    page = docx.Document()
    section = page.sections[0]
    section.page_width, section.page_height = PAGE
    section.left_margin = section.right_margin = section.top_margin = section.bottom_margin = MARGIN
    for name, size in (("Normal", TEXT), ("Heading 1", HEADING), ("List Bullet", TEXT)):
        style = page.styles[name]
        style.font.name, style.font.size, style.font.color.rgb = FONT, size, RGBColor(0, 0, 0)
        fonts = style.element.get_or_add_rPr().get_or_add_rFonts()
        for kind in list(fonts.attrib):
            del fonts.attrib[kind]
        for kind in ("ascii", "hAnsi", "cs", "eastAsia"):
            fonts.set(qn(f"w:{kind}"), FONT)
    page.styles["Normal"].paragraph_format.space_after = Pt(4)
    page.styles["Heading 1"].paragraph_format.space_before = Pt(12)
    return page


def write(page: Document, text: str, size: Any = TEXT, bold: bool = False, style: str | None = None) -> Paragraph:
    """Add a paragraph."""
    paragraph = page.add_paragraph(style=style)
    run = paragraph.add_run(printable(text))
    run.font.size, run.bold = size, bold
    return paragraph


def _part(page: Document, part: Part) -> None:
    page.add_heading(printable(part.heading), level=1)
    if part.rows:
        table_of(page, part)
    for sentence in part.sentences:
        if sentence:
            write(page, sentence, style="List Bullet" if part.listed and len(part.sentences) > 1 else None)


def table_of(page: Document, part: Part) -> None:
    """Add the table of a part, rules between its rows only."""
    rows = [part.columns, *part.rows] if part.columns else list(part.rows)
    table = page.add_table(rows=len(rows), cols=len(rows[0]))
    table.alignment = WD_TABLE_ALIGNMENT.LEFT
    _lines_between(table)
    widths = [Emu(int(WIDTH * share / 100)) for share in part.widths]
    for one, width in zip(table.columns, widths, strict=True):
        one.width = width
    for place, (row, texts) in enumerate(zip(table.rows, rows, strict=True)):
        properties = row._tr.get_or_add_trPr()
        properties.append(OxmlElement("w:cantSplit"))
        head = bool(part.columns) and place == 0
        if head:
            properties.append(OxmlElement("w:tblHeader"))
        cells = row.cells
        for column, (cell, text) in enumerate(zip(cells, texts, strict=True)):
            cell.width = widths[column]
            paragraph = cell.paragraphs[0]
            paragraph.paragraph_format.space_after = Pt(1)
            run = paragraph.add_run(printable(text))
            run.font.size, run.bold = SMALL, head or (not part.columns and column == 0)
        if len(cells) > 2 and not any(texts[2:]):
            _over_the_rest(cells)
    page.add_paragraph().paragraph_format.space_after = Pt(0)


def _over_the_rest(cells: Sequence[Any]) -> None:
    """Let the text of the second cell take the room of the empty ones after it."""
    for cell in cells[2:]:
        paragraph = cell.paragraphs[0]._p
        paragraph.getparent().replace(paragraph, OxmlElement("w:p"))
    whole = cells[1].merge(cells[-1])
    for paragraph in whole.paragraphs[1:]:
        paragraph._p.getparent().remove(paragraph._p)


def _lines_between(table: Any) -> None:
    """Rules between rows only."""
    table.autofit = False
    borders = OxmlElement("w:tblBorders")
    for side in ("top", "bottom", "insideH"):
        line = OxmlElement(f"w:{side}")
        for name, value in (("val", "single"), ("sz", "4"), ("space", "0"), ("color", "BBBBBB")):
            line.set(qn(f"w:{name}"), value)
        borders.append(line)
    after = [one for one in table._tbl.tblPr if one.tag in AFTER_BORDERS]
    after[0].addprevious(borders)  # the schema of the format fixes the order; every table has one of these


def place_picture(page: Document, drawing: Drawing) -> None:
    """Add a picture in the width of the text, with its sentence for those who do not see it."""
    shape = page.add_picture(BytesIO(png(drawing)), width=WIDTH)
    shape._inline.docPr.set("descr", printable(drawing.alt))


def _foot(page: Document, origin: str) -> None:
    paragraph = page.sections[0].footer.paragraphs[0]
    run = paragraph.add_run(printable(f"{origin} · page "))
    run.font.size = SMALL
    for kind in ("begin", None, "end"):
        run = paragraph.add_run()
        run.font.size = SMALL
        element = OxmlElement("w:fldChar" if kind else "w:instrText")
        if kind:
            element.set(qn("w:fldCharType"), kind)
        else:
            element.text = "PAGE"
        run._r.append(element)


def _describe(page: Document, analysis: Analysis, title: str, written: Written) -> None:
    facts = page.core_properties
    try:
        moment = datetime.fromisoformat(written.time or analysis.provenance.time).astimezone(UTC).replace(tzinfo=None)
    except ValueError:
        moment = datetime(*NO_MOMENT)
    facts.author, facts.title, facts.last_modified_by = printable(written.by)[:255], printable(title)[:255], ""
    facts.created = facts.modified = moment.replace(microsecond=0)
    facts.comments, facts.language = "", "en"


def without_moment(content: bytes) -> bytes:
    """Pack the parts again without the moment at which they were packed."""
    packed = BytesIO()
    with zipfile.ZipFile(BytesIO(content)) as parts, zipfile.ZipFile(packed, "w", zipfile.ZIP_DEFLATED) as again:
        for part in parts.infolist():
            fixed = zipfile.ZipInfo(part.filename, NO_MOMENT)
            fixed.compress_type, fixed.external_attr = zipfile.ZIP_DEFLATED, 0o600 << 16
            again.writestr(fixed, parts.read(part))
    return packed.getvalue()
