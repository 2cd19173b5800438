"""The tables of the notebook's database and the version of their layout."""

from sqlalchemy import Column, Engine, Integer, LargeBinary, MetaData, String, Table, Text, insert, select

from meanlab.core.complaints import NotebookComplaint

VERSION = 1

METADATA = MetaData()
LAYOUT = Table("meanlab_layout", METADATA, Column("version", Integer, primary_key=True, autoincrement=False))
WORKING_STATE = Table(
    "working_state",
    METADATA,
    Column("notebook", String(64), primary_key=True),
    Column("saved", String(40), nullable=False, index=True),  # UTC, ISO 8601
    Column("state", Text, nullable=False),  # JSON
)
WORKING_FILE = Table(
    "working_file",
    METADATA,
    Column("notebook", String(64), primary_key=True),
    Column("digest", String(64), primary_key=True),  # SHA-256 of the content
    Column("content", LargeBinary(length=2**24), nullable=False),
)


def prepare(engine: Engine) -> None:
    """Make the tables that are absent and check the version of those that are there.

    Raises NotebookComplaint for a database that a newer meanlab has laid out.
    """
    with engine.begin() as connection:
        METADATA.create_all(connection)
        found = connection.execute(select(LAYOUT.c.version).order_by(LAYOUT.c.version.desc())).scalar()
        if found is None:
            connection.execute(insert(LAYOUT).values(version=VERSION))
        elif found > VERSION:
            raise NotebookComplaint(
                f"This notebook was laid out by a newer meanlab (layout {found}; this one knows {VERSION}). "
                "Start the newer one, or name another notebook in MEANLAB_DATABASE_URL."
            )
