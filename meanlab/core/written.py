"""What the technician wrote about a result, and under which number the notebook keeps it."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from meanlab.core.plain import Facts


@dataclass(frozen=True)
class Written(Facts):
    """What stands on a record beside the result; "" and None where there is nothing.

    title, by, note, instrument, method   as the technician wrote them
    set_times    {part of the question: when it was set, UTC (ISO 8601)}
    number, time, zone, digest   of the saved entry: its place in the notebook, when (UTC, ISO 8601), where, its digest
    amends_number, reason        number of the entry that it amends, and why
    """

    title: str = ""
    by: str = ""
    note: str = ""
    instrument: str = ""
    method: str = ""
    set_times: Mapping[str, str] = field(default_factory=dict)
    number: int | None = None
    time: str = ""
    zone: str = ""
    digest: str = ""
    amends_number: int | None = None
    reason: str = ""
