"""The bench: where the page and the notebook are kept, and a new page beside it."""

import html

import streamlit as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.page import cache, focus, state


def draw() -> None:
    """Draw the opener that says where things are kept."""
    with st.popover("Notebook", key="notebook"):
        st.html(f'<p class="ml-status">{html.escape(_where())}</p>')
        st.button("Show the entries", key="show_entries", on_click=_show_entries)
        st.button("Start an empty page", key="start_afresh", on_click=state.start_afresh)


def _show_entries() -> None:
    state.put("part", "Notebook")
    focus.jump("part")


def _where() -> str:
    if not cache.kept_on_this_address():
        return (
            "This page is open to other computers, so nothing is kept on the server: a refresh begins an empty page, "
            "and the notebook is off. Take the result with you (Files, under the panel), or start meanlab on this "
            "computer with python -m meanlab."
        )
    try:
        place = cache.working_states().place
    except NotebookComplaint as complaint:
        return str(complaint)
    return (
        f"Readings, question and choices are kept as you type, in {place}. The address of this page opens them again, "
        "and nobody can guess it. Saved entries belong to this bench: every page that is opened on this computer shows "
        "them."
    )
