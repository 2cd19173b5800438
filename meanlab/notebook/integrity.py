"""Whether the notebook is as it was saved: every content against its digest, every digest against the next entry."""

from collections.abc import Iterator
from typing import Any

from sqlalchemy import Connection, Select, func, select, text

from meanlab.notebook.entry import digest_of, values_of
from meanlab.notebook.listing import line_values
from meanlab.notebook.place import FAILURES
from meanlab.notebook.schema import ENTRY, ENTRY_CONTENT, LAST_ENTRY

PIECE = 100
_SEALED_ROW = select(*ENTRY.c, ENTRY_CONTENT.c.content).join(
    ENTRY_CONTENT, ENTRY_CONTENT.c.number == ENTRY.c.number, isouter=True
)


def problems(connection: Connection) -> list[str]:
    """Return a sentence for each thing that is not as it was saved, with its place; empty where all is whole."""
    found: list[str] = []
    try:
        found += _of_the_file(connection)
        found += _of_the_chain(connection)
        found += _contents_alone(connection)
    except FAILURES:
        found.append("The database is damaged: not every entry can be read. Go back to a copy of it.")
    return found


def _of_the_chain(connection: Connection) -> Iterator[str]:
    number = 0
    digest: str | None = ""
    for row in _rows(connection):
        if isinstance(row, int):
            yield f"Entry {row}: its line in the list cannot be read any more."
            number, digest = row, None
            continue
        yield from _missing(number, row["number"])
        if row["number"] != number + 1:
            digest = None
        yield from _of_an_entry(row, digest)
        number, digest = row["number"], row["digest"]
    yield from _of_the_end(connection, number, digest)


def _of_the_file(connection: Connection) -> Iterator[str]:
    if connection.dialect.name == "sqlite":
        for row in connection.execute(text("PRAGMA quick_check")):
            if row[0] != "ok":
                yield f"The file of the notebook is damaged ({row[0]})."


def _rows(connection: Connection) -> Iterator[Any]:
    """The entries in order with their contents; for one whose line cannot be read, its number."""
    after: int | None = None
    while True:
        query = _SEALED_ROW.order_by(ENTRY.c.number).limit(PIECE)
        numbers = select(ENTRY.c.number).order_by(ENTRY.c.number).limit(PIECE)
        if after is not None:
            query, numbers = query.where(ENTRY.c.number > after), numbers.where(ENTRY.c.number > after)
        known = list(connection.execute(numbers).scalars())
        if not known:
            return
        yield from _piece(connection, query, known)
        after = known[-1]


def _piece(connection: Connection, query: Select[Any], known: list[int]) -> Iterator[Any]:
    try:
        rows = list(connection.execute(query).mappings())
    except FAILURES:  # a text that is no text any more: find which
        if len(known) == 1:
            yield known[0]
            return
        for number in known:
            yield from _piece(connection, _SEALED_ROW.where(ENTRY.c.number == number), [number])
        return
    yield from rows


def _missing(before: int, number: int) -> list[str]:
    first, last = before + 1, number - 1
    if last < first:
        return []
    return [f"Entry {first} is missing." if first == last else f"Entries {first} to {last} are missing."]


def _of_an_entry(row: Any, before: str | None) -> list[str]:
    """What is wrong with one entry; ``before`` is the digest of the one before, None where that one is not known."""
    where, content = f"Entry {row['number']}", row["content"]
    if content is None:
        return [f"{where}: its content is missing."]
    if not isinstance(content, bytes) or digest_of(content) != row["digest"]:  # SQLite keeps a text in any column
        return [f"{where}: its content is not what was saved."]
    try:
        values = values_of(content)
        line = line_values(values, row["digest"])
        previous = values["previous"]
    except (ValueError, KeyError, TypeError, AttributeError):
        return [f"{where}: its content cannot be read any more."]
    found = []
    if before is not None and previous != before:
        found.append(f"{where} does not follow the entry before it: one of the two was changed, moved or put in.")
    changed = [name for name, value in line.items() if row[name] != value]
    if changed:
        found.append(f"{where}: its line in the list is not what was saved ({', '.join(changed)}).")
    return found


def _of_the_end(connection: Connection, number: int, digest: str | None) -> list[str]:
    ends = list(connection.execute(select(LAST_ENTRY.c.number, LAST_ENTRY.c.digest)))
    if len(ends) != 1:
        return ["The end of the notebook is not marked any more."]
    marked = ends[0]
    if marked.number > number:
        return _missing(number, marked.number + 1)
    if marked.number < number:
        return [f"The notebook was closed with entry {marked.number}, but goes on to entry {number}."]
    if digest is not None and marked.digest != digest:
        return [f"Entry {number}: it is not the one that the notebook was closed with."]
    return []


def _contents_alone(connection: Connection) -> list[str]:
    alone = select(func.count()).select_from(ENTRY_CONTENT).where(ENTRY_CONTENT.c.number.not_in(select(ENTRY.c.number)))
    count = connection.execute(alone).scalar_one()
    return [f"There are contents without an entry in the list ({count})."] if count else []
