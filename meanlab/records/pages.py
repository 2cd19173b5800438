"""Several results as one DOCX, each on a page of its own: sentence, pictures, the table of the panel, why, cautions."""

from collections.abc import Iterable
from io import BytesIO

from docx.enum.text import WD_BREAK

from meanlab.core.results import Analysis
from meanlab.records.account import Part
from meanlab.records.document import (
    HEADING,
    SMALL,
    TITLE,
    empty_page,
    pictures,
    place_picture,
    table_of,
    without_moment,
    write,
)
from meanlab.wording import panel_texts


def written_pages(analyses: Iterable[tuple[str, Analysis]]) -> bytes:
    """Return results, each with the name of its sample, as DOCX with a page each; the same bytes each time."""
    page = empty_page()
    for place, (name, analysis) in enumerate(analyses):
        if place:
            page.add_paragraph().add_run().add_break(WD_BREAK.PAGE)
        texts = panel_texts(analysis)
        write(page, name, TITLE, bold=True)
        write(page, texts.verdict_word, HEADING, bold=True)
        write(page, texts.sentence)
        for drawing in pictures(analysis):
            place_picture(page, drawing)
        table_of(page, Part("", rows=texts.rows))
        write(page, " ".join(part for part in (texts.why, texts.caution) if part), SMALL)
        write(page, texts.origin, SMALL)
    page.core_properties.author = page.core_properties.comments = ""
    content = BytesIO()
    page.save(content)
    return without_moment(content.getvalue())
