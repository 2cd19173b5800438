"""What was read: each entry with its place, its text and its role; a reading is left out only by hand, with a cause."""

import streamlit as st

from meanlab.intake import Intake
from meanlab.page import readings, state, tables
from meanlab.page.cache import Outcome
from meanlab.page.guard import say

MOST_ROWS = 300
HEIGHT = 360


def draw(_found: Outcome | None) -> None:
    """Draw what was read, with its warnings and notes, and the way to leave a reading out."""
    found = readings.intake()
    if found is None:
        tables.sentences(
            ["Each entry stands here with its line, its text and its role as soon as readings are pasted."]
        )
        return
    if found.refused:
        tables.sentences([found.reason])
        return
    left, right = st.columns([3, 2], gap="medium")
    with left:
        tables.draw(("No.", "Where", "As typed", "Role"), _rows(found), HEIGHT)
        _too_many(found)
    with right:
        if not readings.asks_for_sign(found):
            readings.draw_sign()
        tables.sentences([found.evidence])
        for warning in found.warnings:
            say(warning, "notice")
        tables.sentences(found.notes)
        _leave_out(found)


def _rows(found: Intake) -> list[tuple[str, ...]]:
    out = dict(readings.left_out(found))
    entries = found.entries
    notable = sorted({*found.special, *out})[:MOST_ROWS]
    rows: list[tuple[str, ...]] = []
    for place in sorted({*notable, *range(min(MOST_ROWS, len(entries)))}):
        entry, cause = entries[place], out.get(place)
        role = entry.role if cause is None else f"left out: {cause}"
        rows.append((str(place + 1), entry.place, entry.text, role))
    return rows


def _too_many(found: Intake) -> None:
    if len(found.entries) > MOST_ROWS:
        tables.sentences(
            [f"Of {len(found.entries):,} entries the first {MOST_ROWS} and those that are no plain readings are shown."]
        )


def _leave_out(found: Intake) -> None:
    tables.heading("Leave a reading out")
    number, cause = st.columns([1, 3], gap="small")
    number.text_input("No.", key="leave_out_number")
    cause.text_input("Cause", key="leave_out_cause", placeholder="e.g. air bubble in the cell, seen at the time")
    st.button("Leave it out", key="leave_out", on_click=_left_out, args=(found,))
    complaint = state.widget("leave_out_complaint")
    if complaint:
        say(complaint)
    for place, _ in sorted(readings.left_out(found)):
        st.button(f"Count no. {place + 1} again", key=f"take_back_{place}", on_click=state.take_back, args=(place,))


def _left_out(found: Intake) -> None:
    typed, cause = (state.widget(key) or "" for key in ("leave_out_number", "leave_out_cause"))
    number = int(typed) if typed.strip().isdecimal() else 0
    entry = found.entries[number - 1] if 0 < number <= len(found.entries) else None
    state.note("leave_out_complaint", _objection(typed, cause, entry is not None))
    if entry is not None and cause.strip():
        state.leave_out(entry.index, entry.text, cause.strip())
        state.note("leave_out_number", "")
        state.note("leave_out_cause", "")


def _objection(typed: str, cause: str, known: bool) -> str:
    if not known:
        return f'There is no entry no. "{typed.strip()}": type the number in the first column of the table.'
    if not cause.strip():
        return "A reading is left out only with its cause: write what happened at the bench."
    return ""
