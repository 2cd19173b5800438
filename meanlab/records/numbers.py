"""The numbers of a result as CSV: one a line, in full, for a spreadsheet or another program.

Numbers have every digit and the decimal sign of the readings; with a decimal comma the fields stand between semicolons
(common practice of spreadsheets in those countries). Lines end as RFC 4180 says; the mark at the start (BOM) tells
spreadsheets that it is UTF-8. A text that a spreadsheet would take for a formula gets an apostrophe before it.
"""

import csv
import io
import re
from collections.abc import Iterator, Mapping
from typing import Any

from meanlab.core.results import Analysis
from meanlab.core.source import Source, entries_of
from meanlab.wording.names import subject_of, unit_of

COMMANDS = ("=", "+", "-", "@", "−", "＝", "＋", "－", "＠", "\t", "\r", "\n")
HEADINGS = ("part", "name", "value")
PARTS = ("question", "summary", "test", "difference", "equivalence", "power", "uncertainty", "others", "checks",
         "censored_fit", "withouts")  # fmt: skip
NOT_SHOWN = ("null_ranks", "name", "message", "notes", "entries", "sentence", "not_applicable", "preparations")
MEMBERS: Mapping[str, tuple[str, ...]] = {
    "critical": ("low", "high"),
    "offsets": ("estimate", "low", "high"),
    "p range": ("smallest", "largest"),
}
_NUMBER = re.compile(r"[+-]?(\d+([.,]\d*)?|[.,]\d+)([eE][+-]?\d+)?", re.ASCII)


def numbers_csv(analysis: Analysis, source: Source | None = None) -> bytes:
    """Return the numbers of a result as CSV in UTF-8, the readings as typed at the end."""
    sign = analysis.readings.decimal_sign
    text = io.StringIO()
    writer = csv.writer(text, delimiter=";" if sign == "," else ",", lineterminator="\r\n")
    writer.writerow(HEADINGS)
    for row in _rows(analysis, source, sign):
        writer.writerow([safe(cell) for cell in row])
    return text.getvalue().encode("utf-8-sig", "replace")


def safe(text: str) -> str:
    """Return a text that no spreadsheet takes for a formula; a number stays one.

    >>> safe("=1+1"), safe("-0.5"), safe("-0.5+1")
    ("'=1+1", '-0.5', "'-0.5+1")
    """
    text = text.replace("\x00", "")
    if text.lstrip(" ").startswith(COMMANDS) and not _NUMBER.fullmatch(text):
        return f"'{text}"
    return text


def _rows(analysis: Analysis, source: Source | None, sign: str) -> Iterator[tuple[str, str, str]]:
    yield "result", "of", subject_of(analysis)
    yield "result", "unit", unit_of(analysis)
    yield "result", "procedure", analysis.route.procedure or "none"
    yield "result", "verdict", analysis.verdict
    yield "result", "sentence", analysis.conclusion
    for part in PARTS:
        for name, value in _figures(getattr(analysis, part), sign):
            yield _words(part), name, value
    for place, version in analysis.provenance.versions.items():
        yield "provenance", place, version
    yield "provenance", "time", analysis.provenance.time
    yield "provenance", "fingerprint", analysis.provenance.fingerprint
    for entry in (source or Source(entries=entries_of(analysis.readings))).entries:
        role = f"{entry.role}, left out: {entry.left_out}" if entry.left_out else entry.role
        yield "readings as typed", f"{entry.index + 1} ({role})", entry.text


def _figures(fact: Any, sign: str, before: str = "") -> Iterator[tuple[str, str]]:
    """Every number below a fact with its path in words, depth first."""
    if fact is None:
        return
    if hasattr(fact, "to_dict"):
        fact = fact.to_dict()
    if isinstance(fact, Mapping):
        for name, value in fact.items():
            if name not in NOT_SHOWN:
                yield from _figures(value, sign, f"{before}, {_words(name)}" if before else _words(name))
    elif isinstance(fact, (list, tuple)):
        names = MEMBERS.get(before.split(", ")[-1], ())
        for place, value in enumerate(fact):
            name = names[place] if names else _name(value) or str(place + 1)
            yield from _figures(value, sign, f"{before}, {name}" if before else name)
    else:
        yield before, _number(fact, sign)


def _name(value: Any) -> str:
    values = value.to_dict() if hasattr(value, "to_dict") else value
    if not isinstance(values, Mapping):
        return ""
    return _words(str(values.get("name") or values.get("procedure") or values.get("label") or ""))


def _number(value: Any, sign: str) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, (int, float)):
        return repr(value).replace(".", sign)
    return str(value)


def _words(name: str) -> str:
    return name.replace("_", " ")
