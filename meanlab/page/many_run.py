"""The run over a table of many samples: with a bar, to be stopped, its result kept for this visitor alone."""

import time
from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cached_property
from types import MappingProxyType
from typing import Any

import numpy as np
import pandas as pd
import streamlit as st

from meanlab.core.question import Question
from meanlab.many import Opened, analyse_many, outcomes
from meanlab.many.cells import sign_of
from meanlab.page import asked, state
from meanlab.page.guard import say
from meanlab.page.many_choice import Choice
from meanlab.page.many_table import Content, frame_of

WANTED, RUNNING, RESULT = "many_wanted", "many_running", "many_result"
EACH_SECONDS = 0.1
_OTHERS = {"cannot tell": "cannot tell", "not testable": "not testable"}
_WITH_LIMIT: Mapping[str, str] = MappingProxyType({"greater": "not above by E", "less": "not below by E"})
WORDS: Mapping[str, Mapping[str, str]] = MappingProxyType(
    {
        "two-sided": {"differs": "differs", "agrees": "agrees", **_OTHERS},
        "greater": {"differs": "exceeds", "agrees": "lies below", **_OTHERS},
        "less": {"differs": "falls below", "agrees": "lies above", **_OTHERS},
    }
)


@dataclass(frozen=True)
class Ran:
    """One run: what it was of, its rows, and the way to each sample."""

    content: Content
    choice: Choice
    question: Question
    results: pd.DataFrame
    opened: Opened

    @cached_property
    def outcomes(self) -> np.ndarray:
        """What each sample comes to once the family is counted."""
        return outcomes(self.results, self.question.alpha)

    @cached_property
    def targets(self) -> np.ndarray:
        """The target of each sample."""
        return self.opened.targets()

    @property
    def words(self) -> Mapping[str, str]:
        """What each outcome is called: a one-sided question has words of its own."""
        side, limit = self.question.alternative, self.question.equivalence_limit
        words = WORDS[side]
        return words if limit is None or side == "two-sided" else {**words, "agrees": _WITH_LIMIT[side]}

    @property
    def sign(self) -> str:
        """The decimal sign of the readings."""
        return self.opened.sign


def draw(content: Content, choice: Choice) -> Ran | None:
    """Draw the button that runs, run where it was asked for, and return the last run of this visitor."""
    question = _question(content, choice)
    with st.container(key="many_run_row", horizontal=True, gap="small", vertical_alignment="center"):
        st.button("Run", key="many_run", type="primary", on_click=_want)
        room = st.empty()
        said = st.empty()
    if state.taken(WANTED) and question is not None:
        _run(content, choice, question, room, said)
    elif state.widget(RUNNING):
        done, count = state.widget(RUNNING)
        with said:
            say(f"Stopped after {done:,} of {count:,} samples: nothing is shown of that run. Run again.", "notice")
    found: Ran | None = state.widget(RESULT)
    if (
        found is not None
        and question is not None
        and (found.content, found.choice, found.question)
        != (
            content,
            choice,
            question,
        )
    ):
        with said:
            say("The table, its columns or the question changed since this run: run again.", "notice")
    return found


def _want() -> None:
    state.note(WANTED, True)
    state.note(RUNNING, None)


def _question(content: Content, choice: Choice) -> Question | None:
    """Return the question of the page for every sample; None while there is no target."""
    fields = dict(state.working().fields)
    if choice.target is not None:
        fields["target"] = "0"
    if not fields["target"].strip():
        say("Type the target above, or choose the column with the target of each sample.", "status")
        return None
    column = frame_of(*content, choice.sheet)[choice.values[0]]
    question = asked.question_from(fields, sign_of(column) or ".")
    return replace(question, material="", unit=question.unit or choice.unit)


def _run(content: Content, choice: Choice, question: Question, room: Any, said: Any) -> None:
    frame = frame_of(*content, choice.sheet)
    columns: tuple[Any, Any] = (list(choice.values), list(choice.samples))
    asked_of = (frame, *columns, question, choice.target, choice.preparation)
    state.note(RESULT, None)
    state.note(RUNNING, (0, len(frame)))
    room.button("Stop", key="many_stop")  # any click ends this run of the script
    bar = said.progress(0.0, "Reading the table …")
    last = time.monotonic()

    def tell(done: int, count: int) -> None:
        nonlocal last
        if time.monotonic() - last > EACH_SECONDS:
            last = time.monotonic()
            state.note(RUNNING, (done, count))
            bar.progress(done / count, f"{done:,} of {count:,} samples")

    results = analyse_many(*asked_of, progress=tell)
    state.note(RESULT, Ran(content, choice, question, results, Opened(*asked_of)))
    state.note(RUNNING, None)
    room.empty()
    bar.empty()
