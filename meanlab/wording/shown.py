"""Every number of an analysis as text, rounded here and nowhere else: for the panel, the records and the sentences."""

from dataclasses import dataclass
from decimal import Decimal
from math import isclose, isfinite
from typing import Any

from meanlab.core.numbers import as_typed, places
from meanlab.core.results import Analysis, Interval, Test, Uncertainty
from meanlab.wording.digits import (
    COUNTING,
    estimate_of,
    finest_places_for,
    interval_places,
    percent_places,
    places_of,
)
from meanlab.wording.names import short_noun, target_noun, unit_of
from meanlab.wording.numbers import (
    MINUS,
    attained_text,
    decimal_text,
    df_text,
    interval_text,
    level_text,
    p_text,
    percent_text,
    places_for,
    plain_words,
    rank_number,
    signed_text,
    significant,
    statistic_number,
    statistic_text,
    unit_text,
)

DIGITS_OF_S = 3
UNDEFINED = "not defined"
INCLUDES_FURTHER = ("z", "t")  # the procedures that take the uncertainties beside scatter in


@dataclass(frozen=True)
class Shown:
    """The numbers of one analysis as text, with unit unless said otherwise; "" where there is nothing to show.

    sign, unit       decimal sign and unit of the readings
    places           decimal places of estimate, difference and interval
    estimate         mean, centre of symmetry or median
    as_target        the estimate rounded to the places a limit was typed with
    s, sigma         experimental and known standard deviation
    target           the target as typed
    difference, percent    estimate minus target, with sign; the same in % of the target
    interval, interval_bare, interval_level, attained   with and without unit; "95 %"; attained level of a counting one
    limit            equivalence limit E as typed
    agreement, agreement_bare, agreement_level, p_agreement   interval held against the limits, p_E
    statistic, critical, p, level, procedure_df   "t(11) = 4.08", "± 2.20", "p = 0.0018", "5 %", "11"
    detectable, detectable_90   true difference found with 80 % and 90 %
    mean_line        "x̄ ± U = (5.022 ± 0.012) mg/L (k = 2.20, 95 %, ν = 11, n = 12)"
    """

    sign: str
    unit: str
    places: int
    estimate: str
    as_target: str
    s: str
    sigma: str
    target: str
    difference: str
    percent: str
    interval: str
    interval_bare: str
    interval_level: str
    attained: str
    limit: str
    agreement: str
    agreement_bare: str
    agreement_level: str
    p_agreement: str
    statistic: str
    critical: str
    p: str
    level: str
    detectable: str
    detectable_90: str
    mean_line: str


def shown(analysis: Analysis) -> Shown:
    """Return every number of an analysis as text."""
    sign, unit, digits = analysis.readings.decimal_sign, unit_of(analysis), places_of(analysis)
    question, test = analysis.question, analysis.test
    estimate = estimate_of(analysis)
    interval, bare, interval_level, attained = _interval(test, question.exact_target, digits, sign, unit)
    agreement, agreement_bare, agreement_level, p_agreement = _agreement(analysis, digits, sign, unit)
    limit = question.equivalence_limit
    return Shown(
        sign=sign,
        unit=unit,
        places=digits,
        estimate="" if estimate is None else unit_text(decimal_text(estimate, digits, sign), unit),
        as_target=_as_target(analysis, estimate, digits, sign),
        s=_magnitude(analysis.summary.s, DIGITS_OF_S, sign, unit),
        sigma="" if question.sigma is None else unit_text(in_sign(question.sigma, sign), unit),
        target=unit_text(question.target_as_typed, plain_words(question.unit) or unit),
        difference=_difference(analysis, digits, sign, unit),
        percent=_percent(analysis, sign),
        interval=interval,
        interval_bare=bare,
        interval_level=interval_level,
        attained=attained,
        limit="" if limit is None else unit_text(in_sign(limit, sign), unit),
        agreement=agreement,
        agreement_bare=agreement_bare,
        agreement_level=agreement_level,
        p_agreement=p_agreement,
        statistic="" if test is None else statistic_text(test, sign),
        critical="" if test is None else critical_text(test, sign),
        p="" if test is None else p_text(test.p_value, test.significance, sign),
        level=level_text(question.alpha, sign),
        detectable=_magnitude(analysis.power.smallest_detectable, 2, sign, unit),
        detectable_90=_magnitude(analysis.power.smallest_detectable_90, 2, sign, unit),
        mean_line=mean_line(analysis, sign, unit),
    )


def critical_text(test: Test, sign: str = ".") -> str:
    """Return the critical values: "± 2.20", "−2.31 and 2.95", "≤ 10 or ≥ 68"; said where no value rejects."""
    low, high = test.critical
    if low is None and high is None:
        return "none attainable"
    if test.procedure in COUNTING:
        lower = None if low is None else f"≤ {rank_number(low, sign)}"
        upper = None if high is None else f"≥ {rank_number(high, sign)}"
        return " or ".join(text for text in (lower, upper) if text)
    if low is not None and high is not None and isclose(-low, high, rel_tol=1e-9):
        return f"± {statistic_number(high, sign)}"
    return " and ".join(statistic_number(end, sign) for end in (low, high) if end is not None)


def mean_line(analysis: Analysis, sign: str, unit: str) -> str:
    """Return the line to copy, x̄ ± U with k from t at the effective ν; "" where the test is not one of z and t.

    Beside another test it would contradict the interval that the panel shows.

    U belongs to the measured value alone: scatter and the laboratory's own uncertainty, not that of the target.
    """
    budget, mean, test = analysis.uncertainty, analysis.summary.mean, analysis.test
    if test is None or test.procedure not in INCLUDES_FURTHER:
        return ""
    if budget is None or mean is None or not isfinite(budget.of_mean) or budget.of_mean <= 0:
        return ""
    digits = min(places_for(budget.of_mean), finest_places_for(mean))
    value, expanded = decimal_text(mean, digits, sign), decimal_text(budget.of_mean, digits, sign)
    pair = unit_text(f"({value} ± {expanded})" if unit else f"{value} ± {expanded}", unit)
    return f"x̄ ± U = {pair} ({_coverage(budget, 1 - analysis.question.alpha, sign)}, n = {analysis.summary.n})"


def _coverage(budget: Uncertainty, level: float, sign: str) -> str:
    degrees = "∞" if budget.of_mean_df is None else df_text(budget.of_mean_df, sign)
    return f"k = {decimal_text(budget.of_mean_k, 2, sign)}, {level_text(level, sign)}, ν = {degrees}"


def in_sign(setting: Any, sign: str) -> str:
    """Return a setting as typed, with the decimal sign of the readings.

    >>> in_sign(" 0,050 ", ".")
    '0.050'
    """
    return as_typed(setting).strip().replace(",", ".").replace(".", sign)


def target_phrase(analysis: Analysis, numbers: Shown) -> str:
    """Return the target with its kind: "the certified value 5.000 mg/L"."""
    return f"the {target_noun(analysis.question.target_kind)} {numbers.target}"


def without_sign(difference: str) -> str:
    """Return a difference as a magnitude.

    >>> without_sign("−0.20 mg/L")
    '0.20 mg/L'
    """
    return difference.removeprefix("+").removeprefix(MINUS)


def _interval(test: Test | None, target: Decimal, digits: int, sign: str, unit: str) -> tuple[str, str, str, str]:
    if test is None:
        return "", "", "", ""
    digits = interval_places(test.interval, (target,), digits)
    attained = attained_text(test.interval.attained, sign) if test.procedure in COUNTING else ""
    texts = interval_text(test.interval, digits, sign, unit), interval_text(test.interval, digits, sign)
    return *texts, level_text(test.interval.level, sign), attained


def _agreement(analysis: Analysis, digits: int, sign: str, unit: str) -> tuple[str, str, str, str]:
    found = analysis.equivalence
    if found is None:
        return "", "", "", ""
    target, limit = analysis.question.exact_target, analysis.question.exact_number("equivalence_limit") or Decimal(0)
    interval = Interval(found.low, found.high, found.level, found.level)
    digits = interval_places(interval, (target - limit, target + limit), digits)
    texts = interval_text(interval, digits, sign, unit), interval_text(interval, digits, sign)
    return *texts, level_text(found.level, sign), p_text(found.p_value, analysis.question.alpha, sign)


def _difference(analysis: Analysis, digits: int, sign: str, unit: str) -> str:
    found = analysis.difference
    if found is None or not isfinite(found.value):
        return ""
    if analysis.test is not None and analysis.test.reject:
        while found.value and not _shows(found.value, digits):
            digits += 1
    return unit_text(signed_text(found.value, digits, sign), unit)


def _shows(value: float, digits: int) -> bool:
    return any(digit in decimal_text(value, digits) for digit in "123456789")


def _percent(analysis: Analysis, sign: str) -> str:
    found = analysis.difference
    if found is None or found.percent is None or not isfinite(found.percent):
        return ""
    return percent_text(found.percent, percent_places(found.percent, analysis), sign)


def _as_target(analysis: Analysis, estimate: float | None, digits: int, sign: str) -> str:
    question = analysis.question
    if estimate is None or short_noun(question.target_kind) != "limit":
        return ""
    typed = places(question.exact_target)
    return decimal_text(estimate, typed, sign) if typed < digits else ""


def _magnitude(value: float | None, digits: int, sign: str, unit: str) -> str:
    if value is None or not isfinite(value):
        return ""
    return unit_text(significant(value, digits, sign), unit)
