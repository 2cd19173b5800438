"""Preparations: how far the readings of one scatter, and how far the preparations do."""

from meanlab.core.results import Analysis
from meanlab.page import tables
from meanlab.wording.numbers import decimal_text, significant, unit_text

MOST_ROWS = 200
DIGITS_OF_S = 3


def draw(analysis: Analysis) -> None:
    """Draw a line for each preparation and the scatter between and within; nothing where none are named."""
    summary = analysis.summary
    if not summary.preparations:
        return
    sign = analysis.readings.decimal_sign
    places = analysis.readings.decimals + 1
    tables.heading("Preparations")
    tables.draw(
        ("Preparation", "Readings", "Mean", "s of its readings"),
        [
            (
                line.label,
                str(line.count),
                "not defined" if line.mean is None else decimal_text(line.mean, places, sign),
                "–" if line.s is None else significant(line.s, DIGITS_OF_S, sign),
            )
            for line in summary.preparations[:MOST_ROWS]
        ],
        height=300,
    )
    tables.sentences(scatter_sentences(analysis))


def scatter_sentences(analysis: Analysis) -> list[str]:
    """Return what scatters between and within preparations, and which of both the test rests on."""
    summary, sign = analysis.summary, analysis.readings.decimal_sign
    unit = analysis.question.unit or analysis.readings.unit
    between, within = (
        "" if s is None else unit_text(significant(s, DIGITS_OF_S, sign), unit)
        for s in (summary.s_between, summary.s_within)
    )
    said = []
    if between:
        said.append(
            f"Between preparations: the means scatter with s = {between} (the test rests on this scatter; "
            "it holds the one within, divided by the readings of a preparation)."
        )
    if within:
        said.append(
            f"Within preparations: s = {within}, pooled; it is not what limits the statement, "
            "and more readings of the same preparations do not make up for few preparations."
        )
    counts = {line.count for line in summary.preparations}
    if len(counts) > 1:
        said.append("The preparations hold unequal numbers of readings; each preparation counts alike (conservative).")
    return said
