"""From an entry back to the page: its readings as typed, and the fields that ask its question again."""

from collections.abc import Callable, Mapping
from decimal import Decimal
from math import isfinite, sqrt
from typing import Any

from meanlab.core.complaints import Complaint
from meanlab.core.numbers import as_typed
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.source import Source
from meanlab.notebook import Entry
from meanlab.page import asked, cache
from meanlab.page.fields import FIELDS
from meanlab.page.file_choice import SIGNS, selection_of
from meanlab.page.working import Reopened

SIGN_NAMES = {sign: name for name, sign in SIGNS.items()}
JOIN, IS = "; ", " = "


def reopened(entry: Entry, find_file: Callable[[str], bytes | None]) -> Reopened:
    """Return what the page shows of an entry; ``find_file`` looks for a file by its SHA-256."""
    readings, source = entry.analysis.readings, entry.source
    sign = readings.decimal_sign
    question = question_fields(entry.analysis.question, sign)
    content = source.text or (find_file(source.checksum) if source.checksum else None)
    if content:
        file = None if isinstance(content, str) else (source.file_name, content)
        text = content if isinstance(content, str) else ""
        fields = question | {"readings_text": text} | picks(source, readings)
        found = _read_again(fields, file, readings)
        if found is not None:
            return _with(fields, file, readings.left_out, found, entry)
    text, left_out = as_text(readings)
    labelled = readings.preparations is not None
    fields = question | {
        "readings_text": text,
        "decimal_sign": SIGN_NAMES[sign],
        "labels_name_preparations": labelled,
    }
    entries = tuple(text.splitlines())
    return _with(fields, None, left_out, entries, entry, _not_at_hand(source))


def question_fields(question: Question, sign: str) -> dict[str, Any]:
    """Return the fields that ask a question, numbers as they were typed.

    An uncertainty of the target stands as the standard uncertainty that followed from the certificate.

    >>> question_fields(Question("5.00", significance="0.01"), ".")["significance"]
    '1 %'
    """
    units, conditions = _units_and_conditions(question.units_are)
    return {
        "target": question.target_as_typed,
        "unit": question.unit,
        "target_kind": question.target_kind,
        "significance": f"{_typed(Decimal(str(question.significance)) * 100, sign)} %",
        "alternative": question.alternative,
        "quantity": question.quantity,
        "material": question.material,
        "units_are": units,
        "conditions": conditions,
        "run_order": question.run_order,
        **_uncertainty_fields(question, sign),
        "own_uncertainty": _typed(question.measurement_uncertainty or None, sign),
        "sigma": _typed(question.sigma, sign),
        "sigma_origin": question.sigma_origin,
        "sigma_df": _degrees(question.sigma_df, sign),
        "limit": _typed(question.equivalence_limit, sign),
        "matters": _typed(question.difference_that_matters, sign),
        "procedure": question.procedure,
        "parameter": question.parameter,
        "resolution": _typed(question.resolution, sign),
    }


def picks(source: Source, readings: ReadingSet) -> dict[str, Any]:
    """Return the fields that choose in a file or a pasted table what was chosen there."""
    chosen = source.selection
    column, name = chosen.get("column_index"), chosen.get("where", "").partition(IS)
    return {
        "decimal_sign": SIGN_NAMES.get(chosen.get("decimal", ""), "as written"),
        "sheet": chosen.get("sheet"),
        "column": int(column) if column is not None and column.isdecimal() else None,
        "replicates": chosen["columns"].split(JOIN) if "columns" in chosen else [],
        "filter_column": name[0] or None,
        "filter_value": name[2],
        "preparation": chosen.get("preparation"),
        "labels_name_preparations": readings.preparations is not None and "preparation" not in chosen,
    }


def as_text(readings: ReadingSet) -> tuple[str, dict[int, str]]:
    """Return readings as lines to paste, each with its preparation, and the left-out ones by their new place.

    >>> as_text(ReadingSet(["5.02", "5.04"], left_out={1: "air bubble"}))
    ('5.02\\n5.04', {1: 'air bubble'})
    """
    labels = readings.preparations or ("",) * len(readings.values)
    lines = list(zip(readings.positions, labels, readings.typed, strict=True))
    lines += [(one.index, one.preparation or "", _limit_text(one)) for one in readings.censored]
    lines.sort()
    text = "\n".join(f"{label}\t{typed}" if label else typed for _, label, typed in lines)
    causes = {new: readings.left_out[line[0]] for new, line in enumerate(lines) if line[0] in readings.left_out}
    return text, causes


def _with(
    fields: Mapping[str, Any],
    file: tuple[str, bytes] | None,
    causes: Mapping[int, str],
    entries: tuple[str, ...],
    entry: Entry,
    notice: str = "",
) -> Reopened:
    left_out = {str(at): {"text": entries[at], "cause": why} for at, why in causes.items() if at < len(entries)}
    with_defaults = dict(FIELDS) | dict(fields)
    parts = asked.parts_set(with_defaults, list(left_out))
    parts |= dict.fromkeys(entry.analysis.question.set_after)
    return Reopened(fields, file, left_out, entries, parts, notice)


def _read_again(fields: Mapping[str, Any], file: tuple[str, bytes] | None, kept: ReadingSet) -> tuple[str, ...] | None:
    """Return the texts of all entries where a source still gives the kept readings, None where it does not."""
    content, name = (fields["readings_text"], None) if file is None else (file[1], file[0])
    by_preparation = kept.preparations is not None
    try:
        found = cache.read(cache.Source(content, name, selection_of(dict(FIELDS) | dict(fields)), by_preparation))
        now = found.reading_set({}, found.preparations if by_preparation else None)
    except (Complaint, TypeError, KeyError):
        return None
    same = (now.typed, now.positions, now.censored) == (kept.typed, kept.positions, kept.censored)
    return tuple(entry.text for entry in found.entries) if same else None


def _not_at_hand(source: Source) -> str:
    if source.file_name:
        return (
            f'The file "{source.file_name}" is no longer at hand: its readings stand here as they were typed in it. '
            "Upload the file to have the rest of it."
        )
    return ""


def _units_and_conditions(words: str) -> tuple[str, str]:
    """Return what one reading is and the conditions, from the one phrase that holds both.

    >>> _units_and_conditions("each a preparation of its own, repeatability conditions")
    ('a preparation of its own', 'repeatability')
    >>> _units_and_conditions("separate weighings")
    ('separate weighings', 'not stated')
    """
    said = asked.NOT_STATED
    for conditions in asked.CONDITIONS[1:]:
        ending = f"{conditions} conditions"
        if words == ending or words.endswith(f", {ending}"):
            words, said = words[: -len(ending)].removesuffix(", "), conditions
            break
    known = words.removeprefix("each ")
    return (known if known in asked.UNITS else words) or asked.NOT_STATED, said


def _uncertainty_fields(question: Question, sign: str) -> dict[str, str]:
    """Return the fields of the target's uncertainty u; of a historical level, the s of its m values: u = s/√m."""
    u, degrees = question.number("target_uncertainty"), question.target_uncertainty_df
    if not u:
        return {"certificate_value": "", "certificate_meaning": "not given", "certificate_df": ""}
    if question.target_kind == "historical level" and isfinite(degrees):
        root = sqrt(degrees + 1)
        texts = (f"{u * root:.{digits}g}" for digits in range(1, 18))
        s = next((text for text in texts if float(text) / root == u), repr(u * root))
        return {"certificate_value": _typed(float(s), sign), "historical_count": str(int(degrees) + 1)}
    return {
        "certificate_value": _typed(question.target_uncertainty, sign),
        "certificate_meaning": "standard uncertainty u",
        "certificate_df": _degrees(degrees, sign),
    }


def _typed(given: Any, sign: str) -> str:
    if given is None:
        return ""
    text = given.strip() if isinstance(given, str) else f"{Decimal(as_typed(given)).normalize():f}"
    return text.replace(".", sign) if not isinstance(given, str) else text


def _degrees(degrees: float, sign: str) -> str:
    return _typed(degrees, sign) if isfinite(degrees) else ""


def _limit_text(one: Any) -> str:
    if one.typed or one.limit is None:
        return str(one.typed)
    return f"{'<' if one.kind == 'below' else '>'}{one.limit}"
