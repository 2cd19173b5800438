"""What stands right under the panel: copies, the entry in the notebook, and the files."""

from functools import partial

import streamlit as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.written import Written
from meanlab.page import cache, copies, record_files, saving, state
from meanlab.page.cache import Outcome
from meanlab.page.record_files import Recorded
from meanlab.wording import tab_separated


def draw(found: Outcome | None) -> None:
    """Draw the row of copies, and below it what "Save entry" or "Files" opened; nothing while there is no result."""
    saving.save_where_asked(found)
    if found is None:
        return
    wanted = [("Copy sentence", found.texts.sentence), ("Copy numbers", tab_separated(found.analysis))]
    if found.texts.mean_line:
        wanted.append(("Copy x̄ ± U", found.texts.mean_line))
    with st.container(key="under_panel", horizontal=True, gap="small"):
        copies.draw(tuple(wanted), partial(cache.picture, found), key="copies")
        st.button("Save entry", key="save_entry", on_click=_open_or_close, args=("save",))
        st.button("Files", key="record_files", on_click=_open_or_close, args=("files",))
        saving.say_saved(found)
    with st.container(key="opened_under_panel"):
        opened = state.widget(saving.OPEN)
        if opened == "save":
            saving.draw(found)
        elif opened == "files":
            _files(found)


def _open_or_close(name: str) -> None:
    state.note(saving.OPEN, "" if state.widget(saving.OPEN) == name else name)


def _files(found: Outcome) -> None:
    entry = saving.saved_entry(found)
    stem = "result" if entry is None else f"entry-{entry['number']}"
    record_files.draw(Recorded(found.analysis, saving.source_of_page(found), _written(entry)), stem, key="file")


def _written(entry: dict[str, str] | None) -> Written:
    """Return what stands on the records: that of the saved entry, or of the fields where the result is not saved."""
    if entry is not None:
        try:
            return cache.notebook().entry(entry["key"]).written
        except NotebookComplaint:  # the notebook was moved: the record then has no number
            pass
    return saving.written_now()
