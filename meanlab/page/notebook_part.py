"""Notebook: the latest entries, search, one entry in full, and the care of the whole."""

from collections.abc import Sequence

import streamlit as st

from meanlab.notebook import Listed, Notebook
from meanlab.page import cache, clock, entry_list, entry_view, notebook_care, record_opened, saving, state, tables
from meanlab.page.cache import Outcome

MOST_DRAWN = 100
CHOSEN, _SEARCHED = "entry_chosen", "entries_searched"


def draw(found: Outcome | None) -> None:
    """Draw the notebook; on an address that other computers reach, the reason why it is off."""
    with st.container(key="notebook_part"):
        _draw(found)


def _draw(found: Outcome | None) -> None:
    if not cache.kept_on_this_address():
        tables.sentences([saving.OFF])
        return
    book = cache.notebook()
    chosen = state.widget(CHOSEN) or ""
    if chosen and state.taken(entry_view.AMEND_WANTED):
        amended = entry_view.amend(chosen, found)
        if amended:
            state.note(CHOSEN, amended)
            st.rerun()  # what stands above says it too
    if chosen:
        st.button("All entries", key="all_entries", on_click=state.note, args=(CHOSEN, ""))
        entry_view.draw(book, chosen, found, own=True)
        return
    if record_opened.draw(found):
        return
    _list(book)
    notebook_care.draw(book)
    record_opened.ask()
    tables.sentences([_who_sees_it(book)])


def _list(book: Notebook) -> None:
    with st.container(key="search_row", horizontal=True, gap="small", vertical_alignment="bottom"):
        st.text_input("Search", key="search", placeholder="words, a number, or a fingerprint", width=420)
        text = (state.widget("search") or "").strip()
        entries, said = _searched(book, text) if text else _latest(book)
        st.html(f'<span class="ml-counts" role="status">{said}</span>')
    if entries:
        entry_list.draw(entries, clock.visitor_zone(), "entry_list", CHOSEN)


def _latest(book: Notebook) -> tuple[Sequence[Listed], str]:
    entries = book.entries()
    count = len(entries)
    if not count:
        return (), "No entry yet: save a result with Save entry, under the panel."
    shown = entries[-MOST_DRAWN:]
    if count <= MOST_DRAWN:
        return shown, "1 entry" if count == 1 else f"{count} entries"
    return shown, f"The latest {MOST_DRAWN} of {count:,} entries; search to find an earlier one."


def _searched(book: Notebook, text: str) -> tuple[Sequence[Listed], str]:
    found = _found(book, text)
    if not found:
        return (), "No entry holds all of these words."
    if len(found) > MOST_DRAWN:
        return found[1:], f"The latest {MOST_DRAWN} that were found; more words find fewer."
    return found, "1 entry found" if len(found) == 1 else f"{len(found)} entries found"


def _found(book: Notebook, text: str) -> Sequence[Listed]:
    """Search once as long as words and notebook stay the same."""
    asked_for = (text, len(book.entries()))
    kept = state.widget(_SEARCHED)
    if kept is None or kept[0] != asked_for:
        kept = (asked_for, book.search(text, latest=MOST_DRAWN + 1))
        state.note(_SEARCHED, kept)
    found: Sequence[Listed] = kept[1]
    return found


def _who_sees_it(book: Notebook) -> str:
    return (
        f"The notebook lies in {book.where}. It belongs to this bench: whoever opens meanlab on this computer sees "
        "these entries. Entries are never changed or removed; an amendment is a new entry."
    )
