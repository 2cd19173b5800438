"""An entry of the notebook as frozen facts, the one text its digest is taken of, and the way back from it."""

from collections.abc import Mapping
from dataclasses import dataclass, field, fields, replace
from hashlib import sha256
from typing import Any

from meanlab.core.complaints import Complaint, NotebookComplaint
from meanlab.core.exact_values import canonical, exact_values, rebuilt
from meanlab.core.plain import Facts
from meanlab.core.record_file import strict_json
from meanlab.core.results import Analysis
from meanlab.core.source import Source
from meanlab.core.written import Written

FORMAT = 1


@dataclass(frozen=True)
class Entry(Facts):
    """One question with its readings and its result, as it was saved; it never changes.

    number      its place in the notebook, from 1
    key         the name by which it is opened; nobody can guess it
    time, zone  when it was saved: UTC (ISO 8601), and the time zone of the bench
    title, by, note, instrument, method   what the technician wrote about it
    amends, amends_number   key and number of the entry that it amends, "" and None for none; ``reason`` says why
    source      where the readings came from, as typed
    set_times   {part of the question: when it was set, UTC (ISO 8601)}
    analysis    everything that was found, with readings, question, versions and fingerprint
    previous    digest of the entry before, "" for the first
    digest      SHA-256 (hexadecimal) of all of this but itself
    """

    number: int
    key: str
    time: str
    zone: str
    title: str
    by: str
    note: str
    instrument: str
    method: str
    amends: str
    reason: str
    source: Source
    analysis: Analysis
    previous: str
    set_times: Mapping[str, str] = field(default_factory=dict)
    amends_number: int | None = None
    digest: str = ""

    @property
    def written(self) -> Written:
        """What stands on a record of this entry beside the result."""
        return Written(**{one.name: getattr(self, one.name) for one in fields(Written)})

    @property
    def content(self) -> bytes:
        """The canonical JSON (UTF-8) that the digest is taken of."""
        return canonical(self.to_exact())

    def to_exact(self) -> dict[str, Any]:
        """Return everything but the digest as JSON values that lose nothing."""
        values = exact_values(self)
        del values["digest"]
        return {"format": FORMAT, **values}

    def sealed(self) -> "Sealed":
        """Return this entry with its digest, its exact values and its content.

        Raises NotebookComplaint for a text that cannot be written as UTF-8.
        """
        values = self.to_exact()
        try:
            content = canonical(values)
            return Sealed(replace(self, digest=digest_of(content)), values, content)
        except UnicodeEncodeError as problem:
            raise NotebookComplaint(
                f"The entry holds a character that cannot be kept ({problem.object[problem.start]!r}): take it out."
            ) from problem


@dataclass(frozen=True)
class Sealed:
    """An entry with its digest, as exact values, and as the content that the digest is taken of."""

    entry: Entry
    values: Mapping[str, Any]
    content: bytes


@dataclass(frozen=True)
class Listed(Facts):
    """One line of the list of entries.

    ``amends`` is the number of the entry that it amends, ``amended_by`` the number of the latest entry that amends it;
    None for none. ``time`` is UTC (ISO 8601).
    """

    number: int
    key: str
    time: str
    title: str
    material: str
    verdict: str
    sentence: str
    amends: int | None = None
    amended_by: int | None = None


def digest_of(content: bytes) -> str:
    """Return the SHA-256 of what an entry holds, in hexadecimal."""
    return sha256(content).hexdigest()


def entry_from(content: bytes, digest: str) -> Entry:
    """Return the entry that a content holds; raises NotebookComplaint where it holds none that can be read."""
    try:
        values = values_of(content)
        known = values.get("format")
        if type(known) is int and known > FORMAT:
            raise NotebookComplaint(
                f"This entry was written by a newer meanlab (format {known}; this one knows {FORMAT}). "
                "Open it with the newer one."
            )
        return replace(rebuilt(Entry, values), digest=digest)
    except NotebookComplaint:
        raise
    except (ValueError, TypeError, AttributeError, Complaint) as problem:
        raise NotebookComplaint(
            f"The content of this entry cannot be read ({problem}). Verify the notebook, and go back to a copy of it."
        ) from problem


def entry_of_result(parts: Mapping[str, Any]) -> Sealed:
    """Return the parts of a single result's record file as the first entry of a notebook.

    It stands there with the time at which it was computed. Raises NotebookComplaint where the parts cannot be read.
    """
    try:
        analysis = rebuilt(Analysis, parts["analysis"])
        written = rebuilt(Written, parts["written"])
        entry = Entry(
            number=1,
            key=analysis.provenance.fingerprint[:32],
            time=analysis.provenance.time,
            zone="UTC",
            title=written.title,
            by=written.by,
            note=written.note,
            instrument=written.instrument,
            method=written.method,
            amends="",
            reason="",
            source=rebuilt(Source, parts["source"]),
            analysis=analysis,
            previous="",
            set_times=written.set_times,
        )
    except (KeyError, ValueError, TypeError) as problem:
        raise NotebookComplaint(f"The result in this record file cannot be read ({problem}).") from problem
    return entry.sealed()


def values_of(content: bytes) -> dict[str, Any]:
    """Return the JSON values of a content; raises ValueError where it is no JSON object, or says a thing twice."""
    values = strict_json(content.decode("utf-8"))
    if not isinstance(values, dict):
        raise ValueError("it is not a set of named values")
    return values
