"""What keeps the notebook safe: all entries as one file, a copy elsewhere, and whether all is as it was saved."""

from collections.abc import Sequence
from datetime import UTC, datetime
from pathlib import Path

import streamlit as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.record_file import SUFFIX
from meanlab.notebook import Notebook
from meanlab.page import clock, state, tables
from meanlab.page.guard import say

MOST_PROBLEMS = 50
_COPY_WANTED, _COPIED, _VERIFY_WANTED, _VERIFIED = "copy_wanted", "copied", "verify_wanted", "verified"


def draw(book: Notebook) -> None:
    """Draw the ways to take the notebook elsewhere and to verify it, with what they found."""
    with st.container(key="care", horizontal=True, gap="small", vertical_alignment="bottom"):
        name = f"notebook-{datetime.now(UTC):%Y-%m-%d}{SUFFIX}"
        st.download_button(
            "Export all", data=book.exported, file_name=name, mime="application/json", on_click="ignore", key="export"
        )
        st.button("Verify", key="verify", on_click=state.note, args=(_VERIFY_WANTED, True))
        st.text_input("Folder for a copy", key="copy_folder", placeholder=_folder_of(book), width=420)
        st.button("Back up", key="back_up", on_click=state.note, args=(_COPY_WANTED, True))
    if state.taken(_COPY_WANTED):
        _back_up(book)
    if state.taken(_VERIFY_WANTED):
        _verify(book)
    said = state.widget(_COPIED)
    if said:
        say(said, "status")
    if state.widget(_VERIFIED):
        say_verified(*state.widget(_VERIFIED))


def say_verified(moment: datetime, count: int, problems: Sequence[str]) -> None:
    """Say that a notebook is whole, or what is not as it was saved."""
    when = clock.moment_text(moment.isoformat(), clock.visitor_zone())
    if not problems:
        entries = "1 entry is as it was" if count == 1 else f"all {count:,} entries are as they were"
        say(
            f"Verified {when}: {entries} saved; none is missing, moved or put in.",
            "status",
        )
        return
    say(f"Verified {when}: not all is as it was saved. Keep this file as it is, and go back to a copy.", "complaint")
    tables.sentences(problems[:MOST_PROBLEMS])
    if len(problems) > MOST_PROBLEMS:
        tables.sentences([f"… and {len(problems) - MOST_PROBLEMS:,} more."])


def _verify(book: Notebook) -> None:
    with st.spinner("Verifying every entry …"):
        state.note(_VERIFIED, (datetime.now(UTC), len(book.entries()), book.verify()))


def _back_up(book: Notebook) -> None:
    folder = Path((state.widget("copy_folder") or "").strip() or _folder_of(book)).expanduser()
    if not folder.is_dir():  # a disk that is not in place must not become a folder on this one
        state.note(_COPIED, f"Not copied. There is no folder {folder}: make it, or put the disk in place.")
        return
    path = folder / f"meanlab-copy-{datetime.now(clock.visitor_zone()):%Y-%m-%d-%H%M%S}.db"
    try:
        with st.spinner("Copying …"):
            made = book.back_up(path)
        state.note(_COPIED, f"Copied to {made}. A copy on another disk survives the loss of this one.")
    except NotebookComplaint as complaint:
        state.note(_COPIED, f"Not copied. {complaint}")


def _folder_of(book: Notebook) -> str:
    place = Path(book.place)
    return str(place.parent) if place.is_absolute() else str(Path.home())
