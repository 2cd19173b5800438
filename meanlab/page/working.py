"""One visitor's page as facts: the fields, the file, what was left out, what can be put back, and how they changed."""

from collections.abc import Mapping
from copy import deepcopy
from dataclasses import dataclass, field
from datetime import datetime
from typing import Any

from meanlab.notebook import Kept
from meanlab.page import question_times
from meanlab.page.fields import FIELDS, READINGS_FIELDS, STAYING


@dataclass
class Working:
    """One visitor's page: the value of every field, and what has no field of its own.

    file      name and digest of the file in use, None where the readings are typed
    left_out  {place of the entry: {"text": as typed, "cause": why}}
    previous  what a clear, a replace or an opened sample set took away, None where nothing was
    first     the parts of the question as they stood when these readings first had a result
    looks     how many results these readings had while they grew
    set_times when each part of the question was set (UTC, ISO 8601)
    looked_at what stood in each of these parts when the page was last looked at
    entry     number, key, time and fingerprint of the entry as which the result was saved, None where it was not
    drawn     keys of the widgets that the last run drew, None where it did not come to its end
    begun     the fields as the page began
    last_unit the unit of the last entry, shown in grey: the heading of the readings goes before it
    """

    fields: dict[str, Any]
    file: dict[str, str] | None = None
    left_out: dict[str, dict[str, str]] = field(default_factory=dict)
    previous: dict[str, Any] | None = None
    first: dict[str, Any] | None = None
    looks: int = 1
    set_times: dict[str, str] = field(default_factory=dict)
    looked_at: dict[str, Any] = field(default_factory=dict)
    entry: dict[str, Any] | None = None
    drawn: frozenset[str] | None = None
    begun: dict[str, Any] = field(default_factory=dict)
    last_unit: str = ""
    key: str = ""
    saved: datetime | None = None
    trouble: str = ""
    notice: str = ""
    last_kept: str = ""

    @property
    def first_parts(self) -> Mapping[str, Any]:
        """The parts of the question at the first result of these readings."""
        return {} if self.first is None else self.first["parts"]


@dataclass(frozen=True)
class Reopened:
    """What the page shows of an entry that is opened again.

    fields       readings and question, by the names of the fields
    file         name and bytes where the readings came from a file that is still at hand
    left_out     {place of the entry: {"text": as typed, "cause": why}}
    entries      the text of every entry that is read
    first_parts  the parts of the question at the first result; those set afterwards stay set afterwards
    notice       what the technician should know; "" for nothing
    """

    fields: Mapping[str, Any]
    file: tuple[str, bytes] | None
    left_out: Mapping[str, Mapping[str, str]]
    entries: tuple[str, ...]
    first_parts: Mapping[str, Any] = field(default_factory=dict)
    notice: str = ""


def empty(bench: Mapping[str, str] | None = None, last_unit: str = "") -> Working:
    """Return a page on which nothing was typed; ``bench`` holds fields that begin otherwise than by default."""
    fields = deepcopy(dict(FIELDS)) | dict(bench or {})
    return Working(fields=fields, begun=deepcopy(fields), last_unit=last_unit)


def note_times(now: Working, moment: datetime) -> None:
    """Note when each part of the question was set."""
    parts = question_times.parts_of(now.fields, now.file, now.left_out)
    now.set_times = question_times.noted(now.set_times, now.looked_at, parts, moment.isoformat(timespec="seconds"))
    now.looked_at = parts


def times_stand(now: Working, times: Mapping[str, str]) -> None:
    """Take the times of parts that were brought back, not set anew."""
    now.set_times = dict(times)
    now.looked_at = question_times.parts_of(now.fields, now.file, now.left_out)


def as_kept(now: Working) -> dict[str, Any]:
    """Return what is kept of a page."""
    return {
        "fields": now.fields,
        "file": now.file,
        "left_out": now.left_out,
        "previous": now.previous,
        "first": now.first,
        "looks": now.looks,
        "set_times": now.set_times,
        "entry": now.entry,
    }


def bring_back(now: Working, kept: Kept) -> None:
    """Bring back what was kept of a page; an earlier version kept less."""
    now.fields |= {name: given for name, given in kept.state["fields"].items() if name in FIELDS}
    now.file, now.left_out = kept.state["file"], kept.state["left_out"]
    now.previous = kept.state["previous"]
    now.first, now.looks = kept.state.get("first"), kept.state.get("looks", 1)
    now.entry, now.saved = kept.state.get("entry"), kept.saved
    if "set_times" in kept.state:
        times_stand(now, kept.state["set_times"])
    else:
        note_times(now, kept.saved)


def snapshot(now: Working, cause: str, with_question: bool) -> dict[str, Any]:
    """Return what can be put back of a page: its readings, and its question where that is taken away too."""
    names = [name for name in FIELDS if name not in STAYING] if with_question else READINGS_FIELDS
    return {
        "cause": cause,
        "with_question": with_question,
        "fields": {name: deepcopy(now.fields[name]) for name in names},
        "file": now.file,
        "left_out": dict(now.left_out),
        "first": now.first,
        "looks": now.looks,
        "set_times": dict(now.set_times),
    }


def nothing_typed(now: Working) -> bool:
    """Tell whether a page is as it was when it was opened."""
    return now.fields == now.begun and now.file is None and now.previous is None


def digests(now: Working) -> tuple[str, ...]:
    """Return the digests of the files a page still needs: the one in use, and the one that can be put back."""
    files = (now.file, (now.previous or {}).get("file"))
    return tuple(file["digest"] for file in files if file)


def replaced(before: str, given: str) -> bool:
    """Tell whether a text is another set of readings: it holds fewer than half of the old lines, so is no correction.

    >>> replaced("5.02 5.03 5.04", "5.02 5.30 5.04"), replaced("5.02 5.03 5.04", "7.1 7.2 7.3")
    (False, True)
    """
    old, new = before.split(), set(given.split())
    return bool(old) and sum(word in new for word in old) < len(old) / 2


def alike(before: list[str], entries: list[str]) -> bool:
    """Tell whether at least half of the entries before are still among the entries now."""
    known = set(before)
    return sum(entry in known for entry in entries) >= len(before) / 2
