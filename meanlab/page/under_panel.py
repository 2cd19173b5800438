"""What stands right under the panel: copies and the picture to download."""

from functools import partial

import streamlit as st

from meanlab.page import cache, copies
from meanlab.page.cache import Outcome
from meanlab.wording import tab_separated


def draw(found: Outcome | None) -> None:
    """Draw the row of copies; nothing while there is no result."""
    if found is None:
        return
    wanted = [("Copy sentence", found.texts.sentence), ("Copy numbers", tab_separated(found.analysis))]
    if found.texts.mean_line:
        wanted.append(("Copy x̄ ± U", found.texts.mean_line))
    with st.container(key="under_panel", horizontal=True, gap="small"):
        copies.draw(tuple(wanted), partial(cache.picture, found), key="copies")
        st.download_button(
            "Download picture",
            data=partial(cache.picture, found),
            file_name="meanlab-result.png",
            mime="image/png",
            on_click="ignore",
            key="download_picture",
        )
