"""Buttons that copy to the clipboard: texts at once, the picture once the server has drawn it for the click."""

import base64
from collections.abc import Callable

import streamlit as st

from meanlab.page import state

_JS = """
export default function (component) {
  const { data, parentElement, setTriggerValue } = component;
  const row = parentElement.querySelector(".row");
  if (row.waitingForPicture && data.picture) {
    const bytes = Uint8Array.from(atob(data.picture), (sign) => sign.charCodeAt(0));
    row.waitingForPicture(new Blob([bytes], { type: "image/png" }));
    row.waitingForPicture = null;
  }
  row.askForPicture = () => setTriggerValue("picture", true);
  const drawn = JSON.stringify(data.texts);
  if (row.drawn === drawn) { return; }
  row.drawn = drawn;
  row.replaceChildren();
  const said = document.createElement("span");
  said.setAttribute("role", "status");
  const add = (name, done, write) => {
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = name;
    button.addEventListener("click", async () => {
      try {
        await write();
        said.textContent = done;
      } catch (problem) {
        said.textContent = "The browser did not allow it: select the text, or download the picture.";
      }
      setTimeout(() => { said.textContent = ""; }, 4000);
    });
    row.appendChild(button);
  };
  add("Copy picture", "Picture copied.", () => {
    const picture = new Promise((resolve) => { row.waitingForPicture = resolve; });
    row.askForPicture();
    return navigator.clipboard.write([new ClipboardItem({ "image/png": picture })]);
  });
  for (const [name, text] of data.texts) {
    add(name, "Copied.", () => navigator.clipboard.writeText(text));
  }
  row.appendChild(said);
}
"""
_CSS = """
.row { display: flex; flex-wrap: wrap; gap: 8px; align-items: center; }
button {
  font: inherit; font-size: 14px; color: var(--st-text-color); background: var(--st-background-color);
  border: 1px solid var(--st-border-color); border-radius: 2px; padding: 6px 12px; cursor: pointer; min-height: 36px;
}
button:hover { border-color: var(--st-text-color); }
button:focus-visible { outline: 2px solid var(--st-text-color); outline-offset: 1px; }
span { font-size: 13px; color: var(--st-text-color); }
"""
_HTML = """
<div class="row"></div>
"""
_WANTED = "picture_wanted"

_row = st.components.v2.component("meanlab_copies", html=_HTML, css=_CSS, js=_JS)


def draw(texts: tuple[tuple[str, str], ...], picture: Callable[[], bytes], key: str) -> None:
    """Draw a button for the picture (PNG, made only when it is asked for) and one for each text (label, text)."""
    asked_for = bool(state.widget(_WANTED))
    encoded = base64.b64encode(picture()).decode("ascii") if asked_for else None
    state.note(_WANTED, False)
    _row(data={"texts": [list(pair) for pair in texts], "picture": encoded}, key=key, on_picture_change=_wanted)


def _wanted() -> None:
    state.note(_WANTED, True)
