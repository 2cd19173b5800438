"""The result panel as PDF: lines and letters, not dots, so that it prints sharp at any size."""

from io import BytesIO

import matplotlib
from matplotlib.backends.backend_pdf import FigureCanvasPdf

from meanlab.core.results import Analysis
from meanlab.pictures.for_paper import figure
from meanlab.records.panel import panel

_SELECTABLE = {"pdf.fonttype": 42}
_NO_MOMENT = {"CreationDate": None, "ModDate": None, "Creator": None, "Producer": None}


def panel_pdf(analysis: Analysis) -> bytes:
    """Return the result panel as PDF of its own size, its text selectable; the same bytes each time."""
    drawing = panel(analysis)
    paper = figure(drawing)
    FigureCanvasPdf(paper)
    content = BytesIO()
    with matplotlib.rc_context(_SELECTABLE):
        paper.savefig(content, format="pdf", metadata={**_NO_MOMENT, "Title": drawing.alt})
    return content.getvalue()
