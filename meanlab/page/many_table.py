"""The table of many samples: an upload of its own, else the table that was pasted or opened above."""

from functools import lru_cache

import pandas as pd
import streamlit as st

from meanlab.core.complaints import Complaint
from meanlab.intake.whole import WholeTable, whole_tables
from meanlab.page import file_choice, state

UPLOAD, KEPT, OPENED = "many_upload", "many_kept", "many_opened"
Content = tuple[str | bytes, str | None]


def ask() -> None:
    """Draw the upload of this part, and the way back to the table above."""
    with st.container(key="many_source", horizontal=True, gap="small", vertical_alignment="center"):
        st.file_uploader("A table from a file", key="many_file", on_change=_uploaded, label_visibility="collapsed")
        upload = state.widget(UPLOAD)
        if upload is not None:
            st.html('<span class="ml-counts">The table of this part is the file opened here.</span>')
            st.button("Use the readings above", key="many_above", on_click=state.note, args=(UPLOAD, None))


def in_use() -> Content | None:
    """Return the table in use and the name of its file; None where there is none.

    Once a sample of a table was opened above, the table stays in use.
    """
    upload: Content | None = state.widget(UPLOAD)
    if upload is not None:
        return upload
    source = file_choice.source()
    if source is not None and source.content != state.widget(OPENED):
        try:
            if tables_of(source.content, source.filename):
                state.note(KEPT, (source.content, source.filename))
        except Complaint:  # said beside the readings
            pass
    kept: Content | None = state.widget(KEPT)
    return kept


@lru_cache(maxsize=4)
def tables_of(content: str | bytes, filename: str | None) -> tuple[WholeTable, ...]:
    """Return the tables of a text or file that have rows."""
    return tuple(table for table in whole_tables(content, filename) if table.height > 1)


@lru_cache(maxsize=4)
def frame_of(content: str | bytes, filename: str | None, sheet: str) -> pd.DataFrame:
    """Return one table of a text or file as columns."""
    table = next(one for one in tables_of(content, filename) if one.sheet == sheet)
    return pd.DataFrame(dict(zip(table.headings, map(list, table.columns), strict=True)), dtype=object)


def _uploaded() -> None:
    file = state.widget("many_file")
    if file is not None:
        state.note(UPLOAD, (file.getvalue(), file.name))
