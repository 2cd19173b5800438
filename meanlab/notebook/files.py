"""The notebook as one file: the record file (JSON, one entry a line), and the copy as a database."""

import os
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path
from typing import Any

from sqlalchemy import Connection, insert, select, update
from sqlalchemy.exc import SQLAlchemyError

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.exact_values import canonical
from meanlab.core.record_file import KIND, parts_of, record_file
from meanlab.notebook.entry import entry_of_result, values_of
from meanlab.notebook.listing import line_values
from meanlab.notebook.place import open_engine, writing
from meanlab.notebook.schema import BENCH_DEFAULT, ENTRY, ENTRY_CONTENT, LAST_ENTRY, prepare

PIECE = 100
LARGEST_NUMBER = 2**31


def file_of(connection: Connection) -> bytes:
    """Return all entries as a record file.

    Raises NotebookComplaint, naming the entry, where a content is no longer one.
    """
    entries = []
    for row in _rows(connection):
        try:
            entries.append({"digest": row["digest"], "content": values_of(row["content"])})
        except (ValueError, AttributeError) as problem:
            raise NotebookComplaint(
                f"Entry {row['number']} cannot be written: its content is damaged. Verify the notebook."
            ) from problem
    last = connection.execute(select(LAST_ENTRY.c.number, LAST_ENTRY.c.digest)).mappings().one_or_none()
    return record_file("notebook", {"entries": entries, "last": None if last is None else dict(last)})


def save(path: Path, content: bytes) -> Path:
    """Write a record file, whole or not at all, in place of nothing but an earlier state of the same notebook."""
    if path.exists():
        before, after = _digests(path.read_bytes()), _digests(content)
        if before is None or after is None or after[: len(before)] != before:
            raise NotebookComplaint(f"There is another file at {path}: name one that is not there yet.")
    part = path.with_name(f".{path.name}.{os.getpid()}.part")
    try:
        with part.open("wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        part.replace(path)
    finally:
        part.unlink(missing_ok=True)
    return path


def entries_of_file(content: bytes) -> tuple[Sequence[Mapping[str, Any]], Mapping[str, Any]]:
    """Return the entries of a record file, each with digest and content, and the mark of the last one.

    A single result is a notebook of one entry.
    """
    parts = parts_of(content)
    if parts[KIND] == "result":
        sealed = entry_of_result(parts)
        digest = sealed.entry.digest
        return [{"digest": digest, "content": sealed.values}], {"number": 1, "digest": digest}
    entries, last = parts.get("entries"), parts.get("last")
    if not isinstance(entries, list) or not isinstance(last, dict):
        raise NotebookComplaint("This record file holds no notebook.")
    return entries, last


def fill(connection: Connection, entries: Sequence[Mapping[str, Any]], last: Mapping[str, Any]) -> None:
    """Put the entries of a record file into an empty notebook as they stand there, whole or not.

    Raises NotebookComplaint, naming the entry, for one that is none.
    """
    number = 0
    for place, entry in enumerate(entries, 1):
        try:
            values, digest = entry["content"], str(entry["digest"])
            number = values["number"] if number < _whole(values["number"]) < LARGEST_NUMBER else number + 1
            connection.execute(insert(ENTRY).values(line_values(values, digest) | {"number": number}))
            connection.execute(insert(ENTRY_CONTENT).values(number=number, content=canonical(values)))
        except (KeyError, TypeError, AttributeError, SQLAlchemyError) as problem:
            raise NotebookComplaint(
                f"Entry {place} of this record file cannot be read, or stands there twice. Go back to an earlier copy."
            ) from problem
    end = {"number": _whole(last.get("number")), "digest": str(last.get("digest"))}
    connection.execute(update(LAST_ENTRY).values(end))


def copy(connection: Connection, path: Path) -> Path:
    """Copy entries and bench defaults into a new SQLite file that is there whole or not at all."""
    if path.exists():
        raise NotebookComplaint(f"There is a file already at {path}: name one that is not there yet.")
    part = path.with_name(f".{path.name}.{os.getpid()}.part")
    engine = open_engine(f"sqlite:///{part}")
    try:
        prepare(engine)
        with writing(engine) as target:
            for row in _rows(connection):
                line = {column.name: row[column.name] for column in ENTRY.c}
                target.execute(insert(ENTRY).values(line))
                target.execute(insert(ENTRY_CONTENT).values(number=row["number"], content=row["content"]))
            for last in connection.execute(select(LAST_ENTRY)).mappings():
                target.execute(update(LAST_ENTRY).values(dict(last)))
            for kept in connection.execute(select(BENCH_DEFAULT)).mappings():
                target.execute(insert(BENCH_DEFAULT).values(dict(kept)))
        engine.dispose()
        part.replace(path)
    finally:
        engine.dispose()
        for left in (part, part.with_name(part.name + "-wal"), part.with_name(part.name + "-shm")):
            left.unlink(missing_ok=True)
    return path


def _rows(connection: Connection) -> Iterator[Any]:
    """The entries in order with their contents, piece by piece."""
    query = select(*ENTRY.c, ENTRY_CONTENT.c.content).join(ENTRY_CONTENT, ENTRY_CONTENT.c.number == ENTRY.c.number)
    after: int | None = None
    while True:
        piece = query if after is None else query.where(ENTRY.c.number > after)
        rows = list(connection.execute(piece.order_by(ENTRY.c.number).limit(PIECE)).mappings())
        yield from rows
        if len(rows) < PIECE:
            return
        after = rows[-1]["number"]


def _whole(number: Any) -> int:
    return number if type(number) is int and abs(number) < LARGEST_NUMBER else 0


def _digests(content: bytes) -> list[Any] | None:
    try:
        return [entry["digest"] for entry in entries_of_file(content)[0]]
    except (NotebookComplaint, KeyError, TypeError):
        return None
