"""The notebook: entries in order, each sealed with the digest of the one before; none is ever changed or removed."""

import secrets
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from datetime import UTC, datetime
from pathlib import Path
from typing import Any

from sqlalchemy import Connection, RowMapping, Select, insert, select, update
from sqlalchemy.exc import SQLAlchemyError

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.results import Analysis
from meanlab.core.source import Source, entries_of
from meanlab.notebook.database import Database
from meanlab.notebook.defaults import bench_defaults, remember
from meanlab.notebook.entry import Entry, Listed, entry_from
from meanlab.notebook.files import copy, entries_of_file, file_of, fill, save
from meanlab.notebook.integrity import problems
from meanlab.notebook.listing import EntryList, extent_of, line_values, listed, matching
from meanlab.notebook.schema import ENTRY, ENTRY_CONTENT, LAST_ENTRY

KEY_BYTES = 24


class Notebook(Database):
    """The entries of one person or bench, in one database; any SQLAlchemy URL, by default MEANLAB_DATABASE_URL.

    Every method raises NotebookComplaint, with a sentence, where the database cannot be read or written.
    """

    _file = ""

    def add(
        self,
        analysis: Analysis,
        title: str = "",
        by: str = "",
        note: str = "",
        source: Source | None = None,
        *,
        instrument: str = "",
        method: str = "",
        set_times: Mapping[str, str] | None = None,
        zone: str = "",
    ) -> Entry:
        """Save an analysis as a new entry and return it once it is on the disk.

        ``source`` says where the readings came from (by default the readings as typed), ``set_times`` when each part of
        the question was set (UTC, ISO 8601), ``zone`` is the time zone of the bench (by default this computer's).
        """
        written = {"title": title, "by": by, "note": note, "instrument": instrument, "method": method}
        return self._append(analysis, written, source, set_times, zone)

    def amend(
        self,
        key: str,
        analysis: Analysis,
        reason: str,
        *,
        title: str | None = None,
        by: str = "",
        note: str = "",
        source: Source | None = None,
        instrument: str | None = None,
        method: str | None = None,
        set_times: Mapping[str, str] | None = None,
        zone: str = "",
    ) -> Entry:
        """Save an analysis as a new entry that names the one it amends and why; the amended one stays as it is.

        Title, instrument and method are those of the amended entry unless they are given.
        Raises NotebookComplaint for an entry that is not there or a reason that is not written.
        """
        if not reason.strip():
            raise NotebookComplaint("An amendment needs its reason: write why the entry is amended.", "reason")
        before = self.entry(key)
        written: dict[str, Any] = {
            "title": before.title if title is None else title,
            "by": by,
            "note": note,
            "instrument": before.instrument if instrument is None else instrument,
            "method": before.method if method is None else method,
            "amends": before.key,
            "amends_number": before.number,
            "reason": reason.strip(),
        }
        return self._append(analysis, written, source, set_times, zone)

    def entries(self) -> EntryList:
        """Return the list of entries, the oldest first; its lines are read when they are asked for."""
        with self._reading() as connection:
            length, last = extent_of(connection)
        return EntryList(self._ask, length, last)

    def search(self, text: str, latest: int | None = None) -> list[Listed]:
        """Return the entries in whose title, names, note, material, sentence, … every word of a text is found.

        They stand in order, the oldest first; with ``latest`` at most so many, the last ones.
        """
        query = matching(text)
        if latest is None:
            return [listed(row) for row in self._ask(query)]
        last = query.order_by(None).order_by(ENTRY.c.number.desc()).limit(latest)
        return [listed(row) for row in reversed(self._ask(last))]

    def entry(self, key: str) -> Entry:
        """Return the entry of a key; raises NotebookComplaint where there is none or it cannot be read."""
        query = (
            select(ENTRY.c.digest, ENTRY_CONTENT.c.content)
            .join(ENTRY_CONTENT, ENTRY_CONTENT.c.number == ENTRY.c.number)
            .where(ENTRY.c.key == key)
        )
        with self._reading() as connection:
            row = connection.execute(query).one_or_none()
        if row is None:
            raise NotebookComplaint(f"There is no such entry in the notebook at {self.where}.", "key")
        return entry_from(row.content, row.digest)

    def verify(self) -> list[str]:
        """Return what is not as it was saved, each with its place; an empty list where the notebook is whole.

        Found is every changed, removed, added or swapped entry: each carries the digest of the one before, and the end
        is marked. Who can write to the database could seal everything anew; against that, keep a copy elsewhere.
        """
        with self._reading() as connection:
            return problems(connection)

    def exported(self) -> bytes:
        """Return all entries as a record file (JSON, UTF-8); the same entries give the same bytes."""
        with self._reading() as connection:
            return file_of(connection)

    def save_as(self, path: str | Path) -> Path:
        """Save all entries as a record file ("bench.meanlab.json").

        A file that is there already is replaced only where it is an earlier state of this notebook.
        """
        content = self.exported()
        with _said_plainly_at(path):
            return save(Path(path), content)

    @classmethod
    def open_file(cls, path: str | Path) -> "Notebook":
        """Open a record file as a notebook in memory; what is added to it is kept by `save_as`.

        Raises NotebookComplaint for a file that is none or was written by a newer meanlab.
        """
        with _said_plainly_at(path):
            content = Path(path).read_bytes()
        return cls.from_file(content, str(path))

    @classmethod
    def from_file(cls, content: bytes, where: str = "the opened file") -> "Notebook":
        """Return the notebook of a record file's bytes, in memory; of a single result, a notebook with one entry."""
        entries, last = entries_of_file(content)
        book = cls("sqlite://")
        book._file = where
        with book._writing() as connection:
            fill(connection, entries, last)
        return book

    def back_up(self, path: str | Path) -> Path:
        """Copy the notebook, entries and bench defaults, into a new SQLite file that is there whole or not at all."""
        with self._reading() as connection, _said_plainly_at(path):
            return copy(connection, Path(path))

    def bench_defaults(self) -> dict[str, str]:
        """Return what the bench sets the same way each time: unit, significance, by, instrument, method."""
        with self._reading() as connection:
            return bench_defaults(connection)

    def remember(self, **given: str) -> None:
        """Keep bench defaults by name in place of those before."""
        with self._writing() as connection:
            remember(connection, given)

    @property
    def where(self) -> str:
        """Where the notebook lies, for the technician to read."""
        return self._file or self.place

    def _append(
        self,
        analysis: Analysis,
        written: Mapping[str, Any],
        source: Source | None,
        set_times: Mapping[str, str] | None,
        zone: str,
    ) -> Entry:
        """Number, chain and seal an entry while no other can write, so that two at once stand one after the other."""
        with self._writing() as connection:
            number, digest = last_of(connection)
            sealed = Entry(
                number=number + 1,
                key=secrets.token_urlsafe(KEY_BYTES),
                time=datetime.now(UTC).isoformat(timespec="microseconds"),
                zone=zone or zone_of_this_computer(),
                source=source or Source(entries=entries_of(analysis.readings)),
                analysis=analysis,
                previous=digest,
                set_times=dict(set_times or {}),
                **{"amends": "", "reason": "", **written},
            ).sealed()
            entry = sealed.entry
            put(connection, line_values(sealed.values, entry.digest), sealed.content)
            move_end(connection, entry.number, entry.digest)
        return entry

    def _ask(self, query: Select[Any]) -> list[RowMapping]:
        with self._reading() as connection:
            return list(connection.execute(query).mappings())


def last_of(connection: Connection) -> tuple[int, str]:
    """Return number and digest of the last entry; other writers wait until this transaction ends."""
    row = connection.execute(select(LAST_ENTRY.c.number, LAST_ENTRY.c.digest).with_for_update()).one_or_none()
    if row is None:
        raise NotebookComplaint("The end of the notebook is not marked any more: verify it, and go back to a copy.")
    return row.number, row.digest


def put(connection: Connection, line: Mapping[str, Any], content: bytes) -> None:
    """Write one entry: its line in the list and its content."""
    connection.execute(insert(ENTRY).values(**line))
    connection.execute(insert(ENTRY_CONTENT).values(number=line["number"], content=content))


def move_end(connection: Connection, number: int, digest: str) -> None:
    """Mark the last entry."""
    connection.execute(update(LAST_ENTRY).values(number=number, digest=digest))


def zone_of_this_computer() -> str:
    """Return the time zone of this computer: "UTC+01:00 (CET)"."""
    now = datetime.now().astimezone()
    return f"UTC{now.isoformat(timespec='seconds')[19:]} ({now.tzname()})"


@contextmanager
def _said_plainly_at(path: str | Path) -> Iterator[None]:
    try:
        yield
    except (OSError, SQLAlchemyError) as problem:
        reason = getattr(problem, "strerror", None) or getattr(problem, "orig", None) or problem
        raise NotebookComplaint(f"The file {path} cannot be used ({reason}). Name another place.") from problem
