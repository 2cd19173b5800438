"""What a bench sets the same way each time, kept from one entry to the next."""

from collections.abc import Mapping

from sqlalchemy import Connection, delete, insert, select

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook.schema import BENCH_DEFAULT

NAMES = ("unit", "significance", "by", "instrument", "method")


def bench_defaults(connection: Connection) -> dict[str, str]:
    """Return what is kept, by name; "" where nothing is."""
    kept = {row.name: row.value for row in connection.execute(select(BENCH_DEFAULT))}
    return {name: kept.get(name, "") for name in NAMES}


def remember(connection: Connection, given: Mapping[str, str]) -> None:
    """Keep what is given in place of what was kept under the same names.

    Raises NotebookComplaint for a name that is none of NAMES.
    """
    for name, value in given.items():
        if name not in NAMES:
            raise NotebookComplaint(f'"{name}" is no bench default; there are {", ".join(NAMES)}.')
        connection.execute(delete(BENCH_DEFAULT).where(BENCH_DEFAULT.c.name == name))
        connection.execute(insert(BENCH_DEFAULT).values(name=name, value=str(value)))
