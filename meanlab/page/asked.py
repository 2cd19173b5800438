"""From the fields of the page to a question: which texts are numbers, what is missing, what follows from what.

No widget here: fields in, `Question` or a complaint out.
"""

from collections.abc import Mapping, Sequence
from decimal import Decimal, InvalidOperation
from math import inf, sqrt
from statistics import NormalDist
from typing import Any

from meanlab.core.complaints import QuestionComplaint
from meanlab.core.numbers import exact_setting
from meanlab.core.question import Question
from meanlab.intake import read_number

SIDE_OF_KIND: Mapping[str, str] = {"upper limit": "greater", "lower limit": "less"}
MEANINGS = (
    "not given",
    "expanded U with k",
    "standard uncertainty u",
    "half of a 95 % interval",
    "bounds ± a (rectangular)",
)
NOT_STATED = "not stated"
CONDITIONS = (NOT_STATED, "repeatability", "intermediate precision")
UNITS = (
    NOT_STATED,
    "a preparation of its own",
    "a portion of its own",
    "an injection of one preparation",
    "a repeat on one portion",
)


def question_from(
    fields: Mapping[str, Any], sign: str, set_after: tuple[str, ...] = (), look: int = 1, nested: bool = False
) -> Question:
    """Return the question that the fields ask; numbers are read with the decimal sign of the readings.

    ``nested``: the units are preparations, so what one reading is has been said by their labels.

    Raises QuestionComplaint for a field that is no number or fields that contradict each other.
    """
    uncertainty, degrees = target_uncertainty(fields, sign)
    return Question(
        target=_as_typed(fields, "target", "target", sign),
        alternative=fields["alternative"],
        significance=significance(fields["significance"], sign),
        procedure=fields["procedure"],
        parameter=fields["parameter"],
        sigma=_optional(fields, "sigma", "known σ", sign),
        sigma_df=_degrees(fields, "sigma_df", sign),
        sigma_origin=fields["sigma_origin"].strip(),
        target_uncertainty=uncertainty,
        target_uncertainty_df=degrees,
        measurement_uncertainty=_optional(fields, "own_uncertainty", "laboratory's own uncertainty", sign) or 0.0,
        equivalence_limit=_optional(fields, "limit", "equivalence limit E", sign),
        difference_that_matters=_optional(fields, "matters", "difference that matters", sign),
        resolution=_optional(fields, "resolution", "resolution", sign),
        run_order=bool(fields["run_order"]),
        units_are=units_in_words(NOT_STATED if nested else fields["units_are"], fields["conditions"]),
        quantity=fields["quantity"].strip(),
        unit=fields["unit"].strip(),
        material=fields["material"].strip(),
        target_kind=fields["target_kind"],
        set_after=set_after,
        look=look,
    )


def significance(text: str, sign: str = ".") -> Decimal:
    """Return a significance level: "5 %" is a percentage, "0.05" the level itself.

    >>> significance("5 %"), significance("0.01")
    (Decimal('0.05'), Decimal('0.01'))
    """
    bare = (text or "").replace("%", "").strip()
    level = number(bare, "significance level α", "significance", sign)
    if "%" not in text and level >= 1:
        raise QuestionComplaint(f'The significance level α is {bare}; for {bare} % type "{bare} %".', "significance")
    return level / 100 if "%" in text else level


def number(text: str, name: str, where: str, sign: str) -> Decimal:
    """Return the number a field holds, as an exact decimal.

    Raises QuestionComplaint, naming the field, for anything that is not one number.
    """
    try:
        return exact_setting(read_number(text, sign), name, where)
    except QuestionComplaint as complaint:
        if name in str(complaint):
            raise
        raise QuestionComplaint(f"The {name}: {complaint}", where) from None


def target_uncertainty(fields: Mapping[str, Any], sign: str) -> tuple[float, float]:
    """Return standard uncertainty u₀ of the target and its degrees of freedom (infinite where none are given).

    Expanded U with k: U/k. Bounds ± a: a/√3. Half of a 95 % interval: divided by the normal quantile 1.96.
    A historical level from m values with their s: s/√m with m − 1 degrees of freedom.
    Source: JCGM 100:2008, 4.3.3, 4.3.4, 4.3.7, 4.2.3.
    """
    meaning, text = fields["certificate_meaning"], fields["certificate_value"].strip()
    historical = fields["target_kind"] == "historical level" and fields["historical_count"].strip()
    if historical:
        return _historical(text, fields["historical_count"], sign)
    if not text:
        return 0.0, inf
    if meaning == "not given":
        raise QuestionComplaint(
            f'The target has an uncertainty of {text}, but not what it is: choose it beside "U is", '
            "a certificate says it near its coverage factor.",
            "certificate_meaning",
        )
    given = float(number(text, "uncertainty of the target", "certificate_value", sign))
    divisor = {
        "standard uncertainty u": 1.0,
        "half of a 95 % interval": NormalDist().inv_cdf(0.975),
        "bounds ± a (rectangular)": sqrt(3.0),
    }.get(meaning) or _coverage_factor(fields["certificate_k"], sign)
    return given / divisor, _degrees(fields, "certificate_df", sign)


def missing(fields: Mapping[str, Any], has_readings: bool) -> str:
    """Return the sentence that says what a half-typed question still needs; "" where nothing is missing."""
    has_target = bool(fields["target"].strip())
    if not has_readings and not has_target:
        return (
            "Paste the readings, one a line, and type the target: the result stands here at once. "
            "The sample sets above the box show what comes out."
        )
    if not has_readings:
        return "The target is there; paste the readings, one a line, or open a file."
    if not has_target:
        return "The readings are there; type the target, the number their mean is held against."
    return ""


def units_in_words(units: str, conditions: str) -> str:
    """Return what one reading is and under which conditions, in one phrase.

    >>> units_in_words("a preparation of its own", "repeatability")
    'each a preparation of its own, repeatability conditions'
    >>> units_in_words("separate weighings", "not stated")
    'separate weighings'
    """
    what = "" if units.strip() == NOT_STATED else units.strip()
    what = f"each {what}" if what in UNITS else what
    said = "" if conditions == NOT_STATED else f"{conditions} conditions"
    return ", ".join(part for part in (what, said) if part)


def parts_set(fields: Mapping[str, Any], left_out: Sequence[str]) -> dict[str, Any]:
    """Return the parts of a question that lose their meaning when they are set after the readings were seen."""
    side_of_kind = SIDE_OF_KIND.get(fields["target_kind"])
    return {
        "alternative": "two-sided" if side_of_kind == fields["alternative"] else fields["alternative"],
        "equivalence limit": _plain(fields["limit"]),
        "difference that matters": _plain(fields["matters"]),
        "left-out readings": sorted(left_out),
    }


def set_after(first: Mapping[str, Any], now: Mapping[str, Any]) -> tuple[str, ...]:
    """Return the parts of a question that were set after a result of these readings was seen.

    Asking either way, the side that a limit itself asks for, and a limit taken away again are no choice that suits.
    """
    return tuple(part for part in first if now[part] != first[part] and now[part] not in ("", [], "two-sided"))


def in_force(fields: Mapping[str, Any]) -> str:
    """Return what the closed expander holds that takes part in the result: "In force: U 0.6 · E 2.0"; "" for nothing.

    >>> in_force({"sigma": "0.02", "limit": ""})
    'In force: σ 0.02'
    """
    named = {"certificate_value": "U", "sigma": "σ", "own_uncertainty": "own u", "limit": "E"}
    named["matters"] = "difference that matters"
    said = [f"{name} {fields[field].strip()}" for field, name in named.items() if fields.get(field, "").strip()]
    if fields.get("procedure", "rule") != "rule":
        said.append(f"procedure {fields['procedure'].replace('_', ' ')}")
    if fields.get("parameter", "mean") != "mean":
        said.append("median")
    return f"In force: {' · '.join(said)}" if said else ""


def _plain(text: str) -> str:
    """The number without its zeros, so that 5.0 and 5.00 are the same."""
    bare = text.strip().replace(",", ".")
    try:
        return str(Decimal(bare).normalize())
    except InvalidOperation:
        return bare


def _as_typed(fields: Mapping[str, Any], name: str, noun: str, sign: str) -> str:
    """The text as typed, once it is known to be one number."""
    number(fields[name], noun, name, sign)
    return str(read_number(fields[name], sign))


def _optional(fields: Mapping[str, Any], name: str, noun: str, sign: str) -> str | None:
    return _as_typed(fields, name, noun, sign) if fields[name].strip() else None


def _degrees(fields: Mapping[str, Any], name: str, sign: str) -> float:
    text = fields[name].strip()
    return float(number(text, "number of degrees of freedom", name, sign)) if text else inf


def _coverage_factor(text: str, sign: str) -> float:
    if not text.strip():
        raise QuestionComplaint(
            "The certificate's U needs its coverage factor k: type the k that the certificate states.", "certificate_k"
        )
    k = float(number(text, "coverage factor k", "certificate_k", sign))
    if k <= 0:
        raise QuestionComplaint(f"The coverage factor k is {text}; it must be more than 0.", "certificate_k")
    return k


def _historical(s_text: str, count_text: str, sign: str) -> tuple[float, float]:
    count = number(count_text, "number of earlier values m", "historical_count", sign)
    if count != count.to_integral_value() or count < 2:
        raise QuestionComplaint(
            f"The number of earlier values m is {count_text}; it must be a whole number of at least 2.",
            "historical_count",
        )
    if not s_text:
        raise QuestionComplaint(
            "A historical level from m values needs their standard deviation s too; "
            "leave both fields empty to treat the level as exact.",
            "certificate_value",
        )
    s = float(number(s_text, "standard deviation of the earlier values", "certificate_value", sign))
    return s / sqrt(float(count)), float(count) - 1
