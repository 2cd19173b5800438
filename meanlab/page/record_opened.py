"""A record file that is opened to read: its entries, and whether they are as they were sealed; nothing is kept."""

from dataclasses import dataclass
from datetime import UTC, datetime

import streamlit as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import Notebook
from meanlab.page import clock, entry_list, entry_view, notebook_care, state, tables
from meanlab.page.cache import Outcome
from meanlab.page.guard import say

LARGEST = 200  # megabytes
MOST_DRAWN = 100
_OPENED, _TROUBLE, _CHOSEN = "record_opened", "record_trouble", "record_entry_chosen"


@dataclass(frozen=True)
class OpenedRecord:
    """The entries of a record file in memory, and what is not as it was sealed."""

    name: str
    book: Notebook
    opened: datetime
    problems: tuple[str, ...]


def draw(found: Outcome | None) -> bool:
    """Draw the record file that is open, and tell whether one is."""
    opened = state.widget(_OPENED)
    if opened is None:
        return False
    st.button("Close the record file", key="record_close", on_click=_close)
    tables.heading(f"Record file {opened.name}, opened to read")
    notebook_care.say_verified(opened.opened, len(opened.book.entries()), opened.problems)
    chosen = state.widget(_CHOSEN) or ""
    entries = opened.book.entries()
    if not chosen and len(entries) == 1:
        chosen = entries[0].key
    if chosen:
        if len(entries) > 1:
            st.button("All its entries", key="record_entries", on_click=state.note, args=(_CHOSEN, ""))
        entry_view.draw(opened.book, chosen, found, own=False)
        return True
    entry_list.draw(entries[-MOST_DRAWN:], clock.visitor_zone(), "record_list", _CHOSEN)
    return True


def ask() -> None:
    """Draw the place to open a record file."""
    trouble = state.widget(_TROUBLE)
    st.file_uploader("Open a record file", key="record_file", on_change=_open, max_upload_size=LARGEST)
    if trouble:
        say(trouble)


def _open() -> None:
    file = state.widget("record_file")
    if file is None:
        return
    state.note(_TROUBLE, "")
    try:
        book = Notebook.from_file(file.getvalue(), file.name)
        state.note(_OPENED, OpenedRecord(file.name, book, datetime.now(UTC), tuple(book.verify())))
    except NotebookComplaint as complaint:
        state.note(_TROUBLE, str(complaint))


def _close() -> None:
    state.widget(_OPENED).book.close()
    for key, empty in ((_OPENED, None), (_CHOSEN, "")):
        state.note(key, empty)
