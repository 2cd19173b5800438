"""The opener of the sample sets: one button a set, with its scenario in one line."""

import html
from functools import lru_cache

import streamlit as st

from meanlab.page import state
from meanlab.samples import SampleSet, sample_sets

OPENER = "sample_sets"


def draw() -> None:
    """Draw the opener; its list only while it is open."""
    opener = st.popover("Sample sets", key=OPENER, on_change="rerun")
    if not opener.open:
        return
    with opener, st.container(key="sample_list"):
        sets = _sets()
        if not sets:
            st.html('<p class="ml-status">The folder sample_sets is not here; copy it beside the folder meanlab.</p>')
        for place, one in enumerate(sets):
            with st.container(key=f"sample_row_{place}", horizontal=True, vertical_alignment="center", gap="small"):
                st.button(one.title, key=f"sample_{place}", on_click=_open, args=(one,), width=230)
                st.html(f'<p class="ml-status">{html.escape(one.scenario)}</p>')


def _open(chosen: SampleSet) -> None:
    content = chosen.content
    state.note(OPENER, False)
    if isinstance(content, str):
        state.open_set(chosen.title, {**chosen.fields, "readings_text": content})
    else:
        state.open_set(chosen.title, chosen.fields, (chosen.path.name, content))


@lru_cache(maxsize=1)
def _sets() -> tuple[SampleSet, ...]:
    return sample_sets()
