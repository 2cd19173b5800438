"""The texts of the result panel, in their order, and the figures to copy into a spreadsheet."""

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import UTC, datetime
from math import isfinite

from meanlab.core.results import Analysis
from meanlab.wording.cautions import FEW_READINGS, as_sentence, cautions
from meanlab.wording.names import (
    ALTERNATIVE_NAMES,
    PARAMETER_TITLES,
    PROCEDURE_NAMES,
    PROCEDURE_SHORT,
    counted,
    subject_of,
    unit_of,
)
from meanlab.wording.numbers import plain_words
from meanlab.wording.phrases import difference_phrase, parameter_of
from meanlab.wording.sentences import conclusion, verdict_word
from meanlab.wording.shown import UNDEFINED, Shown, shown

DIGITS_OF_FINGERPRINT = 12
ROW_OF_FEW, ROWS_OF_SHAPE = 7, (10, 11, 12)
MOST_CAUTIONS = 2
COMMANDS_OF_SPREADSHEETS = ("=", "+", "-", "@", "−")


@dataclass(frozen=True)
class PanelTexts:
    """Every text of the result panel.

    title         quantity and material
    verdict_word  the verdict in a word or a short phrase
    sentence      the conclusion
    rows          (label, text) of the table, in order
    why           why this procedure
    caution       the weightiest cautions not said elsewhere on the panel, what comes out without the far readings or
                  with the left-out ones, and the general line
    origin        "2026-12-01 05:30 UTC · meanlab 1.0 · fingerprint 3f9a 61c0 22be"
    mean_line     the line to copy, x̄ ± U; "" where there is none
    numbers       every number as text, for pictures and records
    """

    title: str
    verdict_word: str
    sentence: str
    rows: tuple[tuple[str, str], ...]
    why: str
    caution: str
    origin: str
    mean_line: str
    numbers: Shown


def panel_texts(analysis: Analysis) -> PanelTexts:
    """Return every text of the result panel of an analysis."""
    numbers = shown(analysis)
    return PanelTexts(
        title=subject_of(analysis) or "Readings",
        verdict_word=verdict_word(analysis),
        sentence=analysis.conclusion or conclusion(analysis),
        rows=tuple((label, text) for label, text in _rows(analysis, numbers) if text),
        why=why(analysis),
        caution=_caution(analysis),
        origin=origin(analysis),
        mean_line=numbers.mean_line,
        numbers=numbers,
    )


def n_text(analysis: Analysis) -> str:
    """Return the count of units: "12 of 12 readings", "3 preparations of 9 readings", with what is below or above."""
    summary = analysis.summary
    remarks = []
    if analysis.readings.preparations is not None:
        text = f"{counted(summary.n, 'preparation')} of {counted(summary.n_readings, 'reading')}"
        remarks += [f"{summary.left_out} left out"] if summary.left_out else []
    else:
        text = f"{summary.n} of {counted(summary.n + summary.left_out, 'reading')}"
    remarks += [f"{summary.below} below a limit"] if summary.below else []
    remarks += [f"{summary.above} above a limit"] if summary.above else []
    return ", ".join((text, *remarks))


def why(analysis: Analysis) -> str:
    """Return why this procedure, as a sentence: the deciding reason, and the rule's own choice where one was fixed."""
    route = analysis.route
    reasons = [plain_words(reason).removesuffix(".") for reason in route.reasons] or ["no reason was kept"]
    if route.procedure is None:
        text = f"Not testable: {reasons[0]}"
    elif route.fixed:
        text = "; ".join(reasons[:2])
    else:
        text = f"{PROCEDURE_SHORT[route.procedure]} because: {reasons[0]}"
    return text[0].upper() + text[1:] + "." if route.fixed else text + "."


def origin(analysis: Analysis) -> str:
    """Return when and with what the result was made: UTC time, version, start of the fingerprint."""
    made = analysis.provenance
    version = made.versions.get("meanlab", "")
    digits = made.fingerprint[:DIGITS_OF_FINGERPRINT]
    groups = " ".join(digits[start : start + 4] for start in range(0, len(digits), 4))
    parts = (_minute(made.time), f"meanlab {version}".strip(), f"fingerprint {groups}" if groups else "")
    return " · ".join(part for part in parts if part)


def tab_separated(analysis: Analysis) -> str:
    """Return the figures as two lines to paste into a spreadsheet: headings and full numbers, separated by tabs.

    Numbers have the decimal sign of the readings, the hyphen as minus and no rounding; a text that a spreadsheet would
    take for a command gets an apostrophe before it.
    """
    columns = list(_columns(analysis))
    return "\n".join("\t".join(column[place] for column in columns) for place in (0, 1)) + "\n"


def _rows(analysis: Analysis, numbers: Shown) -> Iterable[tuple[str, str]]:
    question, test = analysis.question, analysis.test
    yield "n", n_text(analysis)
    yield PARAMETER_TITLES.get(parameter_of(analysis), "Mean"), _estimate(numbers)
    if numbers.sigma and test is not None and test.procedure == "z":
        yield "s; known σ", f"{numbers.s or UNDEFINED}; {numbers.sigma}"
    else:
        yield "s", numbers.s or UNDEFINED
    yield "Target", numbers.target
    yield "Difference", difference_phrase(numbers)
    if test is None:
        yield "Procedure", "none"
        return
    agreement = _agreement_row(analysis, numbers)
    yield f"{numbers.interval_level} interval{' (test)' if agreement else ''}", _interval(numbers)
    yield from agreement
    yield "Procedure", f"{PROCEDURE_NAMES[test.procedure]}, {ALTERNATIVE_NAMES[question.alternative]}"
    yield "Statistic", numbers.statistic
    yield "Critical value", numbers.critical
    yield "p", f"{numbers.p} (approximate)" if test.approximate else numbers.p
    yield "Detectable (80 %)", _detectable(analysis, numbers)


def _estimate(numbers: Shown) -> str:
    if not numbers.estimate:
        return UNDEFINED
    return f"{numbers.estimate} ({numbers.as_target} in the limit's places)" if numbers.as_target else numbers.estimate


def _interval(numbers: Shown) -> str:
    return f"{numbers.interval_bare} (attained {numbers.attained})" if numbers.attained else numbers.interval_bare


def _agreement_row(analysis: Analysis, numbers: Shown) -> tuple[tuple[str, str], ...]:
    """Return the row of the interval held against the limit, labelled by its use."""
    if analysis.equivalence is None or not numbers.limit:
        return ()
    return ((f"{numbers.agreement_level} interval (E)", f"{numbers.agreement_bare}; E = {numbers.limit}"),)


def _detectable(analysis: Analysis, numbers: Shown) -> str:
    if not numbers.detectable:
        return "not known" if analysis.power.planning_s is None else "out of reach"
    words = {"approximate": "about ", "upper bound": "at least "}
    return words.get(analysis.power.kind, "") + numbers.detectable


def _caution(analysis: Analysis) -> str:
    *found, general = analysis.cautions or cautions(analysis)
    said = {_said_by_route(analysis)}
    weighty = [text for text in found if text not in said][:MOST_CAUTIONS]
    beside = [without.sentence for without in analysis.withouts]
    return " ".join((*weighty, *beside, general))


def _said_by_route(analysis: Analysis) -> str:
    """Return the caution that the reason for the procedure states already."""
    if analysis.route.row == ROW_OF_FEW:
        return FEW_READINGS
    normality = analysis.check("normality")
    return as_sentence(normality.message) if normality is not None and analysis.route.row in ROWS_OF_SHAPE else ""


def _minute(time: str) -> str:
    try:
        moment = datetime.fromisoformat(time)
    except ValueError:
        return time
    moment = moment.replace(tzinfo=UTC) if moment.tzinfo is None else moment.astimezone(UTC)
    return f"{moment:%Y-%m-%d %H:%M} UTC"


def _columns(analysis: Analysis) -> Iterable[tuple[str, str]]:
    sign, test, summary = analysis.readings.decimal_sign, analysis.test, analysis.summary
    question, difference, interval = analysis.question, analysis.difference, None if test is None else test.interval
    critical = (None, None) if test is None else test.critical
    for heading, text in (
        ("quantity", plain_words(question.quantity) or plain_words(analysis.readings.name)),
        ("material", plain_words(question.material)),
        ("unit", unit_of(analysis)),
    ):
        yield heading, _as_text(text)
    for heading, number in (
        ("n", summary.n),
        ("readings", summary.n_readings),
        ("left out", summary.left_out),
        ("mean", summary.mean),
        ("s", summary.s),
        ("median", summary.median),
        ("target", question.exact_target),
        ("difference", None if difference is None else difference.value),
        ("difference %", None if difference is None else difference.percent),
        ("low", None if interval is None else interval.low),
        ("high", None if interval is None else interval.high),
        ("level", None if interval is None else interval.level),
        ("statistic", None if test is None else test.statistic),
        ("df", None if test is None else test.df),
        ("critical low", critical[0]),
        ("critical high", critical[1]),
        ("p", None if test is None else test.p_value),
        ("detectable 80 %", analysis.power.smallest_detectable),
    ):
        yield heading, _full(number, sign)
    yield "procedure", "" if test is None else PROCEDURE_NAMES[test.procedure]
    yield "alternative", question.alternative
    yield "verdict", verdict_word(analysis)


def _full(number: object, sign: str) -> str:
    if isinstance(number, float):
        return repr(float(number)).removesuffix(".0").replace(".", sign) if isfinite(number) else ""
    return "" if number is None else str(number).replace(".", sign)


def _as_text(text: str) -> str:
    return f"'{text}" if text.startswith(COMMANDS_OF_SPREADSHEETS) else text
