"""The readings: openers, the box to paste into, the line of counts and what a file needs to have chosen."""

import html
from datetime import UTC, datetime

import streamlit as st

from meanlab.intake import Intake
from meanlab.page import bench, cache, clock, file_choice, samples_opener, state
from meanlab.page.guard import guarded, say

SIGNS = ("as written", "decimal comma", "decimal point")
BOX_HEIGHT = 150
LARGE = 1_000_000  # characters or bytes that take about a second to read
BOX_HEIGHT_BESIDE_A_FILE = 68


def draw() -> None:
    """Draw the upper half of the left column.

    What comes and goes stands in containers that are always there: an element that moved would be made anew by the
    browser, and lose what is being typed into it.
    """
    with st.container(key="openers", horizontal=True, gap="small"):
        st.file_uploader("From a file", key="readings_file", label_visibility="collapsed", on_change=_opened)
        samples_opener.draw()
        bench.draw()
    _label_row()
    beside_file = state.working().file is not None
    st.text_area(
        "Readings, one a line",
        key="readings_text",
        height=BOX_HEIGHT_BESIDE_A_FILE if beside_file else BOX_HEIGHT,
        label_visibility="collapsed",
        placeholder="Paste here to use typed readings" if beside_file else "Paste the readings, one a line",
    )
    with st.container(key="file_choice"), guarded("file"):
        _read_with_patience()
        file_choice.draw()
    with st.container(key="counts"), guarded("readings"):
        _counts(intake())
    with st.container(key="put_back_row"):
        _put_back()


def _read_with_patience() -> None:
    """Say that a large text or file is being read, which can take seconds; what was read once is at hand afterwards."""
    source = file_choice.source()
    if source is not None and len(source.content) > LARGE:
        with st.spinner("Reading …", show_time=True):
            cache.read(source)


def intake() -> Intake | None:
    """Return what was read, None where there is nothing to read."""
    source = file_choice.source()
    return None if source is None else cache.read(source)


def left_out(found: Intake) -> tuple[tuple[int, str], ...]:
    """Return the readings left out by hand with their causes, as far as they still stand where they stood."""
    entries = found.entries
    chosen = sorted((int(place), said) for place, said in state.working().left_out.items())
    return tuple(
        (place, said["cause"]) for place, said in chosen if place < len(entries) and entries[place].text == said["text"]
    )


def _opened() -> None:
    file = state.widget("readings_file")
    if file is not None:
        state.use_file(file.name, file.getvalue())


def _label_row() -> None:
    now = state.working()
    with st.container(key="label_row", horizontal=True, vertical_alignment="center"):
        st.html('<span class="ml-label">Readings, one a line</span>')
        with st.container(key="clear_place", width="content"):
            if now.fields["readings_text"].strip() or now.file is not None:
                st.button("Clear", key="clear", type="tertiary", on_click=state.clear)
        st.html(f'<span class="ml-saved" role="status">{html.escape(_saved())}</span>')


def _saved() -> str:
    now = state.working()
    if not cache.kept_on_this_address():
        return "Not kept"
    if now.trouble:
        return "Not saved"
    return "" if now.saved is None else clock.saved_text(now.saved, clock.visitor_zone(), datetime.now(UTC))


def _counts(found: Intake | None) -> None:
    if found is None:
        st.html('<p class="ml-counts" role="status">&nbsp;</p>')
        return
    if found.refused:
        say(found.reason)
        if state.value("decimal_sign") != SIGNS[0]:
            draw_sign()
        return
    if asks_for_sign(found):
        say(found.reason)
        draw_sign()
        return
    st.html(f'<p class="ml-counts" role="status">{html.escape(found.counts_line())}</p>')
    _preparations(found)
    for warning in found.warnings[:2]:
        say(warning, "notice")
    if len(found.warnings) > 2:
        say(f'{len(found.warnings) - 2} more under "What was read".', "notice")


def asks_for_sign(found: Intake) -> bool:
    """Tell whether nothing in the column shows which the decimal sign is."""
    return found.needs_choice and any(choice.get("decimal") for choice in found.choices)


def draw_sign() -> None:
    """Draw the choice of the decimal sign."""
    st.segmented_control("Decimal sign", SIGNS, key="decimal_sign", required=True)


def _preparations(found: Intake) -> None:
    """Ask whether labels that were read name preparations, where no column of them was chosen."""
    if found.preparations is None or state.value("preparation") is not None:
        return
    count = len(set(found.preparations))
    st.checkbox(
        f"Average within {count} preparations" if count > 1 else "All from one preparation",
        key="labels_name_preparations",
        help="Readings of one preparation are not independent: ticked, they are averaged and n counts preparations.",
    )


def _put_back() -> None:
    previous = state.working().previous
    if previous is not None:
        st.button(
            "Put back the previous readings",
            key="put_back",
            type="tertiary",
            help=f"{previous['cause'].capitalize()}.",
            on_click=state.put_back,
        )
