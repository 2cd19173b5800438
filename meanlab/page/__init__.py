"""The page: the only place, with meanlab/__main__.py, that imports streamlit."""

import streamlit as st

from meanlab.page import cache, focus, panel, parts, question, readings, state, styles, under_panel
from meanlab.page.guard import guarded, say


def show() -> None:
    """Draw the whole page: inputs left, result right, one further part below."""
    styles.apply()
    now = state.begin()
    with st.container(key="page"):
        left, right = st.columns([324, 990], gap="small")
        with left, st.container(key="inputs"):
            with st.container(key="readings"), guarded("readings"):
                readings.draw()
            with st.container(key="question"), guarded("question"):
                question.draw()
        with right:
            with st.container(key="notices"):
                for sentence in filter(None, (now.notice, now.trouble)):
                    say(sentence, "notice")
            found = panel.draw()
            with guarded("copies"):
                under_panel.draw(found)
    with guarded("lower part"):
        parts.draw(found)
    focus.draw()
    state.end()


def warm_up() -> None:
    """Import and run what the first result needs: the readings, the analysis, its texts and its pictures."""
    cache.warm_up()
