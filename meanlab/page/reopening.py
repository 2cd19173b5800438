"""From an entry back to the page: its readings as typed, and the fields that ask its question again."""

from collections.abc import Callable, Mapping
from decimal import Decimal
from math import isfinite, sqrt
from typing import Any

from meanlab.core.complaints import Complaint
from meanlab.core.numbers import as_typed
from meanlab.core.question import TARGET_KINDS, Question
from meanlab.core.readings import ReadingSet
from meanlab.core.source import Source
from meanlab.intake import Intake
from meanlab.notebook import Entry
from meanlab.page import asked, cache
from meanlab.page.fields import FIELDS
from meanlab.page.file_choice import SIGNS, selection_of
from meanlab.page.working import Reopened

SIGN_NAMES = {sign: name for name, sign in SIGNS.items()}
JOIN, IS, PREPARATION = "; ", " = ", "Preparation"


def reopened(entry: Entry, find_file: Callable[[str], bytes | None]) -> Reopened:
    """Return what the page shows of an entry; ``find_file`` looks for a file by its SHA-256."""
    readings, source = entry.analysis.readings, entry.source
    asks = question_fields(entry.analysis.question, readings.decimal_sign)
    content = source.text or (find_file(source.checksum) if source.checksum else None)
    if content:
        file = None if isinstance(content, str) else (source.file_name, content)
        text = content if isinstance(content, str) else ""
        fields = asks | {"readings_text": text} | picks(source, readings)
        found = _read(fields, file)
        if found is not None and _same(found, readings):
            return _with(fields, file, readings.left_out, found, entry)
    fields = asks | {
        "readings_text": as_text(readings),
        "decimal_sign": SIGN_NAMES[readings.decimal_sign],
        "unit": asks["unit"] or readings.unit,
        "quantity": asks["quantity"] or readings.name,
    }
    if readings.preparations is not None:
        fields |= {"preparation": PREPARATION, "column": 1}
    order = sorted([*readings.positions, *(one.index for one in readings.censored)])
    causes = {order.index(place): why for place, why in readings.left_out.items()}
    return _with(fields, None, causes, _read(fields, None), entry, _not_at_hand(source))


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
        "target_kind": question.target_kind if question.target_kind in TARGET_KINDS else FIELDS["target_kind"],
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


def as_text(readings: ReadingSet) -> str:
    """Return readings as lines to paste, in their order, each with its preparation.

    >>> as_text(ReadingSet(["5.02", "5.04"]))
    '5.02\\n5.04'
    >>> as_text(ReadingSet(["5.02", "5.04"], preparations=["A", "B"]))
    'Preparation\\tReading\\nA\\t5.02\\nB\\t5.04'
    """
    labels = readings.preparations or ("",) * len(readings.values)
    lines = list(zip(readings.positions, labels, readings.typed, strict=True))
    lines += [(one.index, one.preparation or "", _limit_text(one)) for one in readings.censored]
    lines.sort()
    if readings.preparations is None:
        return "\n".join(typed for _, _, typed in lines)
    return "\n".join([f"{PREPARATION}\tReading", *(f"{label}\t{typed}" for _, label, typed in lines)])


def _with(
    fields: Mapping[str, Any],
    file: tuple[str, bytes] | None,
    causes: Mapping[int, str],
    found: Intake | None,
    entry: Entry,
    notice: str = "",
) -> Reopened:
    texts = () if found is None else tuple(one.text for one in found.entries)
    left_out = {str(at): {"text": texts[at], "cause": why} for at, why in causes.items() if at < len(texts)}
    parts = asked.parts_set(dict(FIELDS) | dict(fields), list(left_out))
    parts |= dict.fromkeys(entry.analysis.question.set_after)
    return Reopened(fields, file, left_out, texts, parts, notice)


def _read(fields: Mapping[str, Any], file: tuple[str, bytes] | None) -> Intake | None:
    """Return what is read from the source that the fields name, None where it cannot be read."""
    content, name = (fields["readings_text"], None) if file is None else (file[1], file[0])
    every = dict(FIELDS) | dict(fields)
    by_preparation = every["preparation"] is not None or every["labels_name_preparations"]
    try:
        return cache.read(cache.Source(content, name, selection_of(every), by_preparation))
    except (Complaint, TypeError, KeyError):
        return None


def _same(found: Intake, kept: ReadingSet) -> bool:
    """Tell whether what is read now are the kept readings."""
    try:
        now = found.reading_set({}, found.preparations if kept.preparations is not None else None)
    except Complaint:
        return False
    return all(getattr(now, part) == getattr(kept, part) for part in ("typed", "positions", "censored", "preparations"))


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
