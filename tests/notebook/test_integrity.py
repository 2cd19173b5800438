"""Nothing can be changed behind the notebook's back unseen: verify finds it and says where."""

import shutil
import sqlite3
from contextlib import closing
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import Notebook

ENTRIES = 6
shared_fixtures = settings(
    deadline=None, max_examples=40, suppress_health_check=[HealthCheck.function_scoped_fixture], derandomize=True
)


def content_of(path: Path, number: int) -> bytes:
    with closing(sqlite3.connect(path)) as connection:
        return connection.execute("SELECT content FROM entry_content WHERE number = ?", (number,)).fetchone()[0]


def test_a_content_that_became_text_is_found(tampered):
    """SQLite keeps a text in any column: a content written back as text is found, and no failure of ours."""
    found = tampered("UPDATE entry_content SET content = CAST(content AS TEXT) WHERE number = 2")
    assert found == ["Entry 2: its content is not what was saved."]


def test_a_whole_notebook_has_no_problem(tampered):
    """Left as it was saved, nothing is found, the amendment included."""
    assert tampered() == []


@shared_fixtures
@given(number=st.integers(1, ENTRIES), place=st.floats(0, 1, exclude_max=True), bits=st.integers(1, 255))
def test_any_changed_byte_of_a_content_is_found(tampered, whole_file, number, place, bits):
    """One byte of an entry's content, changed in any way, is found and the entry named."""
    content = bytearray(content_of(whole_file, number))
    content[int(place * len(content))] ^= bits
    found = tampered(("UPDATE entry_content SET content = ? WHERE number = ?", (bytes(content), number)))
    assert found == [f"Entry {number}: its content is not what was saved."]


@pytest.mark.parametrize("number", range(1, ENTRIES + 1))
def test_a_changed_content_with_a_new_digest_is_found(tampered, whole_file, number):
    """Sealing a changed content anew does not hide it: the next entry, or the mark of the end, does not fit."""
    from hashlib import sha256

    content = content_of(whole_file, number).replace(b"A. Keller", b"B. Keller").replace(b'"by":""', b'"by":"B"')
    digest = sha256(content).hexdigest()
    assert content != content_of(whole_file, number)
    found = tampered(
        ("UPDATE entry_content SET content = ? WHERE number = ?", (content, number)),
        ("UPDATE entry SET digest = ? WHERE number = ?", (digest, number)),
    )
    assert any(f"Entry {number + 1} does not follow" in text or f"Entry {number}: it is not" in text for text in found)


@pytest.mark.parametrize("number", range(1, ENTRIES + 1))
def test_a_removed_entry_is_found(tampered, number):
    """Any entry taken out, the first and the last too, is missed by its number."""
    found = tampered(f"DELETE FROM entry WHERE number = {number}", f"DELETE FROM entry_content WHERE number = {number}")
    assert f"Entry {number} is missing." in found


def test_removed_entries_at_the_end_are_found(tampered):
    """Several of the last entries taken out are missed."""
    found = tampered("DELETE FROM entry WHERE number > 3", "DELETE FROM entry_content WHERE number > 3")
    assert found == ["Entries 4 to 6 are missing."]


def test_a_removed_entry_whose_followers_moved_up_is_found(tampered):
    """Closing the gap by new numbers does not hide it."""
    found = tampered(
        "DELETE FROM entry WHERE number = 3",
        "DELETE FROM entry_content WHERE number = 3",
        "UPDATE entry SET number = number - 1 WHERE number > 3",
        "UPDATE entry_content SET number = number - 1 WHERE number > 3",
    )
    assert any("Entry 3 does not follow" in text for text in found)
    assert "Entry 6 is missing." in found


@shared_fixtures
@given(pair=st.lists(st.integers(1, ENTRIES), min_size=2, max_size=2, unique=True), whole=st.booleans())
def test_any_two_swapped_entries_are_found(tampered, pair, whole):
    """Two entries that changed places, with their lines in the list or without, are found, and one of them is named."""
    one, other = pair
    swap = "UPDATE {} SET number = CASE number WHEN {} THEN -{} ELSE -{} END WHERE number IN ({}, {})"
    back = "UPDATE {} SET number = -number WHERE number < 0"
    tables = ("entry", "entry_content") if whole else ("entry_content",)
    found = tampered(
        *(swap.format(table, one, other, one, one, other) for table in tables),
        *(back.format(table) for table in tables),
    )
    assert any(f"Entry {one}" in text or f"Entry {other}" in text for text in found)


@pytest.mark.parametrize(
    ("column", "value"),
    [("title", "Another run"), ("material", "NC-8"), ("verdict", "agrees"), ("sentence", "All is well."),
     ("time", "2020-01-01T00:00:00+00:00"), ("key", "guessed"), ("amends", "x"), ("words", ""), ("fingerprint", "0")],
)  # fmt: skip
def test_a_changed_line_of_the_list_is_found(tampered, column, value):
    """What the list shows is held against the sealed content, column by column."""
    found = tampered((f"UPDATE entry SET {column} = ? WHERE number = 4", (value,)))
    assert found == [f"Entry 4: its line in the list is not what was saved ({column})."]


def test_a_line_that_is_no_text_any_more_is_found(tampered):
    """Bytes that are no UTF-8 in the title do not end in another error."""
    found = tampered("UPDATE entry SET title = CAST(x'FFFE80' AS TEXT) WHERE number = 4")
    assert found[0] == "Entry 4: its line in the list cannot be read any more."


def test_a_content_without_a_line_and_a_line_without_content_are_found(tampered):
    """Half an entry taken out is found from both sides."""
    assert "Entry 5: its content is missing." in tampered("DELETE FROM entry_content WHERE number = 5")
    found = tampered("DELETE FROM entry WHERE number = 5")
    assert "Entry 5 is missing." in found
    assert any("without an entry" in text for text in found)


def test_an_entry_put_in_at_the_end_is_found(tampered):
    """A copy of an entry set behind the last is not among those the notebook was closed with."""
    found = tampered(
        "INSERT INTO entry SELECT 7, 'x', time, title, material, verdict, sentence, amends, words, fingerprint, digest "
        "FROM entry WHERE number = 6",
        "INSERT INTO entry_content SELECT 7, content FROM entry_content WHERE number = 6",
    )
    assert any(text.startswith("Entry 7") for text in found)
    assert any("goes on to entry 7" in text for text in found)


def test_a_mark_of_the_end_that_is_gone_is_found(tampered, tmp_path, analysis):
    """Without the mark the last entries could be taken away unseen; adding is refused with a sentence."""
    assert "The end of the notebook is not marked any more." in tampered("DELETE FROM last_entry")
    book = Notebook(f"sqlite:///{tmp_path / 'tampered.db'}")
    with pytest.raises(NotebookComplaint, match="not marked"):
        book.add(analysis)
    book.close()


@pytest.mark.parametrize("table", ["entry", "entry_content"])
@pytest.mark.parametrize("statement", ["UPDATE {} SET number = 9 WHERE number = 2", "DELETE FROM {}"])
def test_the_database_itself_refuses_to_change_an_entry(tmp_path, whole_file, table, statement):
    """In SQLite even another program is told that entries are never changed or removed."""
    path = tmp_path / "copy.db"
    shutil.copy(whole_file, path)
    with closing(sqlite3.connect(path)) as connection, pytest.raises(sqlite3.IntegrityError, match="never changed"):
        connection.execute(statement.format(table))


@settings(parent=shared_fixtures, max_examples=80)
@given(place=st.floats(0, 1, exclude_max=True), bits=st.integers(1, 255))
def test_a_changed_byte_anywhere_in_the_file_changes_no_entry_unseen(tmp_path, whole_file, place, bits):
    """Flip any byte of the database file: either it is said, or every entry is still what was saved."""
    data = bytearray(whole_file.read_bytes())
    data[int(place * len(data))] ^= bits
    path = tmp_path / "flipped.db"
    for left in tmp_path.glob("flipped.db*"):
        left.unlink()
    path.write_bytes(data)
    try:
        book = Notebook(f"sqlite:///{path}")
    except NotebookComplaint:
        return
    try:
        found = book.verify()
        if not found:
            assert book.exported() == exported(whole_file, tmp_path)
    except NotebookComplaint:
        pass
    finally:
        book.close()


def exported(path: Path, folder: Path) -> bytes:
    copy = folder / "as-saved.db"
    shutil.copy(path, copy)
    book = Notebook(f"sqlite:///{copy}")
    content = book.exported()
    book.close()
    return content
