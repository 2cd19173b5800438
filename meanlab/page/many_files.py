"""What leaves a run: the table as CSV and workbook, a document with a page a chosen sample, entries of the chosen."""

from collections.abc import Iterator
from dataclasses import replace
from functools import partial
from hashlib import sha256
from typing import Any

import streamlit as st

import meanlab
from meanlab import records
from meanlab.core.complaints import Complaint
from meanlab.core.results import Analysis
from meanlab.core.source import Source, entries_of
from meanlab.page import cache, state
from meanlab.page.guard import say
from meanlab.page.many_run import Ran
from meanlab.page.record_files import DOCX
from meanlab.wording.numbers import p_text

MOST_PAGES, MOST_SAVED = 60, 500
XLSX = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
SAVE_WANTED, SAVED = "many_save_wanted", "many_saved"


def draw(ran: Ran, chosen: set[int]) -> None:
    """Draw the downloads, and the button that saves the chosen samples in the notebook."""
    places = sorted(chosen)
    with st.container(key="many_files", horizontal=True, gap="small"):
        _download("Table (CSV)", partial(_csv, ran), "samples.csv", "text/csv", "many_csv")
        _download("Table (XLSX)", partial(_xlsx, ran), "samples.xlsx", XLSX, "many_xlsx")
        if places:
            label = f"{min(len(places), MOST_PAGES)} chosen, a page each (DOCX)"
            _download(label, partial(_docx, ran, places[:MOST_PAGES]), "samples.docx", DOCX, "many_docx")
            if cache.kept_on_this_address():
                st.button(
                    f"Save {min(len(places), MOST_SAVED)} chosen in the notebook", key="many_save",
                    on_click=state.note, args=(SAVE_WANTED, True),
                )  # fmt: skip
    if len(places) > MOST_PAGES:
        say(f"{len(places):,} are chosen: a document holds {MOST_PAGES}, one go saves {MOST_SAVED}.", "status")
    if state.taken(SAVE_WANTED) and places:
        _save(ran, places[:MOST_SAVED])
    said = state.widget(SAVED)
    if said and said[0] == id(ran.results):
        say(said[1], "status")


def _download(label: str, data: Any, name: str, media_type: str, key: str) -> None:
    st.download_button(label, data=data, file_name=name, mime=media_type, on_click="ignore", key=key)


def _table(ran: Ran) -> tuple[list[str], Iterator[tuple[Any, ...]]]:
    table = ran.results.assign(target=ran.targets, after_holm=ran.outcomes)
    return list(map(str, table.columns)), table.itertuples(index=False, name=None)


def _csv(ran: Ran) -> bytes:
    return records.table_csv(*_table(ran), ran.sign)


def _xlsx(ran: Ran) -> bytes:
    return records.table_xlsx(*_table(ran))


def _docx(ran: Ran, places: list[int]) -> bytes:
    return records.written_pages(_analyses(ran, places, []))


def _analyses(ran: Ran, places: list[int], refused: list[str]) -> Iterator[tuple[str, Analysis]]:
    """Analyse samples one by one; the names of those that cannot be are added to ``refused``."""
    for place in places:
        name = ran.opened.name(place)
        try:
            yield (
                name,
                meanlab.analyse(ran.opened.readings(place), replace(ran.opened.question(place), material=name[:200])),
            )
        except Complaint:
            refused.append(name)


def _save(ran: Ran, places: list[int]) -> None:
    refused: list[str] = []
    fields, saved, numbers = state.working().fields, 0, []
    written = {name: fields[f"written_{name}"].strip() for name in ("instrument", "method")}
    bar = st.progress(0.0, "Saving …")
    for name, analysis in _analyses(ran, places, refused):
        entry = cache.notebook().add(
            analysis, name, fields["written_by"].strip(), _note(ran, analysis), _source(ran, name, analysis), **written
        )
        saved += 1
        numbers.append(entry.number)
        bar.progress(saved / len(places), f"{saved:,} of {len(places):,} saved")
    bar.empty()
    said = f"{saved:,} saved, entries {numbers[0]} to {numbers[-1]}." if saved else "Nothing was saved."
    if refused:
        said += f" Not saved, because they hold no readings to analyse: {', '.join(refused[:5])}."
    state.note(SAVED, (id(ran.results), said))


def _note(ran: Ran, analysis: Analysis) -> str:
    """Say in the entry that it is one of a family."""
    family = int(ran.results["p"].notna().sum())
    alone = "" if analysis.test is None else f" ({p_text(analysis.test.p_value, ran.question.alpha, ran.sign)} alone)"
    return f"One of {len(ran.results):,} samples judged together, {family:,} of them with a p{alone}."


def _source(ran: Ran, name: str, analysis: Analysis) -> Source:
    content, filename = ran.content
    data = content.encode("utf-8", "surrogatepass") if isinstance(content, str) else content
    chosen = {
        "sheet": ran.choice.sheet,
        "readings in": ", ".join(ran.choice.values),
        "samples in": ", ".join(ran.choice.samples),
        "sample": name,
    }
    return Source(
        file_name=filename or "pasted table",
        checksum=sha256(data).hexdigest(),
        size=len(data),
        selection={key: text for key, text in chosen.items() if text},
        entries=entries_of(analysis.readings),
    )
