"""The question as it was asked, as rows of label and text; numbers as they were typed."""

from collections.abc import Iterator
from datetime import UTC, datetime
from decimal import Decimal
from math import isfinite

from meanlab.core.question import Number, Question
from meanlab.core.results import Analysis
from meanlab.core.written import Written
from meanlab.wording.names import AFTERTHOUGHT_NAMES, ALTERNATIVE_NAMES, PROCEDURE_NAMES, subject_of, unit_of
from meanlab.wording.numbers import df_text, level_text, number_text, unit_text


def question_rows(analysis: Analysis, written: Written) -> Iterator[tuple[str, str]]:
    """Return label and text of every part of the question that was given, and when it was set."""
    question, sign, unit = analysis.question, analysis.readings.decimal_sign, unit_of(analysis)
    rows = (
        ("What was measured", subject_of(analysis)),
        ("Unit", unit),
        ("Target", f"{unit_text(question.target_as_typed, unit)} ({question.target_kind})"),
        ("Alternative hypothesis", ALTERNATIVE_NAMES[question.alternative]),
        ("Significance level α", level_text(question.alpha, sign)),
        ("Procedure asked for", PROCEDURE_NAMES.get(question.procedure, "the one that the rule picks")),
        ("Speaks of the", question.parameter),
        *_known(question, sign, unit),
        ("One reading is", question.units_are),
        ("In the order of measurement", "yes" if question.run_order else "not stated"),
        ("Set after the readings were seen", ", ".join(AFTERTHOUGHT_NAMES.get(one, one) for one in question.set_after)),
        ("Look at this question", f"no. {question.look}" if question.look > 1 else ""),
        *((f"Set: {part}", moment(time)) for part, time in written.set_times.items()),
    )
    return ((label, text) for label, text in rows if text)


def typed(number: Number, sign: str) -> str:
    """Return a number as it was typed; one that is no text by its shortest decimal text.

    >>> typed("0,050", ","), typed(0.05, ",")
    ('0,050', '0,05')
    """
    return number.strip() if isinstance(number, str) else number_text(Decimal(str(number)), sign)


def moment(time: str) -> str:
    """Return a time (ISO 8601) in UTC to the second; a text that is none stays as it is.

    >>> moment("2026-12-01T09:30:12.5+01:00")
    '2026-12-01 08:30:12 UTC'
    """
    try:
        return f"{datetime.fromisoformat(time).astimezone(UTC):%Y-%m-%d %H:%M:%S} UTC"
    except ValueError:
        return time


def _known(question: Question, sign: str, unit: str) -> Iterator[tuple[str, str]]:
    for label, field, df in (
        ("Known σ", "sigma", question.sigma_df),
        ("Standard uncertainty u of the target", "target_uncertainty", question.target_uncertainty_df),
        ("Laboratory's own standard uncertainty", "measurement_uncertainty", None),
        ("Equivalence limit E", "equivalence_limit", None),
        ("Difference that matters", "difference_that_matters", None),
        ("Standard deviation for planning", "planning_s", None),
        ("Resolution", "resolution", None),
    ):
        if not question.number(field):
            continue
        text = unit_text(typed(getattr(question, field), sign), unit)
        if field == "sigma":
            text += f", from {question.sigma_origin.strip()}"
        if df is not None and isfinite(df):
            text += f" ({df_text(df, sign)} degrees of freedom)"
        yield label, text
