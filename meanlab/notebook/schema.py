"""The tables of the notebook's database, the version of their layout, and how an older layout becomes this one."""

import sqlite3
from contextlib import closing
from pathlib import Path

from sqlalchemy import (
    DDL,
    Column,
    Connection,
    Engine,
    Integer,
    LargeBinary,
    MetaData,
    String,
    Table,
    Text,
    event,
    insert,
    inspect,
    select,
    update,
)

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook.place import writing

VERSION = 2
LONG_TEXT = Text(length=2**24)
BYTES = LargeBinary(length=2**30)

METADATA = MetaData()
LAYOUT = Table("meanlab_layout", METADATA, Column("version", Integer, primary_key=True, autoincrement=False))
WORKING_STATE = Table(
    "working_state",
    METADATA,
    Column("notebook", String(64), primary_key=True),
    Column("saved", String(40), nullable=False, index=True),  # UTC, ISO 8601
    Column("state", LONG_TEXT, nullable=False),  # JSON
)
WORKING_FILE = Table(
    "working_file",
    METADATA,
    Column("notebook", String(64), primary_key=True),
    Column("digest", String(64), primary_key=True),  # SHA-256 of the content
    Column("content", BYTES, nullable=False),
)
# What the list of entries shows stands apart from what an entry holds, so that a long list opens without reading it.
ENTRY = Table(
    "entry",
    METADATA,
    Column("number", Integer, primary_key=True, autoincrement=False),
    Column("key", String(64), nullable=False, unique=True),
    Column("time", String(40), nullable=False),  # UTC, ISO 8601
    Column("title", LONG_TEXT, nullable=False),
    Column("material", LONG_TEXT, nullable=False),
    Column("verdict", String(40), nullable=False),
    Column("sentence", LONG_TEXT, nullable=False),
    Column("amends", String(64), nullable=False, index=True),  # key of the entry it amends, "" for none
    Column("words", LONG_TEXT, nullable=False),  # what a search looks through
    Column("fingerprint", String(64), nullable=False),  # of readings and question
    Column("digest", String(64), nullable=False),  # SHA-256 of the content
)
ENTRY_CONTENT = Table(
    "entry_content",
    METADATA,
    Column("number", Integer, primary_key=True, autoincrement=False),
    Column("content", BYTES, nullable=False),  # canonical JSON, UTF-8
)
# The end of the chain: without it the last entries could be taken away unseen.
LAST_ENTRY = Table(
    "last_entry",
    METADATA,
    Column("place", Integer, primary_key=True, autoincrement=False),  # always 1
    Column("number", Integer, nullable=False),
    Column("digest", String(64), nullable=False),
)
BENCH_DEFAULT = Table(
    "bench_default",
    METADATA,
    Column("name", String(40), primary_key=True),
    Column("value", LONG_TEXT, nullable=False),
)

for _table in (ENTRY, ENTRY_CONTENT):
    for _act in ("UPDATE", "DELETE"):
        event.listen(
            _table,
            "after_create",
            DDL(
                f"CREATE TRIGGER {_table.name}_no_{_act.lower()} BEFORE {_act} ON {_table.name} "
                "BEGIN SELECT RAISE(ABORT, 'entries are never changed or removed'); END"
            ).execute_if(dialect="sqlite"),
        )


def prepare(engine: Engine) -> None:
    """Make the tables that are absent; an older layout is brought to this one, with a copy kept beside the file.

    A database that is no SQLite file has no copy made of it: its own backup stands in.
    Raises NotebookComplaint for a database that a newer meanlab has laid out.
    """
    if _version(engine) == VERSION:
        return
    with writing(engine) as connection:
        found = _version_in(connection)  # another process may have been faster
        if found is not None and found > VERSION:
            raise NotebookComplaint(
                f"This notebook was laid out by a newer meanlab (layout {found}; this one knows {VERSION}). "
                "Start the newer one, or name another notebook in MEANLAB_DATABASE_URL."
            )
        if found is not None and found < VERSION:
            _keep_copy(engine, found)
        METADATA.create_all(connection)
        if found is None:
            connection.execute(insert(LAYOUT).values(version=VERSION))
        elif found < VERSION:
            connection.execute(update(LAYOUT).values(version=VERSION))
        if connection.execute(select(LAST_ENTRY.c.place)).scalar() is None:
            connection.execute(insert(LAST_ENTRY).values(place=1, number=0, digest=""))


def _version(engine: Engine) -> int | None:
    with engine.connect() as connection:
        return _version_in(connection)


def _version_in(connection: Connection) -> int | None:
    if not inspect(connection).has_table(LAYOUT.name):
        return None
    return connection.execute(select(LAYOUT.c.version).order_by(LAYOUT.c.version.desc())).scalar()


def _keep_copy(engine: Engine, version: int) -> None:
    """Copy a SQLite file as it is before its layout is changed; a copy that is there already stays."""
    name = engine.url.database
    if engine.url.get_backend_name() != "sqlite" or not name or name == ":memory:":
        return
    path = Path(name).expanduser()
    copy, count = path.with_name(f"{path.stem}.layout-{version}{path.suffix}"), 1
    while copy.exists():
        count += 1
        copy = path.with_name(f"{path.stem}.layout-{version}.{count}{path.suffix}")
    try:
        with closing(sqlite3.connect(path)) as source, closing(sqlite3.connect(copy)) as target:
            source.backup(target)
    except sqlite3.Error as problem:
        copy.unlink(missing_ok=True)
        raise OSError(0, f"its older layout cannot be copied: {problem}") from problem
