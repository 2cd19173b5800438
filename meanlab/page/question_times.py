"""When each part of the question was set: noted as it changes, and kept with the entry."""

from collections.abc import Mapping
from types import MappingProxyType
from typing import Any

from meanlab.page.fields import FIELDS

READINGS, LEFT_OUT = "readings", "left-out readings"
PARTS: Mapping[str, str] = MappingProxyType(
    {
        READINGS: READINGS,
        LEFT_OUT: LEFT_OUT,
        "target": "target",
        "unit": "unit",
        "target_kind": "kind of target",
        "significance": "significance level α",
        "alternative": "alternative hypothesis",
        "quantity": "quantity",
        "material": "material",
        "units_are": "what one reading is",
        "conditions": "conditions",
        "run_order": "order of measurement",
        "certificate_value": "uncertainty of the target",
        "certificate_meaning": "meaning of that uncertainty",
        "certificate_k": "coverage factor k",
        "certificate_df": "degrees of freedom of that uncertainty",
        "historical_count": "number of earlier values m",
        "own_uncertainty": "laboratory's own standard uncertainty",
        "sigma": "known σ",
        "sigma_origin": "origin of σ",
        "sigma_df": "degrees of freedom of σ",
        "limit": "equivalence limit E",
        "matters": "difference that matters",
        "procedure": "procedure",
        "parameter": "parameter",
        "resolution": "resolution",
        "fixed_before": "statement that side and limits were fixed before",
    }
)
IN_EVERY_QUESTION = ("target_kind", "significance", "alternative", "procedure", "parameter")


def parts_of(fields: Mapping[str, Any], file: Mapping[str, str] | None, left_out: Mapping[str, Any]) -> dict[str, Any]:
    """Return what stands in each part whose time is noted."""
    parts = {name: fields[name] for name in PARTS if name in fields}
    parts[READINGS] = fields["readings_text"] if file is None else ("file", file["digest"])
    parts[LEFT_OUT] = sorted((place, said["text"], said["cause"]) for place, said in left_out.items())
    return parts


def noted(times: Mapping[str, str], before: Mapping[str, Any], now: Mapping[str, Any], moment: str) -> dict[str, str]:
    """Return the times after a change: a part that is not what it was before was set at this moment.

    A part that was taken away has no time; neither has a default that was never touched.

    >>> noted({}, {}, {"target": "5.00", "alternative": "two-sided"}, "2026-12-01T09:30:00+00:00")
    {'target': '2026-12-01T09:30:00+00:00'}
    """
    found = dict(times)
    for name, value in now.items():
        if value == before.get(name, _default(name)):
            continue
        if value == _default(name) and name not in IN_EVERY_QUESTION:
            found.pop(name, None)
        else:
            found[name] = moment
    return found


def in_words(times: Mapping[str, str]) -> dict[str, str]:
    """Return the times by the words for the parts, in the order of the page."""
    return {words: times[name] for name, words in PARTS.items() if name in times}


def from_words(times: Mapping[str, str]) -> dict[str, str]:
    """Return the times of an entry by the names of the fields; those of unknown parts are left aside."""
    return {name: times[words] for name, words in PARTS.items() if words in times}


def _default(name: str) -> Any:
    return {READINGS: "", LEFT_OUT: []}.get(name, FIELDS.get(name))
