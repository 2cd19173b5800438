"""What the columns of a table of many samples are: readings, samples, targets, preparations."""

from collections.abc import Sequence
from dataclasses import dataclass
from hashlib import sha256

import streamlit as st

from meanlab.intake.whole import WholeTable
from meanlab.page import state
from meanlab.page.many_table import Content, tables_of

TARGET_WORDS = ("target", "nominal", "certified", "reference", "expected", "assigned")
_SEEN = "many_seen"


@dataclass(frozen=True)
class Choice:
    """The columns chosen: ``values`` of the readings (several: across the row), ``samples``, and those that may be."""

    sheet: str
    values: tuple[str, ...]
    samples: tuple[str, ...]
    target: str | None
    preparation: str | None
    unit: str


def draw(content: Content) -> Choice | None:
    """Draw the pickers; None while one of them is open."""
    tables = tables_of(*content)
    if not tables:
        return None
    sheets = [table.sheet for table in tables]
    if state.value("many_sheet") not in sheets:
        state.put("many_sheet", max(tables, key=lambda table: table.height).sheet)
    if len(sheets) > 1:
        st.selectbox("Sheet with the samples", sheets, key="many_sheet", width=320)
    table = next(one for one in tables if one.sheet == state.value("many_sheet"))
    _guess_once(content, table)
    _pickers(table)
    values, samples = tuple(state.value("many_values")), tuple(state.value("many_samples"))
    if not values or not samples:
        return None
    unit = table.units[table.headings.index(values[0])]
    preparation = state.value("many_preparation")
    return Choice(table.sheet, values, samples, state.value("many_target_column"), preparation, unit)


def _pickers(table: WholeTable) -> None:
    headings = list(table.headings)
    places = st.columns(4, gap="small")
    places[0].multiselect(
        "Readings stand in",
        headings,
        key="many_values",
        help="One column with one reading a row, or several columns with the replicates of a sample across the row.",
    )
    places[1].multiselect("Samples are named in", headings, key="many_samples")
    places[2].selectbox(
        "Target of each sample in", headings, index=None, key="many_target_column", placeholder="the target above"
    )
    places[3].selectbox(
        "Preparations are named in", headings, index=None, key="many_preparation", placeholder="no column"
    )


def _guess_once(content: Content, table: WholeTable) -> None:
    """Propose columns for a table that was not seen before, and take back what a table does not have."""
    typed = content[0]
    data = typed.encode("utf-8", "surrogatepass") if isinstance(typed, str) else typed
    mark = (sha256(data).hexdigest(), table.sheet)
    chosen = [*state.value("many_values"), *state.value("many_samples")]
    if state.widget(_SEEN) == mark or (state.widget(_SEEN) is None and chosen and set(chosen) <= set(table.headings)):
        state.note(_SEEN, mark)
        return
    state.note(_SEEN, mark)
    values, samples, target, preparation = guess(table)
    state.put("many_values", list(values))
    state.put("many_samples", list(samples))
    state.put("many_target_column", target)
    state.put("many_preparation", preparation)


def guess(table: WholeTable) -> tuple[Sequence[str], Sequence[str], str | None, str | None]:
    """Return the columns of readings, samples, targets and preparations as headings and contents suggest them."""
    by_role: dict[str, list[str]] = {}
    for heading, role in zip(table.headings, table.roles, strict=True):
        by_role.setdefault(role, []).append(heading)
    numbers = by_role.get("readings", [])
    target = next((name for name in numbers if any(word in name.casefold() for word in TARGET_WORDS)), None)
    readings = [name for name in numbers if name != target]
    preparation = next(iter(by_role.get("preparation", [])), None)
    others = [name for role in ("label", "text", "counter", "time") for name in by_role.get(role, [])]
    samples = others[:1] or [name for name in table.headings if name not in (*readings[:1], target, preparation)][:1]
    readings = [name for name in readings if name not in samples]
    distinct = bool(samples) and _are_distinct(table, samples[0])
    return (readings if distinct else readings[:1]), samples, target, preparation


def _are_distinct(table: WholeTable, heading: str) -> bool:
    entries = table.columns[table.headings.index(heading)]
    return len(set(map(str, entries))) == len(entries)
