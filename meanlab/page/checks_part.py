"""Checks: what was looked at, what was seen, and what each look can see at this number of readings."""

import streamlit as st

from meanlab.page import pictures, tables
from meanlab.page.cache import Outcome
from meanlab.wording.names import CHECK_TITLES


def draw(found: Outcome | None) -> None:
    """Draw the checks beside the normal probability plot, and the course of the route."""
    if found is None:
        tables.sentences(["The checks stand here as soon as there is a result."])
        return
    analysis = found.analysis
    left, right = st.columns([3, 2], gap="medium")
    with left:
        tables.draw(
            ("Looked at", "Outcome", "What was seen"),
            [(CHECK_TITLES.get(check.name, check.name), check.outcome, check.message) for check in analysis.checks],
        )
        tables.heading("Why this procedure")
        tables.sentences(analysis.route.reasons)
        if analysis.withouts:
            tables.heading("With and without")
            tables.sentences(without.sentence for without in analysis.withouts)
        if len(analysis.cautions) > 1:
            tables.heading("Cautions")
            tables.sentences(analysis.cautions)
    with right:
        pictures.normality(analysis)
