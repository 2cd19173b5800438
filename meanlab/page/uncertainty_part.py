"""Uncertainty: the components and their shares, scatter alone beside the whole, and the bounds beside the test."""

from meanlab.core.results import Analysis, Uncertainty
from meanlab.page import preparations, tables
from meanlab.page.cache import Outcome
from meanlab.wording.numbers import (
    decimal_text,
    df_text,
    p_text,
    significant,
    statistic_number,
    statistic_text,
    unit_text,
)

DIGITS_OF_U = 3


def draw(found: Outcome | None) -> None:
    """Draw the budget of the difference from the target."""
    budget = None if found is None else found.analysis.uncertainty
    if found is None or budget is None:
        tables.sentences([_nothing(found)])
        if found is not None:
            preparations.draw(found.analysis)
        return
    tables.draw(("Component", "Standard uncertainty u", "Degrees of freedom", "Share of u²"), _rows(found, budget))
    line = found.texts.mean_line
    apart = ", the measured value alone, without the uncertainty of the target" if len(budget.components) > 1 else ""
    tables.sentences([f"{line}{apart}" if line else "", *_scatter_only(found.analysis, budget)])
    if budget.bounds:
        tables.draw(
            ("Held beside the test; it does not decide", "|difference| must exceed", "Exceeded"),
            [(bound.name, _in_unit(found, bound.bound), "yes" if bound.rejects else "no") for bound in budget.bounds],
        )
        tables.sentences(bound.message for bound in budget.bounds)
    preparations.draw(found.analysis)


def _nothing(found: Outcome | None) -> str:
    if found is None:
        return "The uncertainty stands here as soon as there is a result."
    return "There is no uncertainty to state for this result: see the sentence in the panel."


def _rows(found: Outcome, budget: Uncertainty) -> list[tuple[str, ...]]:
    sign = found.texts.numbers.sign
    rows: list[tuple[str, ...]] = [
        (part.name, _in_unit(found, part.u), _degrees(part.df, sign), _share(part.share, sign))
        for part in budget.components
    ]
    rows.append(("combined", _in_unit(found, budget.combined), _degrees(budget.df, sign), _share(1.0, sign)))
    level = found.texts.numbers.interval_level
    expanded = f"expanded U of the difference (k = {statistic_number(budget.k, sign)}, {level} two-sided)"
    rows.append((expanded, _in_unit(found, budget.expanded), "", ""))
    return rows


def _scatter_only(analysis: Analysis, budget: Uncertainty) -> list[str]:
    alone, test = budget.scatter_only, analysis.test
    if alone is None or test is None:
        scatter = "The known σ" if test is not None and test.procedure == "z" else "Scatter of these readings"
        return [f"{scatter} is the only component; a certificate, calibration and recovery would add theirs."]
    sign = analysis.readings.decimal_sign
    return [
        f"With scatter alone: {statistic_text(alone, sign)}, {p_text(alone.p_value, alone.significance, sign)}; "
        f"with all components: {statistic_text(test, sign)}, {p_text(test.p_value, test.significance, sign)}. "
        "The decision rests on all components."
    ]


def _in_unit(found: Outcome, number: float) -> str:
    return unit_text(significant(number, DIGITS_OF_U, found.texts.numbers.sign), found.texts.numbers.unit)


def _share(share: float, sign: str) -> str:
    return f"{decimal_text(100 * share, 1, sign)} %"


def _degrees(df: float | None, sign: str) -> str:
    return "infinite" if df is None else df_text(df, sign)
