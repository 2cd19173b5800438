"""Where the readings come from: the file in use, and the choice of sheet, column, rows, replicates and preparations."""

import html
from collections.abc import Mapping, Sequence
from typing import Any

import streamlit as st

from meanlab.core.complaints import Complaint
from meanlab.intake import Column
from meanlab.page import cache, state

SIGNS: Mapping[str, str] = {"decimal comma": ",", "decimal point": "."}
NO_CHOICE = ("empty",)
LONGEST_LABEL = 60


def source() -> cache.Source | None:
    """Return where the readings come from at present, None where there are none."""
    now = state.working()
    fields = now.fields
    content: str | bytes | None = fields["readings_text"] if now.file is None else state.file_bytes()
    if content is None or (isinstance(content, str) and not content.strip()):
        return None
    name = None if now.file is None else now.file["name"]
    by_preparation = fields["preparation"] is not None or fields["labels_name_preparations"]
    return cache.Source(content, name, selection_of(fields), by_preparation)


def draw() -> None:
    """Draw the name of the file in use and the pickers that the file or the pasted table needs."""
    now, found = state.working(), source()
    if found is None:
        return
    if now.file is not None:
        st.html(f'<p class="ml-counts">From <b>{html.escape(now.file["name"])}</b></p>')
    columns = _columns(found)
    if columns:
        _pickers(columns)


def _columns(found: cache.Source) -> list[Column]:
    """Return what can be chosen; a source that cannot be opened has said so beside the readings."""
    try:
        return [column for column in cache.columns(found.content, found.filename) if column.role not in NO_CHOICE]
    except Complaint:
        return []


def _pickers(columns: Sequence[Column]) -> None:
    sheets = list(dict.fromkeys(column.sheet for column in columns))
    _forget_unless("sheet", sheets)
    if len(sheets) > 1:
        with_readings = {column.sheet for column in columns if column.role == "readings"}
        if state.value("sheet") is None and len(with_readings) == 1:
            state.put("sheet", with_readings.pop())
        st.selectbox("Sheet", sheets, index=None, key="sheet", placeholder=f"{len(sheets)} sheets: choose one")
    sheet = state.widget("sheet") if len(sheets) > 1 else None
    here = {column.column_index: column for column in columns if sheet is None or column.sheet == sheet}
    if len(sheets) > 1 and sheet is None:
        return
    _forget_unless("column", here)
    likely = [column for column in here.values() if column.role == "readings"]
    if len(here) < 2:
        return
    st.selectbox(
        "Column with the readings",
        _likely_first(here),
        index=None,
        format_func=lambda place: label(here[place]),
        key="column",
        placeholder=label(likely[0]) if len(likely) == 1 else f"{len(likely) or len(here)} columns: choose one",
    )
    with st.expander("Rows, replicates, preparations", key="more_choice"):
        _further(here)


def _further(here: Mapping[int, Column]) -> None:
    """Draw what few files need: replicates across the row, a filter of rows, the column of the preparations."""
    headings = [column.column for column in here.values() if column.column]
    for key in ("filter_column", "preparation"):
        _forget_unless(key, headings)
    state.put("replicates", [name for name in state.value("replicates") if name in headings])
    st.multiselect("Replicates stand across the row in", headings, key="replicates", placeholder="these columns")
    left, right = st.columns(2, gap="small")
    left.selectbox("Only rows where", headings, index=None, key="filter_column", placeholder="all rows")
    right.text_input("is", key="filter_value")
    st.selectbox(
        "Preparations are named in",
        headings,
        index=None,
        key="preparation",
        placeholder="no column",
        help="Injections of one preparation are averaged first; n then counts preparations.",
    )


def label(column: Column) -> str:
    """Return a column as the picker shows it: heading, unit and first values.

    >>> label(Column("", "Nitrate", "mg/L", 3, 1, "readings", 3, ("5.02", "5.03", "5.01")))
    'Nitrate (mg/L): 5.02, 5.03, 5.01'
    """
    heading = column.column.strip() or f"column {column.column_index + 1}"
    unit = f" ({column.unit})" if column.unit and column.unit not in heading else ""
    first = ", ".join(text for text in column.first if text.strip())
    text = f"{heading}{unit}: {first}" if first else f"{heading}{unit}"
    return text if len(text) <= LONGEST_LABEL else f"{text[: LONGEST_LABEL - 1]}…"


def _likely_first(here: Mapping[int, Column]) -> list[int]:
    return sorted(here, key=lambda place: (here[place].role != "readings", place))


def _forget_unless(key: str, known: Any) -> None:
    """Take back a choice that this file does not offer."""
    if state.value(key) is not None and state.value(key) not in known:
        state.put(key, None)


def selection_of(fields: Mapping[str, Any]) -> tuple[tuple[str, Any], ...]:
    """Return what the fields choose in a file or a pasted table."""
    chosen: dict[str, Any] = {}
    if fields["decimal_sign"] in SIGNS:
        chosen["decimal"] = SIGNS[fields["decimal_sign"]]
    for key, name in (("sheet", "sheet"), ("column", "column_index"), ("preparation", "preparation")):
        if fields[key] is not None:
            chosen[name] = fields[key]
    if len(fields["replicates"]) > 1:
        chosen.pop("column_index", None)
        chosen["columns"] = tuple(fields["replicates"])
    if fields["filter_column"] is not None and fields["filter_value"]:
        chosen["where"] = ((fields["filter_column"], fields["filter_value"]),)
    return tuple(chosen.items())
