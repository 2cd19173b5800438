"""Below the panel: one part at a time, chosen by a control that remembers."""

from collections.abc import Callable, Mapping
from types import MappingProxyType

import streamlit as st

from meanlab.page import (
    agreement_part,
    checks_part,
    enough_part,
    entries_part,
    many_part,
    notebook_part,
    others_part,
    state,
    uncertainty_part,
)
from meanlab.page.cache import Outcome
from meanlab.page.guard import guarded

PARTS: Mapping[str, Callable[[Outcome | None], None]] = MappingProxyType(
    {
        "What was read": entries_part.draw,
        "Checks": checks_part.draw,
        "Same readings, other procedures": others_part.draw,
        "Enough readings?": enough_part.draw,
        "Uncertainty": uncertainty_part.draw,
        "Agreement": agreement_part.draw,
        "Many samples": many_part.draw,
        "Notebook": notebook_part.draw,
    }
)


def draw(found: Outcome | None) -> None:
    """Draw the control and the one part it names."""
    st.segmented_control("Below the panel", tuple(PARTS), key="part", label_visibility="collapsed", required=True)
    name = state.value("part")
    if name not in PARTS:
        return
    with st.container(key="lower_part"), guarded(name):
        PARTS[name](found)
