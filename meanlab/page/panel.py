"""The result panel: a picture worth half a page of a report, with its text as text."""

import html
import re
from dataclasses import replace

import streamlit as st

from meanlab.core.results import Analysis
from meanlab.page import asked, cache, file_choice, pictures, readings, state
from meanlab.page.guard import guarded
from meanlab.wording import PanelTexts

_COUNT_FIRST = re.compile(r"\d+")


def outcome() -> cache.Outcome | None:
    """Return the result of the page as it stands; None while something is missing.

    Raises Complaint for fields or readings that cannot be used.
    """
    source = file_choice.source()
    found = None if source is None else cache.read(source)
    if source is None or found is None or found.refused or not found.has_readings:
        return None
    fields = state.working().fields
    if asked.missing(fields, has_readings=True):
        return None
    left_out = readings.left_out(found)
    nested = source.by_preparation and found.preparations is not None
    question = asked.question_from(fields, found.decimal_sign, nested=nested)
    parts = asked.parts_set(fields, [str(place) for place, _ in left_out])
    history = state.saw_result(parts, tuple(entry.text for entry in found.entries[: state.MOST_COMPARED]))
    if not fields["fixed_before"]:
        question = replace(question, set_after=asked.set_after(history.first_parts, parts), look=history.looks)
    return cache.outcome(source, left_out, question)


def draw() -> cache.Outcome | None:
    """Draw the panel, or the sentence that says what it waits for; returns the result that is shown."""
    found = None
    with st.container(key="panel"), guarded("result"):
        found = outcome()
        if found is None:
            _waiting()
        else:
            _texts(found.analysis, found.texts)
    return found


def _waiting() -> None:
    found = readings.intake()
    has_readings = found is not None and not found.refused and found.has_readings
    sentence = asked.missing(state.working().fields, has_readings)
    if found is not None and found.needs_choice:
        sentence = "A choice is needed before anything is computed: see beside the readings, on the left."
    elif found is not None and not has_readings:
        sentence = "Nothing could be read as a reading: see the reason beside the readings, on the left."
    st.html(f'<p class="ml-empty">{html.escape(sentence)}</p>')


def _texts(analysis: Analysis, texts: PanelTexts) -> None:
    st.html(
        f'<div class="ml-head"><span class="ml-title">{html.escape(texts.title)}</span>'
        f'<span class="ml-verdict">{html.escape(texts.verdict_word)}</span></div>'
    )
    with st.container(key="conclusion"):
        st.html(f'<p class="ml-sentence">{html.escape(texts.sentence)}</p>')
    table, places = st.columns([296, 640], gap="small")
    table.html(_table(texts.rows))
    with places, guarded("pictures"):
        pictures.panel(analysis)
    foot = " ".join(part for part in (texts.why, texts.caution) if part)
    st.html(f'<p class="ml-foot">{html.escape(foot)} {html.escape(texts.origin)}</p>')


def _table(rows: tuple[tuple[str, str], ...]) -> str:
    lines = "".join(
        f"<tr><th scope='row'>{html.escape(label)}</th><td>{_cell(label, text)}</td></tr>" for label, text in rows
    )
    return f'<table class="ml-table">{lines}</table>'


def _cell(label: str, text: str) -> str:
    """The count stands in an element of its own beside its label."""
    leading = _COUNT_FIRST.match(text) if label == "n" else None
    if leading is None:
        return html.escape(text)
    return f"<span>{leading.group()}</span>{html.escape(text[leading.end() :])}"
