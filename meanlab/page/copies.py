"""Buttons that copy to the clipboard: a text, or a picture fetched only at the click."""

import base64

import streamlit as st

_JS = """
export default function (component) {
  const { data, parentElement } = component;
  const row = parentElement.querySelector(".row");
  row.replaceChildren();
  const said = document.createElement("span");
  said.setAttribute("role", "status");
  for (const item of data.items) {
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = item.label;
    button.addEventListener("click", async () => {
      try {
        if (item.picture) {
          const bytes = Uint8Array.from(atob(item.picture), (sign) => sign.charCodeAt(0));
          const blob = new Blob([bytes], { type: "image/png" });
          await navigator.clipboard.write([new ClipboardItem({ "image/png": blob })]);
        } else {
          await navigator.clipboard.writeText(item.text);
        }
        said.textContent = item.done;
      } catch (problem) {
        said.textContent = "The browser did not allow it; select the text, or download the picture.";
      }
      setTimeout(() => { said.textContent = ""; }, 4000);
    });
    row.appendChild(button);
  }
  row.appendChild(said);
}
"""
_CSS = """
.row { display: flex; flex-wrap: wrap; gap: 8px; align-items: center; }
button {
  font: inherit; font-size: 14px; color: var(--st-text-color); background: var(--st-background-color);
  border: 1px solid var(--st-border-color); border-radius: 8px; padding: 6px 12px; cursor: pointer; min-height: 36px;
}
button:hover, button:focus-visible { border-color: var(--st-text-color); }
button:focus-visible { outline: 2px solid var(--st-text-color); outline-offset: 1px; }
span { font-size: 13px; color: var(--st-text-color); }
"""
_HTML = """
<div class="row"></div>
"""

_row = st.components.v2.component("meanlab_copies", html=_HTML, css=_CSS, js=_JS)


def draw(texts: tuple[tuple[str, str], ...], picture: bytes | None, key: str) -> None:
    """Draw one button a text (label, text), and one for the picture (PNG) first where there is one."""
    items = [{"label": label, "text": text, "done": "Copied."} for label, text in texts]
    if picture is not None:
        encoded = base64.b64encode(picture).decode("ascii")
        items.insert(0, {"label": "Copy picture", "picture": encoded, "done": "Picture copied."})
    _row(data={"items": items}, key=key)
