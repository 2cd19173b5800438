"""The result panel as PDF: lines and letters, not dots, so that it prints sharp at any size."""

from meanlab.core.results import Analysis
from meanlab.pictures.for_paper import pdf
from meanlab.records.panel import panel


def panel_pdf(analysis: Analysis) -> bytes:
    """Return the result panel as PDF of its own size, its text selectable; the same bytes each time."""
    return pdf(panel(analysis))
