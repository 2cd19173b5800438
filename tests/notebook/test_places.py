"""The notebook where it lies: two writers, a killed one, a full disk, a read-only folder, older layouts."""

import os
import sqlite3
import subprocess
import sys
import tempfile
from contextlib import closing
from pathlib import Path
from threading import Thread

import pytest
from sqlalchemy import event
from sqlalchemy.dialects import mysql, postgresql
from sqlalchemy.schema import CreateTable

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import Notebook, WorkingStates
from meanlab.notebook.schema import METADATA, VERSION

ROOT = Path(__file__).resolve().parents[2]
LAYOUT_1 = (
    "CREATE TABLE meanlab_layout (version INTEGER NOT NULL, PRIMARY KEY (version))",
    "CREATE TABLE working_state (notebook VARCHAR(64) NOT NULL, saved VARCHAR(40) NOT NULL, state TEXT NOT NULL, "
    "PRIMARY KEY (notebook))",
    "CREATE INDEX ix_working_state_saved ON working_state (saved)",
    "CREATE TABLE working_file (notebook VARCHAR(64) NOT NULL, digest VARCHAR(64) NOT NULL, content BLOB NOT NULL, "
    "PRIMARY KEY (notebook, digest))",
    "INSERT INTO meanlab_layout VALUES (1)",
    "INSERT INTO working_state VALUES ('bench', '2026-11-30T08:00:00.000000+00:00', '{\"n\": 12}')",
)


@pytest.fixture
def older(tmp_path) -> Path:
    """A database as the first layout made it, with a page in it."""
    path = tmp_path / "notebook.db"
    with closing(sqlite3.connect(path)) as connection:
        for statement in ("PRAGMA journal_mode = WAL", *LAYOUT_1):
            connection.execute(statement)
        connection.commit()
    return path


def dumped(path: Path) -> list[str]:
    with closing(sqlite3.connect(path)) as connection:
        return list(connection.iterdump())


def test_two_threads_at_once_lose_nothing(book, url, analysis):
    """Two notebooks on one file write at the same time: every entry is there, in one unbroken chain."""
    saved: list[str] = []

    def write(by: str) -> None:
        own = Notebook(url)
        saved.extend(own.add(analysis, by=by).key for _ in range(20))
        own.close()

    writers = [Thread(target=write, args=(by,)) for by in ("A. Keller", "B. Odermatt")]
    for writer in writers:
        writer.start()
    for writer in writers:
        writer.join()
    assert len(saved) == 40
    assert {line.key for line in book.entries()} == set(saved)
    assert [line.number for line in book.entries()] == list(range(1, 41))
    assert book.verify() == []


def test_two_processes_at_once_lose_nothing(book, url):
    """Two processes that open the same new file and save at once both keep every entry."""
    code = (
        "import sys; import meanlab; from meanlab.notebook import Notebook\n"
        "book = Notebook(sys.argv[1]); found = meanlab.analyse(['5.02', '5.04', '4.98'], meanlab.Question('5'))\n"
        "for _ in range(15): print(book.add(found).key)"
    )
    started = [
        subprocess.Popen([sys.executable, "-c", code, url], cwd=ROOT, stdout=subprocess.PIPE, text=True)
        for _ in range(2)
    ]
    keys = [key for process in started for key in process.communicate(timeout=60)[0].split()]
    assert [process.returncode for process in started] == [0, 0]
    assert len(keys) == 30
    assert {line.key for line in book.entries()} == set(keys)
    assert book.verify() == []


@pytest.mark.skipif(os.name != "posix", reason="SIGKILL and fork are POSIX")
def test_killed_writers_lose_nothing_they_reported():
    """Ten times processes that save are killed at a random moment: nothing reported is lost, the notebook is whole."""
    script = ROOT / "tests" / "benchmarks" / "notebook_kill.py"
    done = subprocess.run([sys.executable, script, "10"], capture_output=True, text=True, timeout=120, check=False)
    assert done.returncode == 0, done.stdout + done.stderr
    assert done.stdout.startswith("10 kills")
    assert " 0 lost, 0 times not whole" in done.stdout


def test_a_full_disk_gets_a_sentence_and_loses_nothing(book, analysis):
    """Where nothing more can be written add complains, what was saved stays, and saving works again with room.

    SQLite's max_page_count gives the same error as a full disk (SQLITE_FULL).
    """
    kept = book.add(analysis)
    pages = ["PRAGMA max_page_count = 1"]
    book.close()

    def room(connection, _record):
        connection.execute(pages[0])

    event.listen(book._engine, "connect", room)
    with pytest.raises(NotebookComplaint, match="full"):
        book.add(analysis, note="x" * 5_000_000)
    assert book.entry(kept.key) == kept
    assert book.verify() == []
    pages[0] = "PRAGMA max_page_count = 1073741823"
    book.close()
    assert book.add(analysis).number == 2
    assert book.verify() == []


def test_a_place_that_is_no_folder_gets_a_sentence(tmp_path):
    """A file where the folder should be is said with the place and the way out."""
    (tmp_path / "taken").write_text("not a folder", encoding="utf-8")
    with pytest.raises(NotebookComplaint, match=r"taken.*MEANLAB_DATABASE_URL"):
        Notebook(f"sqlite:///{tmp_path / 'taken' / 'notebook.db'}")


@pytest.mark.skipif(os.name != "posix", reason="permissions of a folder are POSIX")
def test_a_read_only_folder_gets_a_sentence(analysis):
    """In a folder that cannot be written, opening or saving is a complaint, never another error.

    Root may write everywhere: the test then acts as another user in a child process.
    """
    code = (
        "import os, sys; import meanlab; from meanlab.notebook import Notebook\n"
        "found = meanlab.analyse(['5.02', '5.04', '4.98'], meanlab.Question('5'))\n"
        "if os.getuid() == 0: os.setgid(65534); os.setuid(65534)\n"
        "print(len(open(f'{sys.argv[1]}/notebook.db', 'rb').read(15)))\n"
        "for name in ('notebook.db', 'new.db'):\n"
        "    try: Notebook(f'sqlite:///{sys.argv[1]}/{name}').add(found); print('written')\n"
        "    except meanlab.Complaint as complaint: print(complaint)\n"
    )
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        book = Notebook(f"sqlite:///{folder / 'notebook.db'}")
        book.add(analysis)
        book.close()
        folder.chmod(0o555)
        done = subprocess.run(
            [sys.executable, "-c", code, name], cwd=ROOT, capture_output=True, text=True, timeout=60, check=False
        )
        folder.chmod(0o755)
    lines = done.stdout.splitlines()
    assert lines[:1] == ["15"], done.stderr
    assert len(lines) == 3, done.stderr
    assert all("cannot be used" in line for line in lines[1:])


def test_an_older_layout_is_migrated_with_a_copy_kept(older, analysis):
    """What the first layout kept is still there, entries work, and the file as it was stands beside it."""
    before = dumped(older)
    book = Notebook(f"sqlite:///{older}")
    assert book.add(analysis).number == 1
    assert book.verify() == []
    book.close()
    states = WorkingStates(f"sqlite:///{older}")
    kept = states.load("bench")
    states.close()
    assert kept is not None
    assert kept.state == {"n": 12}
    assert dumped(older.with_name("notebook.layout-1.db")) == before
    with closing(sqlite3.connect(older)) as connection:
        assert connection.execute("SELECT version FROM meanlab_layout").fetchall() == [(VERSION,)]


def test_a_copy_of_an_earlier_migration_stays(older):
    """A copy that is there already is not written over."""
    taken = older.with_name("notebook.layout-1.db")
    taken.write_bytes(b"an earlier copy")
    Notebook(f"sqlite:///{older}").close()
    assert taken.read_bytes() == b"an earlier copy"
    assert older.with_name("notebook.layout-1.2.db").exists()


def test_without_room_for_the_copy_nothing_is_migrated(older, monkeypatch):
    """Where the copy cannot be kept the older file stays as it is, and the complaint says why."""
    from meanlab.notebook import schema

    before = older.read_bytes()

    def full(*_given):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(schema, "_keep_copy", full)
    with pytest.raises(NotebookComplaint, match="No space left"):
        Notebook(f"sqlite:///{older}")
    with closing(sqlite3.connect(older)) as connection:
        assert connection.execute("SELECT version FROM meanlab_layout").fetchall() == [(1,)]
        tables = {name for (name,) in connection.execute("SELECT name FROM sqlite_master WHERE type = 'table'")}
    assert tables == {"meanlab_layout", "working_state", "working_file"}
    assert len(before) == older.stat().st_size


def test_a_newer_layout_is_refused_with_a_sentence(book, url):
    """A notebook of a later version is not touched."""
    book.close()
    with closing(sqlite3.connect(url.removeprefix("sqlite:///"))) as connection:
        connection.execute("UPDATE meanlab_layout SET version = 99")
        connection.commit()
    with pytest.raises(NotebookComplaint, match="newer meanlab"):
        Notebook(url)


def test_working_state_and_entries_share_one_file(book, url, analysis):
    """One database holds the page as it was left and the entries."""
    states = WorkingStates(url)
    states.keep("bench", {"n": 12})
    entry = book.add(analysis)
    assert states.load("bench").state == {"n": 12}
    assert Notebook(url).entry(entry.key) == entry
    states.close()


@pytest.mark.parametrize("dialect", [postgresql.dialect(), mysql.dialect()], ids=["postgresql", "mysql"])
def test_other_databases_can_lay_out_the_tables(dialect):
    """The tables are said in the words of other databases; long texts and contents have room there."""
    said = {table.name: str(CreateTable(table).compile(dialect=dialect)) for table in METADATA.sorted_tables}
    assert set(said) >= {"entry", "entry_content", "last_entry", "bench_default", "working_state"}
    assert "TEXT" in said["entry"]
    assert ("BYTEA" if dialect.name == "postgresql" else "BLOB(1073741824)") in said["entry_content"]


def test_an_in_memory_notebook_serves_every_thread(analysis):
    """A notebook opened from a file is read by whichever thread of the page asks."""
    book = Notebook("sqlite://")
    added = [Thread(target=book.add, args=(analysis,)) for _ in range(4)]
    for thread in added:
        thread.start()
    for thread in added:
        thread.join()
    assert [line.number for line in book.entries()] == [1, 2, 3, 4]
    assert book.verify() == []
