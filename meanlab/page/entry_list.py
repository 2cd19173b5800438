"""The list of entries as a table in which a click on a line opens the entry; every text in it stays text."""

from collections.abc import Sequence
from datetime import tzinfo

import streamlit as st

from meanlab.notebook import Listed
from meanlab.page import clock, state

_JS = """
export default function (component) {
  const { data, parentElement, setTriggerValue } = component;
  const body = parentElement.querySelector("tbody");
  const drawn = JSON.stringify(data.rows);
  if (body.drawn === drawn) { return; }
  body.drawn = drawn;
  body.replaceChildren();
  for (const [key, number, ...texts] of data.rows) {
    const row = document.createElement("tr");
    const open = () => setTriggerValue("chosen", key);
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = number;
    button.setAttribute("aria-label", "Show entry " + number);
    const first = document.createElement("td");
    first.appendChild(button);
    row.appendChild(first);
    for (const text of texts) {
      const cell = document.createElement("td");
      cell.textContent = text;
      row.appendChild(cell);
    }
    row.addEventListener("click", () => { if (String(getSelection()) === "") { open(); } });
    body.appendChild(row);
  }
}
"""
_CSS = """
.room { max-height: 420px; overflow: auto; }
table { border-collapse: collapse; width: 100%; font-size: 14px; line-height: 20px; color: var(--st-text-color); }
th { text-align: left; font-weight: 600; position: sticky; top: 0; background: var(--st-background-color); }
th, td { padding: 4px 16px 4px 0; vertical-align: top; }
td { overflow-wrap: anywhere; }
td:nth-child(2), td:nth-child(5) { white-space: nowrap; }
td:nth-child(3) { min-width: 180px; }
tbody tr { border-top: 1px solid var(--st-border-color); cursor: pointer; }
tbody tr:hover { background: var(--st-secondary-background-color); }
button {
  font: inherit; color: inherit; background: none; border: none; padding: 2px 4px; min-width: 24px; min-height: 24px;
  cursor: pointer; text-decoration: underline; text-align: left;
}
button:focus-visible { outline: 2px solid var(--st-text-color); outline-offset: 1px; }
"""
_HTML = """
<div class="room" tabindex="0" role="group" aria-label="Entries"><table>
<thead><tr><th scope="col">No.</th><th scope="col">Saved</th><th scope="col">Title</th><th scope="col">Material</th>
<th scope="col">Verdict</th><th scope="col">Sentence</th></tr></thead><tbody></tbody></table></div>
"""

_list = st.components.v2.component("meanlab_entries", html=_HTML, css=_CSS, js=_JS)


def draw(entries: Sequence[Listed], zone: tzinfo, key: str, chosen: str) -> None:
    """Draw entries, the latest first; the key of the one that is clicked is noted under ``chosen``."""
    rows = [list(line(one, zone)) for one in reversed(entries)]
    _list(data={"rows": rows}, key=key, on_chosen_change=lambda: _choose(key, chosen))


def line(one: Listed, zone: tzinfo) -> tuple[str, ...]:
    """Return one line of the list: key, number, time, title with amendments, material, verdict, sentence."""
    remarks = [one.title] if one.title else []
    if one.amends is not None:
        remarks.append(f"(amends entry {one.amends})")
    if one.amended_by is not None:
        remarks.append(f"(amended by entry {one.amended_by})")
    saved = clock.moment_text(one.time, zone)
    return one.key, str(one.number), saved, " ".join(remarks), one.material, one.verdict, one.sentence


def _choose(key: str, chosen: str) -> None:
    given = state.widget(key)
    found = None if given is None else given.get("chosen")
    if isinstance(found, str):
        state.note(chosen, found)
