"""The box has the focus at the start: a paste needs no click."""

import streamlit as st

_JS = """
export default function (component) {
  const box = document.querySelector(".st-key-readings_text textarea");
  if (box && !window.meanlabFocused && document.activeElement === document.body && box.value === "") {
    box.focus();
  }
  window.meanlabFocused = true;
}
"""
_HTML = """
<span></span>
"""

_focus = st.components.v2.component("meanlab_focus", html=_HTML, js=_JS)


def draw() -> None:
    """Put the focus into the readings box of a page that was just opened and is empty."""
    with st.container(key="focus"):
        _focus(key="focus_once")
