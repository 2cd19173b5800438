"""The rows of a run: sorted, filtered, chosen, and one opened by a click; every text in it stays text."""

from collections.abc import Mapping
from math import isfinite
from typing import Any

import numpy as np
import pandas as pd
import streamlit as st

from meanlab.core.results import Interval
from meanlab.many import OUTCOMES
from meanlab.page import state
from meanlab.page.many_opening import open_sample
from meanlab.page.many_run import Ran
from meanlab.wording.names import PROCEDURE_NAMES
from meanlab.wording.numbers import decimal_text, interval_text, p_text, places_for, signed_text, significant

SHOWN = 200
SORT, PAGE, CHOSEN = "many_sort", "many_page", "many_chosen"
HEADINGS = (
    ("sample", "Sample"), ("n", "n"), ("mean", "Mean"), ("s", "s"), ("target", "Target"),
    ("difference", "Difference"), ("low", "Interval"), ("p", "p"), ("p_holm", "p (Holm)"),
    ("procedure", "Procedure"), ("outcome", "After Holm"), ("flags", "Flags"),
)  # fmt: skip

_JS = """
export default function (component) {
  const { data, parentElement, setTriggerValue } = component;
  const table = parentElement.querySelector("table");
  const drawn = JSON.stringify([data.headings, data.rows]);
  if (table.drawn === drawn) { return; }
  table.drawn = drawn;
  const head = document.createElement("tr");
  const add = (row, kind, child) => {
    const cell = document.createElement(kind);
    cell.append(child);
    row.append(cell);
  };
  add(head, "th", "Chosen");
  for (const [key, label, sorted] of data.headings) {
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = label + (sorted === "up" ? " ↑" : sorted === "down" ? " ↓" : "");
    button.addEventListener("click", () => setTriggerValue("sort", key));
    add(head, "th", button);
    head.lastChild.setAttribute("scope", "col");
    if (sorted) { head.lastChild.setAttribute("aria-sort", sorted === "up" ? "ascending" : "descending"); }
  }
  table.tHead.replaceChildren(head);
  table.tBodies[0].replaceChildren(...data.rows.map(([place, chosen, name, ...texts]) => {
    const row = document.createElement("tr");
    const box = document.createElement("input");
    box.type = "checkbox";
    box.checked = chosen;
    box.setAttribute("aria-label", "Choose " + name);
    box.addEventListener("change", () => setTriggerValue("pick", [place, box.checked]));
    add(row, "td", box);
    const button = document.createElement("button");
    button.type = "button";
    button.textContent = name;
    button.addEventListener("click", () => setTriggerValue("open", place));
    add(row, "td", button);
    for (const text of texts) { add(row, "td", text); }
    return row;
  }));
}
"""
_CSS = """
.room { max-height: 460px; overflow: auto; }
table { border-collapse: collapse; width: 100%; font-size: 13px; line-height: 18px; color: var(--st-text-color); }
th { text-align: left; font-weight: 600; position: sticky; top: 0; background: var(--st-background-color); }
th, td { padding: 1px 12px 1px 0; vertical-align: middle; white-space: nowrap; }
td:last-child { white-space: normal; overflow-wrap: anywhere; min-width: 160px; }
tbody tr { border-top: 1px solid var(--st-border-color); }
button {
  font: inherit; color: inherit; background: none; border: none; padding: 2px 0; min-width: 24px; min-height: 24px;
  cursor: pointer; text-align: left; text-decoration: underline; max-width: 320px; white-space: normal;
}
button:focus-visible, input:focus-visible { outline: 2px solid var(--st-text-color); outline-offset: 1px; }
input { width: 18px; height: 18px; accent-color: var(--st-text-color); }
"""
_HTML = """
<div class="room" tabindex="0" role="group" aria-label="Samples"><table><thead></thead><tbody></tbody></table></div>
"""

_list = st.components.v2.component("meanlab_samples", html=_HTML, css=_CSS, js=_JS)


def draw(ran: Ran) -> np.ndarray:
    """Draw the filters and the rows; return the places of the rows that the filter leaves, in their order."""
    counts = [int(np.sum(ran.outcomes == name)) for name in OUTCOMES]
    labels = {"all": f"all {len(ran.results):,}"} | {
        name: f"{ran.words[name]} {count:,}" for name, count in zip(OUTCOMES, counts, strict=True)
    }
    st.segmented_control(
        "Show", ["all", *OUTCOMES], key="many_filter", format_func=labels.__getitem__, label_visibility="collapsed",
        required=True, on_change=state.note, args=(PAGE, 0),
    )  # fmt: skip
    wanted = state.value("many_filter")
    places = _ordered(ran)
    if wanted in OUTCOMES:
        places = places[ran.outcomes[places] == wanted]
    start = _page(len(places))
    chosen = chosen_of(ran)
    column, falling = state.widget(SORT) or ("", False)
    headings = [[key, label, ("down" if falling else "up") if key == column else ""] for key, label in HEADINGS]
    shown = places[start : start + SHOWN]
    found = ran.results.iloc[shown].to_dict("records")
    rows = [
        [int(place), int(place) in chosen, *texts_of(ran, int(place), row)]
        for place, row in zip(shown, found, strict=True)
    ]
    _list(
        data={"headings": headings, "rows": rows}, key="many_list",
        on_sort_change=_sort, on_open_change=lambda: _open(ran), on_pick_change=lambda: _pick(ran),
    )  # fmt: skip
    _turn_pages(ran, places, start)
    return places


def chosen_of(ran: Ran) -> set[int]:
    """Return the places of the samples that are chosen."""
    mark, chosen = state.widget(CHOSEN) or (None, set())
    return set(chosen) if mark == id(ran.results) else set()


def texts_of(ran: Ran, place: int, row: Mapping[Any, Any]) -> list[str]:
    """Return one row of the result as texts, in the order of the headings."""
    sign, alpha = ran.sign, ran.question.alpha
    places = _places(row)

    def number(value: float) -> str:
        if pd.isna(value):
            return "–"
        return significant(value, 4, sign) if places is None else decimal_text(value, places, sign)

    def p(value: float) -> str:
        return "–" if pd.isna(value) else p_text(value, alpha, sign).removeprefix("p = ").removeprefix("p ")

    low, high = (None if pd.isna(row[name]) else float(row[name]) for name in ("low", "high"))
    tested = not pd.isna(row["p"])
    interval = interval_text(Interval(low, high, 1 - alpha, 1 - alpha), places or 3, sign) if tested else "–"
    difference = row["difference"]
    apart = number(difference) if pd.isna(difference) or places is None else signed_text(difference, places, sign)
    s = row["s"]
    return [
        ran.opened.name(place), str(row["n"]), number(row["mean"]),
        "–" if pd.isna(s) else significant(s, 2, sign), ran.opened.target_text(place),
        apart, interval, p(row["p"]), p(row["p_holm"]), PROCEDURE_NAMES.get(str(row["procedure"]), "–"),
        ran.words[ran.outcomes[place]], row["flags"],
    ]  # fmt: skip


def _places(row: Mapping[Any, Any]) -> int | None:
    """Decimal places by the half-width of the interval, two digits; None where there is none."""
    ends = [abs(row[name] - row["mean"]) for name in ("low", "high") if not pd.isna(row[name])]
    width = max((end for end in ends if isfinite(end) and end > 0), default=0.0)
    return places_for(width) if width else None


def _ordered(ran: Ran) -> np.ndarray:
    """The places in the order asked for; without one, what differs on top, then by p."""
    results = ran.results
    column, falling = state.widget(SORT) or ("", False)
    if not column:
        rank = np.array([OUTCOMES.index(one) for one in ran.outcomes])
        p = results["p"].to_numpy(dtype=float)
        return np.lexsort((np.where(np.isnan(p), 2.0, p), rank))
    if column == "sample":
        order = np.argsort(np.array([ran.opened.name(place) for place in range(len(results))]), kind="stable")
        return order[::-1] if falling else order
    if column in ("target", "outcome"):
        values = pd.Series(ran.targets if column == "target" else ran.outcomes)
    else:
        values = results[column].reset_index(drop=True)
    return values.sort_values(ascending=not falling, na_position="last", kind="stable").index.to_numpy()


def _page(count: int) -> int:
    start = int(state.widget(PAGE) or 0)
    return start if start < count else 0


def _turn_pages(ran: Ran, places: np.ndarray, start: int) -> None:
    last = min(start + SHOWN, len(places))
    with st.container(key="many_pages", horizontal=True, gap="small", vertical_alignment="center"):
        said = f"Rows {start + 1:,} to {last:,} of {len(places):,}" if len(places) else "No such sample"
        st.html(f'<span class="ml-counts" role="status">{said}</span>')
        if start:
            st.button("Rows before", key="many_before", on_click=state.note, args=(PAGE, max(0, start - SHOWN)))
        if last < len(places):
            st.button("Rows after", key="many_after", on_click=state.note, args=(PAGE, start + SHOWN))
        shown = {int(place) for place in places[start:last]}
        st.button("Choose these rows", key="many_choose", on_click=_choose, args=(ran, chosen_of(ran) | shown))
        st.button("Choose none", key="many_choose_none", on_click=_choose, args=(ran, set()))


def _choose(ran: Ran, chosen: set[int]) -> None:
    state.note(CHOSEN, (id(ran.results), chosen))


def _given(name: str) -> object:
    given = state.widget("many_list")
    return None if given is None else given.get(name)


def _sort() -> None:
    column = _given("sort")
    before, falling = state.widget(SORT) or ("", False)
    if isinstance(column, str):
        state.note(SORT, (column, before == column and not falling))
        state.note(PAGE, 0)


def _pick(ran: Ran) -> None:
    given = _given("pick")
    if isinstance(given, list) and len(given) == 2 and 0 <= int(given[0]) < len(ran.results):
        chosen = chosen_of(ran)
        (chosen.add if given[1] else chosen.discard)(int(given[0]))
        _choose(ran, chosen)


def _open(ran: Ran) -> None:
    place = _given("open")
    if isinstance(place, int | float) and 0 <= int(place) < len(ran.results):
        open_sample(ran, int(place))
