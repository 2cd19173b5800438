"""What a written record says of a result, part by part: headings, sentences and tables, all as text.

The wording of numbers and sentences is that of `meanlab.wording`; here they are only put in order.
"""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass

from meanlab.core.question import PROCEDURES
from meanlab.core.results import Analysis, NotApplicable, Test
from meanlab.core.source import Source
from meanlab.core.written import Written
from meanlab.records.asked import moment, question_rows
from meanlab.wording import PanelTexts, agreement_sentence, decision_rule, enough_sentence
from meanlab.wording.names import CHECK_TITLES, PROCEDURE_NAMES
from meanlab.wording.numbers import (
    decimal_text,
    df_text,
    interval_text,
    p_text,
    significant,
    statistic_number,
    statistic_text,
    unit_text,
)

MOST_ROWS = 300
DIGITS_OF_U = 3
WIDTHS: Mapping[int, tuple[int, ...]] = {3: (8, 22, 70), 4: (8, 22, 50, 20), 5: (8, 22, 35, 20, 15)}


@dataclass(frozen=True)
class Part:
    """One part of a written record: a heading, a table with its column headings, and sentences below it.

    ``listed`` marks sentences that stand as a list; a table without column headings has labels in its first column;
    ``widths`` are those of the columns, in percent.
    """

    heading: str
    sentences: tuple[str, ...] = ()
    columns: tuple[str, ...] = ()
    rows: tuple[tuple[str, ...], ...] = ()
    listed: bool = False
    widths: tuple[int, ...] = (30, 70)


def account(analysis: Analysis, texts: PanelTexts, source: Source, written: Written) -> tuple[Part, ...]:
    """Return the parts that follow the sentence and the pictures, those that have nothing to say left out."""
    found = (
        Part("Result in figures", (texts.mean_line,), rows=texts.rows),
        Part("Cautions", analysis.cautions, listed=True),
        Part("Decision rule and reach", _rule(analysis)),
        Part("Why this procedure", (texts.why, *analysis.route.reasons[1:]), listed=True),
        _checks(analysis),
        _uncertainty(analysis, texts),
        _others(analysis, texts),
        Part("With and without readings", tuple(one.sentence for one in analysis.withouts), listed=True),
        Part("The question", rows=tuple(question_rows(analysis, written))),
        readings_part(analysis, source),
        Part("Origin", rows=tuple(origin_rows(analysis, source, written))),
    )
    return tuple(part for part in found if part.rows or any(part.sentences))


def readings_part(analysis: Analysis, source: Source) -> Part:
    """Return every entry as typed with its role, and the cause of each that was left out.

    Of a long list all texts stand one after the other, and the table has only those that are no plain readings.
    """
    labels = {}
    if analysis.readings.preparations is not None:
        labels = dict(zip(analysis.readings.positions, analysis.readings.preparations, strict=True))
        labels |= {one.index: one.preparation or "" for one in analysis.readings.censored}
    entries = source.entries
    sentences: tuple[str, ...] = ()
    if len(entries) > MOST_ROWS:
        entries = tuple(one for one in entries if one.role != "reading" or one.left_out)[:MOST_ROWS]
        sentences = (f"All {len(source.entries)} as typed: " + "; ".join(one.text for one in source.entries),)
    columns = ["No.", "As typed", "Role", "Where"] + (["Preparation"] if labels else [])
    rows = []
    for one in entries:
        role = f"left out: {one.left_out}" if one.left_out else one.role
        rows.append((str(one.index + 1), one.text, role, one.place, *([labels.get(one.index, "")] if labels else [])))
    if not any(one.place for one in entries):
        del columns[3]
        rows = [(*row[:3], *row[4:]) for row in rows]
    return Part("Readings as typed", sentences, tuple(columns), tuple(rows), widths=WIDTHS[len(columns)])


def origin_rows(analysis: Analysis, source: Source, written: Written) -> Iterator[tuple[str, str]]:
    """Return label and text of where the record comes from: who, when, from what, with which versions."""
    made = analysis.provenance
    rows = (
        ("Title", written.title),
        ("By", written.by),
        ("Instrument", written.instrument),
        ("Method", written.method),
        ("Note", written.note),
        ("Entry", "" if written.number is None else f"no. {written.number}, saved {moment(written.time)}"),
        ("Time zone of the bench", written.zone),
        ("Amends", "" if written.amends_number is None else f"entry no. {written.amends_number}: {written.reason}"),
        ("File", source.file_name and f"{source.file_name}, {source.size} bytes"),
        ("SHA-256 of the file", source.checksum),
        ("Chosen in it", "; ".join(f"{name}: {text}" for name, text in source.selection.items())),
        ("Computed", moment(made.time)),
        ("Versions", ", ".join(f"{name} {version}" for name, version in made.versions.items())),
        ("Fingerprint", f"{made.fingerprint} (SHA-256 of the readings as typed and of the question)"),
        ("Digest of the entry", written.digest),
    )
    return ((label, text) for label, text in rows if text)


def _rule(analysis: Analysis) -> tuple[str, ...]:
    agreement = agreement_sentence(analysis) if analysis.equivalence is not None else ""
    return tuple(text for text in (decision_rule(analysis), agreement, enough_sentence(analysis)) if text)


def _checks(analysis: Analysis) -> Part:
    rows = tuple((CHECK_TITLES.get(one.name, one.name), one.outcome, one.message) for one in analysis.checks)
    columns = ("Looked at", "Outcome", "What was seen")
    return Part("Checks of the readings", columns=columns, rows=rows, widths=(20, 12, 68))


def _uncertainty(analysis: Analysis, texts: PanelTexts) -> Part:
    budget, sign, unit = analysis.uncertainty, texts.numbers.sign, texts.numbers.unit
    if budget is None:
        return Part("Uncertainty of the difference")

    def of(u: float) -> str:
        return unit_text(significant(u, DIGITS_OF_U, sign), unit)

    rows = [
        (one.name, of(one.u), "infinite" if one.df is None else df_text(one.df, sign), _percent(one.share, sign))
        for one in budget.components
    ]
    degrees = "infinite" if budget.df is None else df_text(budget.df, sign)
    rows.append(("combined", of(budget.combined), degrees, _percent(1.0, sign)))
    rows.append((f"expanded, k = {statistic_number(budget.k, sign)}", of(budget.expanded), "", ""))
    columns = ("Component", "Standard uncertainty u", "Degrees of freedom", "Share of u²")
    said = tuple(one.message for one in budget.bounds)
    return Part("Uncertainty of the difference", said, columns, tuple(rows), widths=(26, 30, 24, 20))


def _others(analysis: Analysis, texts: PanelTexts) -> Part:
    others = {one.procedure: one for one in analysis.others}
    rows = tuple(_other(analysis, texts, others[name]) for name in PROCEDURES if name in others)
    columns = ("Procedure", "Speaks of the", "Estimate", "Interval", "Statistic", "p")
    chosen = "was fixed by the written method" if analysis.route.fixed else "is chosen by its rule"
    sentences = (f"None of these decided: the procedure {chosen} before any p-value is looked at.",)
    widths = (15, 20, 12, 21, 17, 15)
    return Part(
        "Same readings, other procedures",
        sentences if rows and analysis.test is not None else (),
        columns,
        rows,
        widths=widths,
    )


def _other(analysis: Analysis, texts: PanelTexts, other: Test | NotApplicable) -> tuple[str, ...]:
    name, sign, places = PROCEDURE_NAMES[other.procedure], texts.numbers.sign, texts.numbers.places
    if isinstance(other, NotApplicable):
        return (name, f"does not apply: {other.not_applicable}", "", "", "", "")
    return (
        name,
        other.parameter,
        "–" if other.estimate is None else decimal_text(other.estimate, places, sign),
        interval_text(other.interval, places, sign, target=analysis.question.exact_target),
        statistic_text(other, sign),
        p_text(other.p_value, other.significance, sign) + (" (approximate)" if other.approximate else ""),
    )


def _percent(share: float, sign: str) -> str:
    return f"{decimal_text(100 * share, 1, sign)} %"


def all_texts(parts: Iterable[Part]) -> Iterator[str]:
    """Return every text of the parts, in order."""
    for part in parts:
        yield part.heading
        yield from part.columns
        for row in part.rows:
            yield from row
        yield from part.sentences
