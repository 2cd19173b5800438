"""The file in use: its name, and the choice of sheet, column, rows and replicates."""

import html
from typing import Any

import streamlit as st

from meanlab.page import cache, state


def source() -> cache.Source | None:
    """Return where the readings come from at present, None where there are none."""
    now = state.working()
    content = state.file_bytes()
    if now.file is not None:
        return None if content is None else cache.Source(content, now.file["name"], _selection(now.fields))
    text = now.fields["readings_text"]
    return cache.Source(text, None, _selection(now.fields)) if text.strip() else None


def draw() -> None:
    """Draw the name of the file in use and the pickers it needs."""
    now = state.working()
    if now.file is None:
        return
    st.html(f'<p class="ml-counts">From <b>{html.escape(now.file["name"])}</b></p>')


def _selection(fields: dict[str, Any]) -> tuple[tuple[str, Any], ...]:
    sign = {"decimal comma": ",", "decimal point": "."}.get(fields["decimal_sign"])
    return (("decimal", sign),) if sign else ()
