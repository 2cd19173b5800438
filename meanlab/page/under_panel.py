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
    """Draw the row of copies; nothing while there is no result."""
    if found is None:
        state.taken(saving.WANTED)
        return
    wanted = [("Copy sentence", found.texts.sentence), ("Copy numbers", tab_separated(found.analysis))]
    if found.texts.mean_line:
        wanted.append(("Copy x̄ ± U", found.texts.mean_line))
    with st.container(key="under_panel", horizontal=True, gap="small"):
        copies.draw(tuple(wanted), partial(cache.picture, found), key="copies")
        saving.draw(found)
        _files(found)
        saving.say_saved(found)


def _files(found: Outcome) -> None:
    recorded = Recorded(found.analysis, saving.source_of_page(found), partial(_written, saving.saved_entry(found)))
    entry = saving.saved_entry(found)
    record_files.draw(recorded, "result" if entry is None else f"entry-{entry['number']}", key="record_files")


def _written(entry: dict[str, str] | None) -> Written:
    """Return what stands on the records: that of the saved entry, or of the fields where the result is not saved."""
    if entry is not None:
        try:
            return cache.notebook().entry(entry["key"]).written
        except NotebookComplaint:  # the notebook was moved: the record then has no number
            pass
    return saving.written_now()
