"""Save entry: the result with its readings, its question and what is written about it, kept in the notebook."""

import html
from collections.abc import Callable, Mapping
from datetime import UTC, datetime
from types import MappingProxyType

import streamlit as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.source import Source, source_of
from meanlab.core.written import Written
from meanlab.notebook import Entry
from meanlab.page import cache, clock, file_choice, question_times, state
from meanlab.page.cache import Outcome
from meanlab.page.fields import BENCH_FIELDS, WRITTEN
from meanlab.page.guard import say

WANTED, TROUBLE, OPEN = "save_entry_wanted", "save_entry_trouble", "open_under_panel"
HINTS: Mapping[str, str] = MappingProxyType(
    {
        "title": "e.g. control, morning run",
        "by": "e.g. A. Keller",
        "instrument": "",
        "method": "",
        "note": "",
    }
)
OFF = (
    "The notebook is off: this page is open to other computers, and nothing is kept on the server. "
    "Take the record file (JSON) under Files, or start meanlab on this computer with python -m meanlab."
)


def save_where_asked(found: Outcome | None) -> None:
    """Save the result where a click asked for it; a result that is saved already is no second entry."""
    asked_for = state.taken(WANTED)
    if asked_for and found is not None and cache.kept_on_this_address() and saved_entry(found) is None:
        _save(found)


def draw(found: Outcome) -> None:
    """Draw what can be written about the result, and the button that saves it."""
    if not cache.kept_on_this_address():
        say(OFF, "status")
        return
    entry = saved_entry(found)
    if entry is not None:
        say(f"This result is entry {entry['number']}. Another title or note: amend it under Notebook, below.", "status")
        return
    widths = [26, 15, 15, 15, 22, 8]
    places = st.columns(widths, gap="small", vertical_alignment="bottom")
    for place, (name, hint) in zip(places, HINTS.items(), strict=False):
        place.text_input(name.capitalize(), key=f"written_{name}", placeholder=hint)
    places[-1].button("Save", key="save_now", type="primary", on_click=state.note, args=(WANTED, True))
    trouble = state.widget(TROUBLE)
    if trouble:
        say(trouble)


def say_saved(found: Outcome) -> None:
    """Draw as which entry the result was saved, and when."""
    st.html(f'<span class="ml-entry" role="status">{html.escape(_said(found))}</span>')


def saved_entry(found: Outcome) -> dict[str, str] | None:
    """Return number, key and time of the entry as which this very result was saved; None where it was not."""
    entry = state.working().entry
    if entry is None or entry["fingerprint"] != found.analysis.provenance.fingerprint:
        return None
    return entry


def source_of_page(found: Outcome) -> Callable[[], Source]:
    """Return a function, to be called at any time, that says where the readings of the result come from."""
    source = file_choice.source()
    if source is None:
        raise NotebookComplaint("There are no readings on the page any more.")
    readings, name, chosen = found.analysis.readings, source.filename or "", source.chosen()
    return lambda: source_of(source.content, readings, cache.read(source), name, chosen)


def written_now() -> Written:
    """Return what stands in the fields about the result, and when each part of the question was set."""
    now = state.working()
    given = {name: now.fields[f"written_{name}"].strip() for name in WRITTEN}
    return Written(**given, set_times=question_times.in_words(now.set_times))


def remember_bench() -> None:
    """Keep what the bench sets the same way each time for the pages that begin after this."""
    fields = state.working().fields
    cache.notebook().remember(**{name: fields[field].strip() for name, field in BENCH_FIELDS.items()})


def _save(found: Outcome) -> None:
    state.note(TROUBLE, "")
    try:
        state.saved_as(_added(found))
        state.note(OPEN, "")
        for field in ("written_title", "written_note"):
            state.put(field, "")
        remember_bench()
    except NotebookComplaint as complaint:
        state.note(TROUBLE, str(complaint))


def _added(found: Outcome) -> Entry:
    written = written_now()
    return cache.notebook().add(
        found.analysis,
        written.title,
        written.by,
        written.note,
        source_of_page(found)(),
        instrument=written.instrument,
        method=written.method,
        set_times=written.set_times,
    )


def _said(found: Outcome) -> str:
    entry = saved_entry(found)
    if entry is None:
        return ""
    saved = datetime.fromisoformat(entry["time"])
    when = clock.saved_text(saved, clock.visitor_zone(), datetime.now(UTC))
    return f"Entry {entry['number']} {when[0].lower()}{when[1:]}"
