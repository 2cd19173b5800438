"""One entry as it was saved: its sentence, its figures, the source of its readings, and whether it comes out again."""

from collections.abc import Sequence
from dataclasses import dataclass

import streamlit as st

from meanlab.core.complaints import Complaint, NotebookComplaint
from meanlab.notebook import Changed, Entry, Notebook, recompute
from meanlab.notebook.entry import digest_of
from meanlab.page import cache, clock, focus, record_files, reopening, saving, state, tables
from meanlab.page.cache import Outcome
from meanlab.page.guard import say
from meanlab.page.record_files import Recorded
from meanlab.records.account import origin_rows, readings_part
from meanlab.records.asked import question_rows
from meanlab.wording import PanelTexts, panel_texts

MOST_CHANGES = 20
HEIGHT = 300
AMEND_WANTED, AMEND_TROUBLE = "amend_wanted", "amend_trouble"
_LOOKED_AT = "entry_looked_at"


@dataclass(frozen=True)
class LookedAt:
    """An entry with the texts of its panel, what no longer comes out as it was, and whether it is as it was sealed."""

    entry: Entry
    texts: PanelTexts
    changed: Sequence[Changed]
    sealed: bool


def draw(book: Notebook, key: str, found: Outcome | None, own: bool) -> None:
    """Draw an entry; ``own`` tells that it stands in the notebook of this bench, where it can be amended."""
    looked_at = _look(book, key)
    entry, texts = looked_at.entry, looked_at.texts
    title = f"Entry {entry.number}, {clock.moment_text(entry.time, clock.visitor_zone())}"
    tables.heading(f"{title}: {entry.title}" if entry.title else title)
    tables.sentences([f"{texts.title}: {texts.verdict_word}.", texts.sentence])
    say(_comes_out(looked_at), "notice" if looked_at.changed or not looked_at.sealed else "status")
    with st.container(key="entry_row", horizontal=True, gap="small"):
        st.button("Open", key="entry_open", type="primary", on_click=_open, args=(entry, own))
        recorded = Recorded(entry.analysis, lambda: entry.source, entry.written)
        record_files.draw(recorded, f"entry-{entry.number}", key="entry_file")
    if state.widget("entry_trouble"):
        say(state.widget("entry_trouble"))
    left, right = st.columns(2, gap="medium")
    with left:
        tables.draw(("Result", ""), texts.rows)
        tables.draw(("Question", ""), list(question_rows(entry.analysis, entry.written)))
    with right:
        part = readings_part(entry.analysis, entry.source)
        tables.draw(part.columns, part.rows, HEIGHT)
        tables.sentences(part.sentences)
        tables.draw(("Origin", ""), list(origin_rows(entry.analysis, entry.source, entry.written)))
    if own:
        _amend(entry, found)


def _look(book: Notebook, key: str) -> LookedAt:
    """Read and recompute an entry once as long as it is the one that is shown."""
    kept = state.widget(_LOOKED_AT)
    if kept is not None and kept[0] is book and kept[1] == key:
        found: LookedAt = kept[2]
        return found
    entry = book.entry(key)
    sealed = digest_of(entry.content) == entry.digest
    found = LookedAt(entry, panel_texts(entry.analysis), tuple(recompute(entry)), sealed)
    state.note(_LOOKED_AT, (book, key, found))
    return found


def _comes_out(looked_at: LookedAt) -> str:
    said = "" if looked_at.sealed else "The content of this entry is not what was saved: verify the notebook. "
    if not looked_at.changed:
        return f"{said}Recomputed now from its own readings and question: every digit is the same."
    parts = "; ".join(
        f"{one.part.removeprefix('analysis.')}: {one.kept} was kept, {one.now} comes out now"
        for one in looked_at.changed[:MOST_CHANGES]
    )
    more = len(looked_at.changed) - MOST_CHANGES
    ending = f"; and {more} more" if more > 0 else ""
    return f"{said}Recomputed now, {len(looked_at.changed)} figures or texts differ: {parts}{ending}."


def _open(entry: Entry, own: bool) -> None:
    state.note("entry_trouble", "")
    try:
        state.open_entry(entry, reopening.reopened(entry, state.find_file), own)
        focus.jump("panel")
    except Complaint as complaint:
        state.note("entry_trouble", str(complaint))


def _amend(entry: Entry, found: Outcome | None) -> None:
    with st.expander(f"Amend entry {entry.number}", key="amend"):
        if found is None:
            tables.sentences(["There is no result on the page: open this entry, correct it, then amend it here."])
            return
        tables.sentences(
            [
                f"Saves the result now on the page as a new entry that names entry {entry.number} and the reason; "
                f"entry {entry.number} stays as it is. The page says: {found.texts.sentence}"
            ]
        )
        st.text_input("Reason", key="amend_reason", placeholder="e.g. reading 4 was copied wrongly from the sheet")
        left, right = st.columns(2, gap="small")
        left.text_input("Title", key="amend_title", placeholder=entry.title or "as before")
        right.text_input("By", key="written_by_amending", placeholder=state.value("written_by"))
        st.text_input("Note", key="amend_note")
        st.button("Save amendment", key="amend_save", type="primary", on_click=state.note, args=(AMEND_WANTED, True))
        if state.widget(AMEND_TROUBLE):
            say(state.widget(AMEND_TROUBLE))


def amend(key: str, found: Outcome | None) -> str:
    """Save the result of the page as an amendment of an entry; returns the key of the new entry, "" where none is."""
    state.note(AMEND_TROUBLE, "")
    if found is None:
        return ""
    typed = {name: (state.widget(name) or "").strip() for name in ("amend_reason", "amend_title", "amend_note")}
    written = saving.written_now()
    try:
        entry = cache.notebook().amend(
            key,
            found.analysis,
            typed["amend_reason"],
            title=typed["amend_title"] or None,
            by=(state.widget("written_by_amending") or "").strip() or written.by,
            note=typed["amend_note"],
            source=saving.source_of_page(found)(),
            instrument=written.instrument or None,
            method=written.method or None,
            set_times=written.set_times,
        )
    except NotebookComplaint as complaint:
        state.note(AMEND_TROUBLE, str(complaint))
        return ""
    state.saved_as(entry)
    return entry.key
