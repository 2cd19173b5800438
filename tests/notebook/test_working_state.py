"""What was typed is there again: kept under an unguessable key, found by no other, said plainly where it cannot be."""

import os
import sqlite3
import subprocess
import sys
from datetime import UTC, datetime
from pathlib import Path
from threading import Thread

import pytest

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import WorkingStates
from meanlab.notebook.place import database_url, place_in_words

STATE = {"fields": {"readings_text": "5,02\n5,04\n", "target": "5,00"}, "file": None}


@pytest.fixture
def url(tmp_path: Path) -> str:
    return f"sqlite:///{tmp_path / 'bench' / 'notebook.db'}"


@pytest.fixture
def states(url: str):
    opened = WorkingStates(url)
    yield opened
    opened.close()


def test_a_kept_state_comes_back(states, url):
    """A state is found again under its key, by another process's store too."""
    key = states.new_key()
    before = datetime.now(UTC)
    saved = states.keep(key, STATE)
    again = WorkingStates(url)
    kept = again.load(key)
    again.close()
    assert kept is not None
    assert kept.state == STATE
    assert kept.saved == saved
    assert before <= saved <= datetime.now(UTC)


def test_a_later_state_takes_the_place_of_the_one_before(states):
    """Of one page, the last state counts."""
    key = states.new_key()
    states.keep(key, STATE)
    states.keep(key, STATE | {"file": {"name": "a.csv"}})
    kept = states.load(key)
    assert kept is not None
    assert kept.state["file"] == {"name": "a.csv"}


def test_a_wrong_key_opens_nothing(states):
    """A guessed or mistyped key finds no state and no file."""
    key = states.new_key()
    digest = states.keep_file(key, b"1;2;3")
    states.keep(key, STATE, [digest])
    assert states.load(key[:-1]) is None
    assert states.load("") is None
    assert states.load("' OR 1=1 --") is None
    assert states.load_file(states.new_key(), digest) is None


def test_keys_cannot_be_guessed(states):
    """A key has 192 random bits, and no two are alike."""
    keys = {states.new_key() for _ in range(1000)}
    assert len(keys) == 1000
    assert min(map(len, keys)) >= 32


def test_the_bytes_of_a_file_come_back(states):
    """An uploaded file is kept byte for byte, and let go when no state names it any more."""
    key, content = states.new_key(), bytes(range(256)) * 4000
    digest = states.keep_file(key, content)
    assert states.keep_file(key, content) == digest
    states.keep(key, STATE, [digest])
    assert states.load_file(key, digest) == content
    states.keep(key, STATE, [])
    assert states.load_file(key, digest) is None


def test_the_latest_page_is_known(states):
    """The page that was kept last is the one that a new start opens."""
    assert states.latest_key() is None
    first, second = states.new_key(), states.new_key()
    states.keep(first, STATE)
    states.keep(second, STATE)
    assert states.latest_key() == second
    states.keep(first, STATE)
    assert states.latest_key() == first


def test_writes_survive_power_loss_by_the_settings(states, url):
    """The file is in WAL mode and every commit waits for the disk (SQLite documentation, PRAGMA synchronous)."""
    states.keep(states.new_key(), STATE)
    with states._engine.connect() as connection:
        assert connection.exec_driver_sql("PRAGMA journal_mode").scalar() == "wal"
        assert connection.exec_driver_sql("PRAGMA synchronous").scalar() == 2  # FULL


def test_a_newer_layout_is_refused_with_a_sentence(states, url):
    """A notebook of a later version is not touched; the sentence says what to do."""
    states.close()
    path = Path(url.removeprefix("sqlite:///"))
    with sqlite3.connect(path) as connection:
        connection.execute("UPDATE meanlab_layout SET version = 99")
    connection.close()
    with pytest.raises(NotebookComplaint, match="newer meanlab"):
        WorkingStates(url)


def test_a_place_that_cannot_be_written_gets_a_sentence(tmp_path):
    """A file where the folder should be is a complaint that names the place and the way out."""
    (tmp_path / "taken").write_text("not a folder", encoding="utf-8")
    with pytest.raises(NotebookComplaint, match="MEANLAB_DATABASE_URL"):
        WorkingStates(f"sqlite:///{tmp_path / 'taken' / 'notebook.db'}")


def test_a_file_that_is_no_database_gets_a_sentence(tmp_path):
    """A renamed picture in the place of the notebook is a complaint, not another error."""
    (tmp_path / "notebook.db").write_bytes(b"\x89PNG\r\n\x1a\n" + bytes(5000))
    with pytest.raises(NotebookComplaint, match="cannot be used"):
        WorkingStates(f"sqlite:///{tmp_path / 'notebook.db'}")


@pytest.mark.parametrize("given", ["no url at all", "nosuch://bench/lab", "sqlite://host/x.db"])
def test_a_url_without_meaning_gets_a_sentence(given):
    """A setting that names no database is said plainly."""
    with pytest.raises(NotebookComplaint):
        WorkingStates(given)


def test_a_full_disk_gets_a_sentence(states):
    """Where nothing more can be written, keeping complains, and what was kept before is still there.

    SQLite's max_page_count gives the same error as a full disk (SQLITE_FULL).
    """
    key = states.new_key()
    states.keep(key, STATE)
    states.close()

    from sqlalchemy import event

    def no_more_room(connection, _record):
        connection.execute("PRAGMA max_page_count = 1")

    event.listen(states._engine, "connect", no_more_room)
    with pytest.raises(NotebookComplaint, match="full"):
        states.keep(key, STATE | {"much": "x" * 5_000_000})
    kept = states.load(key)
    assert kept is not None
    assert kept.state == STATE


def test_two_writers_at_once_lose_nothing(url):
    """Two stores that write at the same time wait for each other."""

    def write(mark: int) -> None:
        store = WorkingStates(url)
        for number in range(25):
            store.keep(f"key-{mark}-{number}", {"mark": mark, "number": number})
        store.close()

    WorkingStates(url).close()
    writers = [Thread(target=write, args=(mark,)) for mark in (1, 2)]
    for writer in writers:
        writer.start()
    for writer in writers:
        writer.join()
    store = WorkingStates(url)
    kept = [store.load(f"key-{mark}-{number}") for mark in (1, 2) for number in range(25)]
    store.close()
    assert all(kept)


def test_a_killed_process_loses_nothing_it_reported(url):
    """A process that is ended without warning right after keeping has kept."""
    code = (
        "import os, sys; from meanlab.notebook import WorkingStates\n"
        "store = WorkingStates(sys.argv[1]); store.keep('bench', {'n': 12}); os._exit(9)"
    )
    root = Path(__file__).resolve().parents[2]
    done = subprocess.run([sys.executable, "-c", code, url], cwd=root, timeout=60, check=False)
    assert done.returncode == 9
    store = WorkingStates(url)
    kept = store.load("bench")
    store.close()
    assert kept is not None
    assert kept.state == {"n": 12}


def test_the_place_is_the_users_own_folder_unless_named(monkeypatch, tmp_path):
    """MEANLAB_DATABASE_URL overrides; else the file lies in the user's data folder."""
    monkeypatch.setenv("MEANLAB_DATABASE_URL", "sqlite:///elsewhere.db")
    assert database_url() == "sqlite:///elsewhere.db"
    monkeypatch.delenv("MEANLAB_DATABASE_URL")
    if os.name == "posix":
        monkeypatch.setenv("XDG_DATA_HOME", str(tmp_path))
    assert place_in_words(database_url()).endswith("meanlab.db")
