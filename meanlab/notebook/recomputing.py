"""Whether an entry's numbers come out again, digit by digit, from its own readings and question."""

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

import meanlab
from meanlab.core.complaints import Complaint
from meanlab.core.exact_values import exact_values
from meanlab.core.plain import Facts
from meanlab.core.results import Analysis
from meanlab.notebook.entry import Entry

OF_THE_MOMENT = ("analysis.provenance.time", "analysis.provenance.versions")


@dataclass(frozen=True)
class Changed(Facts):
    """A part of the analysis that no longer comes out as it was kept; ``kept`` and ``now`` as text."""

    part: str
    kept: str
    now: str


def recompute(entry: Entry) -> list[Changed]:
    """Analyse the kept readings with the kept question and return every part that differs; empty where all is the same.

    Time and versions of the computation are no part of the comparison.
    """
    try:
        now: Analysis = meanlab.analyse(entry.analysis.readings, entry.analysis.question)
    except Complaint as complaint:
        return [Changed("analysis", entry.analysis.conclusion, str(complaint))]
    return list(_differences("analysis", exact_values(entry.analysis), exact_values(now)))


def _differences(part: str, kept: Any, now: Any) -> Iterator[Changed]:
    if part in OF_THE_MOMENT:
        return
    if isinstance(kept, dict) and isinstance(now, dict):
        for name in dict.fromkeys((*kept, *now)):
            yield from _differences(f"{part}.{name}", kept.get(name), now.get(name))
    elif isinstance(kept, list) and isinstance(now, list) and len(kept) == len(now):
        for place, (before, after) in enumerate(zip(kept, now, strict=True), 1):
            yield from _differences(f"{part}.{_name(before) or place}", before, after)
    elif kept != now or type(kept) is not type(now):
        yield Changed(part, _shown(kept), _shown(now))


def _name(value: Any) -> str:
    """How a member of a list is called, where it has a name."""
    if isinstance(value, dict):
        return str(value.get("name") or value.get("procedure") or value.get("label") or "")
    if isinstance(value, list) and len(value) == 2 and isinstance(value[0], str):
        return value[0]
    return ""


def _shown(value: Any) -> str:
    return "none" if value is None else str(value)
