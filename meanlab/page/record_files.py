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
    written: Callable[[], Written]  # called while the opener is drawn, as what is written may change on the page


@dataclass(frozen=True)
class Kind:
    """One kind of record: its name on the page, the ending of its file, its media type, and how it is made."""

    label: str
    ending: str
    media_type: str
    make: Callable[[Analysis, Callable[[], Source], Written], bytes | str]


KINDS = (
    Kind("Picture (PNG)", ".png", "image/png", lambda found, _source, _written: records.panel_png(found)),
    Kind("Picture (SVG)", ".svg", "image/svg+xml", lambda found, _source, _written: records.panel_svg(found)),
    Kind("Picture (PDF)", ".pdf", "application/pdf", lambda found, _source, _written: records.panel_pdf(found)),
    Kind(
        "Written record (DOCX)",
        ".docx",
        DOCX,
        lambda found, source, written: records.written_record(found, source(), written),
    ),
    Kind(
        "Record file (JSON)",
        SUFFIX,
        "application/json",
        lambda found, source, written: records.result_file(found, source(), written),
    ),
    Kind("Numbers (CSV)", ".csv", "text/csv", lambda found, source, _written: records.numbers_csv(found, source())),
)


def draw(recorded: Recorded, stem: str, key: str) -> None:
    """Draw the opener of the files of a result; ``stem`` begins their names."""
    opener = st.popover("Files", key=key, on_change="rerun")
    if not opener.open:
        return
    written = recorded.written()
    with opener, st.container(key=f"{key}_list", gap="small"):
        for kind in KINDS:
            st.download_button(
                kind.label,
                data=partial(kind.make, recorded.analysis, recorded.source, written),
                file_name=f"{stem}{kind.ending}",
                mime=kind.media_type,
                on_click="ignore",
                key=f"{key}{kind.ending}",
                width="stretch",
            )
