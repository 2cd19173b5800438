"""Files: the records of a result to download; each is made when it is asked for, and not before."""

from collections.abc import Callable
from dataclasses import dataclass
from functools import partial

import streamlit as st

from meanlab import records
from meanlab.core.record_file import SUFFIX
from meanlab.core.results import Analysis
from meanlab.core.source import Source
from meanlab.core.written import Written

DOCX = "application/vnd.openxmlformats-officedocument.wordprocessingml.document"


@dataclass(frozen=True)
class Recorded:
    """What a record is made of: a result, where its readings came from, and what is written about it."""

    analysis: Analysis
    source: Callable[[], Source]
    written: Written

    def facts(self) -> tuple[Analysis, Source, Written]:
        """Return all three."""
        return self.analysis, self.source(), self.written


@dataclass(frozen=True)
class Kind:
    """One kind of record: its name on the page, the ending of its file, its media type, and how it is made."""

    label: str
    ending: str
    media_type: str
    make: Callable[[Recorded], bytes | str]


KINDS = (
    Kind("PNG", ".png", "image/png", lambda one: records.panel_png(one.analysis)),
    Kind("SVG", ".svg", "image/svg+xml", lambda one: records.panel_svg(one.analysis)),
    Kind("PDF", ".pdf", "application/pdf", lambda one: records.panel_pdf(one.analysis)),
    Kind("Written record (DOCX)", ".docx", DOCX, lambda one: records.written_record(*one.facts())),
    Kind("Record file (JSON)", SUFFIX, "application/json", lambda one: records.result_file(*one.facts())),
    Kind("Numbers (CSV)", ".csv", "text/csv", lambda one: records.numbers_csv(one.analysis, one.source())),
)


def draw(recorded: Recorded, stem: str, key: str) -> None:
    """Draw a button for each file of a result; ``stem`` begins their names."""
    with st.container(key=f"{key}_row", horizontal=True, gap="small"):
        for kind in KINDS:
            st.download_button(
                kind.label,
                data=partial(kind.make, recorded),
                file_name=f"{stem}{kind.ending}",
                mime=kind.media_type,
                on_click="ignore",
                key=f"{key}{kind.ending}",
            )
