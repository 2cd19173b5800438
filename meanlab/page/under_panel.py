"""What stands right under the panel: copies and the picture to download."""

import streamlit as st

from meanlab.core.complaints import Complaint
from meanlab.page import copies, panel
from meanlab.wording import tab_separated


def draw() -> None:
    """Draw the row of copies; nothing while there is no result."""
    try:
        found = panel.outcome()
    except Complaint:  # said in the panel
        return
    if found is None:
        return
    texts = found.texts
    wanted = [("Copy sentence", texts.sentence), ("Copy numbers", tab_separated(found.analysis))]
    if texts.mean_line:
        wanted.append(("Copy x̄ ± U", texts.mean_line))
    with st.container(key="under_panel", horizontal=True, gap="small"):
        copies.draw(tuple(wanted), None, key="copies")
