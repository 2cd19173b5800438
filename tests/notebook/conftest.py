"""Notebooks for the tests: an empty one, a whole one in one file, and a way to change it behind its back."""

import shutil
import sqlite3
from contextlib import closing
from pathlib import Path

import pytest

from meanlab.notebook import Notebook


@pytest.fixture
def url(tmp_path: Path) -> str:
    return f"sqlite:///{tmp_path / 'bench' / 'notebook.db'}"


@pytest.fixture
def book(url: str):
    opened = Notebook(url)
    yield opened
    opened.close()


@pytest.fixture(scope="module")
def whole_file(tmp_path_factory, analysis) -> Path:
    """A notebook of six entries, one of them an amendment, closed and complete in one file."""
    path = tmp_path_factory.mktemp("whole") / "notebook.db"
    book = Notebook(f"sqlite:///{path}")
    kept = [book.add(analysis, title=f"Run {place}", by="A. Keller", note="invented") for place in range(1, 6)]
    book.amend(kept[1].key, analysis, reason="material named", title="Run 2, again")
    assert book.verify() == []
    book.close()
    with closing(sqlite3.connect(path)) as connection:
        connection.execute("PRAGMA wal_checkpoint(TRUNCATE)")
    assert not Path(f"{path}-wal").exists()
    return path


@pytest.fixture
def tampered(tmp_path, whole_file):
    """A function that copies the whole notebook, changes it behind its back, and returns what verify says."""

    def change(*statements):
        path = tmp_path / "tampered.db"
        shutil.copy(whole_file, path)
        with closing(sqlite3.connect(path)) as connection:
            for (trigger,) in connection.execute("SELECT name FROM sqlite_master WHERE type = 'trigger'").fetchall():
                connection.execute(f"DROP TRIGGER {trigger}")
            for statement in statements:
                connection.execute(*statement) if isinstance(statement, tuple) else connection.execute(statement)
            connection.commit()
        book = Notebook(f"sqlite:///{path}")
        found = book.verify()
        book.close()
        return found

    return change
