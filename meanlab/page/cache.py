"""What is computed once and used again: bounded, and found only by its full content.

Nothing of one visitor reaches another except a result for the very same readings and question.
"""

from dataclasses import dataclass
from functools import lru_cache
from typing import Any

import streamlit as st

import meanlab
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import Analysis, Plan
from meanlab.intake import Column, Intake
from meanlab.notebook import Notebook, WorkingStates
from meanlab.notebook.place import database_url
from meanlab.records.panel import panel_png
from meanlab.wording import PanelTexts, panel_texts

HOME = ("localhost", "127.0.0.1", "::1")


@dataclass(frozen=True)
class Source:
    """Where readings come from: a pasted text or a file's bytes, the file's name and what was chosen in it.

    ``by_preparation``: the labels that were read name preparations, and readings of one count once.
    """

    content: str | bytes
    filename: str | None = None
    selection: tuple[tuple[str, Any], ...] = ()
    by_preparation: bool = False

    def chosen(self) -> dict[str, Any]:
        """Return what was chosen as `meanlab.read` takes it."""
        return {
            name: dict(given) if name == "where" else list(given) if isinstance(given, tuple) else given
            for name, given in self.selection
        }


@dataclass(frozen=True)
class Outcome:
    """An analysis and the texts of its panel."""

    analysis: Analysis
    texts: PanelTexts


def kept_on_this_address() -> bool:
    """Tell whether the page is bound to this computer alone; on any other address nothing is kept."""
    return st.get_option("server.address") in HOME


def working_states() -> WorkingStates:
    """Return the store of working states; raises NotebookComplaint where it cannot be opened."""
    return _states_at(database_url())


@st.cache_resource(show_spinner=False, max_entries=4)
def _states_at(url: str) -> WorkingStates:
    return WorkingStates(url)


def notebook() -> Notebook:
    """Return the notebook of this bench; raises NotebookComplaint where it cannot be opened."""
    return _notebook_at(database_url())


@st.cache_resource(show_spinner=False, max_entries=4)
def _notebook_at(url: str) -> Notebook:
    return Notebook(url)


@lru_cache(maxsize=16)
def read(source: Source) -> Intake:
    """Return what was read from a source."""
    return meanlab.read(source.content, source.filename, source.chosen() or None)


@lru_cache(maxsize=8)
def columns(content: str | bytes, filename: str | None) -> tuple[Column, ...]:
    """Return what can be chosen in a file or a pasted table."""
    return tuple(meanlab.columns(content, filename))


@lru_cache(maxsize=16)
def readings(source: Source, left_out: tuple[tuple[int, str], ...] = ()) -> ReadingSet:
    """Return the readings of a source without those left out by hand."""
    found = read(source)
    return found.reading_set(dict(left_out), found.preparations if source.by_preparation else None)


@lru_cache(maxsize=64)
def outcome(source: Source, left_out: tuple[tuple[int, str], ...], question: Question) -> Outcome:
    """Return everything found about a question on the readings of a source, with the texts of the panel."""
    analysis = meanlab.analyse(readings(source, left_out), question)
    return Outcome(analysis, panel_texts(analysis))


def picture(found: Outcome) -> bytes:
    """Return the panel as a picture (PNG); drawn when it is asked for."""
    return panel_png(found.analysis)


@lru_cache(maxsize=64)
def plan_detection(
    difference: float,
    s: float,
    alternative: str,
    significance: float,
    power: float,
    sigma_known: bool,
    target_uncertainty: float,
) -> Plan:
    """Return how many readings find a difference."""
    return meanlab.plan_detection(
        difference,
        s,
        alternative=alternative,
        significance=significance,
        power=power,
        sigma_known=sigma_known,
        target_uncertainty=target_uncertainty,
    )


@lru_cache(maxsize=64)
def plan_agreement(
    limit: float, s: float, true_difference: float, significance: float, power: float, target_uncertainty: float
) -> Plan:
    """Return how many readings show agreement within a limit."""
    return meanlab.plan_agreement(
        limit,
        s,
        true_difference=true_difference,
        significance=significance,
        power=power,
        target_uncertainty=target_uncertainty,
    )


@lru_cache(maxsize=64)
def plan_interval(half_width: float, s: float, confidence: float) -> Plan:
    """Return how many readings make the interval so narrow."""
    return meanlab.plan_interval(half_width, s, confidence=confidence)


def warm_up() -> None:
    """Run one result through, so that the first visitor does not wait for imports."""
    source = Source("5.02\n5.04\n4.98\n5.01\n5.03\n4.99\n5.00\n5.02\n")
    outcome(source, (), Question("5.00"))
