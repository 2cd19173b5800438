"""Where the page looks: the box has the focus at the start; the lower part comes into view when it is called for."""

import streamlit as st

from meanlab.page import state

_JS = """
export default function (component) {
  const box = document.querySelector(".st-key-readings_text textarea");
  if (box && !window.meanlabFocused && document.activeElement === document.body && box.value === "") {
    box.focus();
  }
  window.meanlabFocused = true;
  if (component.data.jumps > (window.meanlabJumps ?? 0)) {
    document.querySelector(`.st-key-${component.data.to}`)?.scrollIntoView({ block: "start" });
  }
  window.meanlabJumps = component.data.jumps;
}
"""
_HTML = """
<span></span>
"""
_JUMPS, _TO = "jumps", "jump_to"

_focus = st.components.v2.component("meanlab_focus", html=_HTML, js=_JS)


def jump(to: str) -> None:
    """Bring a part of the page, by its key, into view, in a callback."""
    state.note(_TO, to)
    state.note(_JUMPS, (state.widget(_JUMPS) or 0) + 1)


def draw() -> None:
    """Put the focus into the readings box of a page that was just opened and is empty; go where a callback asked to."""
    with st.container(key="focus"):
        _focus(key="focus_once", data={"jumps": state.widget(_JUMPS) or 0, "to": state.widget(_TO) or ""})
