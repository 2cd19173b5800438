"""The notebook as a file: JSON → notebook → JSON is the same, tampering shows, newer files are refused; the copy."""

import json
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import Notebook, recompute
from meanlab.records import result_file

KEPT = Path(__file__).parent / "kept"


@pytest.fixture
def full_book(book, many_kinds):
    """A notebook with an entry of every kind, and an amendment."""
    for name, analysis in many_kinds.items():
        book.add(
            analysis, title=name, by="A. Keller", note="µ ± ≤ 🧪", set_times={"target": "2026-12-01T08:00:00+00:00"}
        )
    book.amend(book.entries()[0].key, many_kinds["left out"], reason="air bubble found in the log")
    return book


def test_a_file_opens_as_the_same_notebook(full_book, tmp_path):
    """Notebook → JSON → notebook → JSON: the same entries, the same bytes, whole."""
    path = full_book.save_as(tmp_path / "bench.meanlab.json")
    opened = Notebook.open_file(path)
    assert opened.verify() == []
    assert list(opened.entries()) == list(full_book.entries())
    for line in full_book.entries():
        assert opened.entry(line.key) == full_book.entry(line.key)
    assert opened.exported() == path.read_bytes()
    assert str(path) in opened.where


def test_every_number_of_a_file_comes_out_again(full_book):
    """The entries of an opened file are recomputed to the last digit."""
    opened = Notebook.from_file(full_book.exported())
    assert [recompute(opened.entry(line.key)) for line in opened.entries()] == [[]] * len(full_book.entries())


def test_the_file_is_plain_json(full_book):
    """Any JSON reader finds kind, format, and the numbers as numbers."""
    values = json.loads(full_book.exported())
    assert (values["meanlab record"], values["format"]) == ("notebook", 1)
    first = values["entries"][0]["content"]["analysis"]
    assert first["test"]["p_value"] == full_book.entry(full_book.entries()[0].key).analysis.test.p_value
    assert first["readings"]["typed"][0] == "5,012"


def test_what_is_added_to_an_opened_file_is_saved_to_it(full_book, tmp_path, analysis):
    """An opened file goes on: added entries follow the chain, and save_as replaces the earlier state of it."""
    path = full_book.save_as(tmp_path / "bench.meanlab.json")
    opened = Notebook.open_file(path)
    entry = opened.add(analysis, title="later")
    assert entry.number == len(full_book.entries()) + 1
    opened.save_as(path)
    again = Notebook.open_file(path)
    assert again.verify() == []
    assert again.entry(entry.key) == entry


def test_a_file_that_is_something_else_is_not_replaced(full_book, tmp_path, analysis):
    """save_as keeps its hands off another notebook, a later state of this one, or any other file."""
    later = full_book.save_as(tmp_path / "later.meanlab.json")
    grown = Notebook.open_file(later)
    grown.add(analysis)
    grown.save_as(later)
    other = Notebook("sqlite://")
    other.add(analysis)
    taken = tmp_path / "notes.txt"
    taken.write_text("notes", encoding="utf-8")
    for book, path in ((full_book, later), (other, later), (full_book, taken)):
        before = path.read_bytes()
        with pytest.raises(NotebookComplaint, match="another file"):
            book.save_as(path)
        assert path.read_bytes() == before
    assert sorted(one.name for one in tmp_path.iterdir() if one.is_file()) == ["later.meanlab.json", "notes.txt"]


@pytest.fixture(scope="module")
def small_file(analysis) -> bytes:
    book = Notebook("sqlite://")
    for place in range(3):
        book.add(analysis, title=f"Run {place}", by="A. Keller")
    content = book.exported()
    book.close()
    return content


@settings(deadline=None, max_examples=100, derandomize=True)
@given(place=st.floats(0, 1, exclude_max=True), sign=st.sampled_from('0123456789abz"{},.: -'))
def test_any_changed_sign_of_a_file_is_found(small_file, place, sign):
    """Put any sign in place of another: the file is refused, or verify says it, or every entry means the same."""
    changed = bytearray(small_file)
    changed[int(place * len(changed))] = ord(sign)
    try:
        opened = Notebook.from_file(bytes(changed))
        problems = opened.verify()
        assert problems or opened.exported() == small_file
    except NotebookComplaint:
        pass


@pytest.mark.parametrize("act", ["remove", "swap", "repeat"])
def test_entries_moved_in_a_file_are_found(small_file, act):
    """A line taken out, two swapped or one repeated does not pass."""
    values = json.loads(small_file)
    lines = values["entries"]
    first, second, third = lines
    values["entries"] = {
        "remove": [first, third],
        "swap": [second, first, third],
        "repeat": [first, second, third, third],
    }[act]
    content = json.dumps(values).encode()
    if act == "repeat":
        with pytest.raises(NotebookComplaint, match="twice"):
            Notebook.from_file(content)
    else:
        assert any("Entry" in text for text in Notebook.from_file(content).verify())


@pytest.mark.parametrize(
    ("content", "said"),
    [
        (b"", "no JSON"),
        (b"5.02\n5.04\n", "no JSON"),
        (b"[1, 2]", "no record file"),
        (b'{"entries": []}', "no record file"),
        (b'{"meanlab record": "notebook", "format": 99, "entries": [], "last": {}}', "newer meanlab"),
        (b'{"meanlab record": "notebook", "format": 1, "entries": 5}', "no notebook"),
        (b'{"meanlab record": "notebook", "format": 1, "entries": [{}], "last": {}}', "Entry 1"),
        (
            b'{"meanlab record": "notebook", "format": 1, "entries": [{"content": {}}], "last": {}}',
            "Entry 1",
        ),
        (b'{"meanlab record": "notebook", "format": 1, "entries": [], "entries": [], "last": {}}', "twice"),
        (b'{"meanlab record": "notebook", "format": 1, "entries": [NaN], "last": {}}', "NaN"),
        (b"\xff\xfe\x00", "no JSON"),
        (b"[" * 100_000, "no JSON"),
    ],
)
def test_a_file_that_is_no_record_file_gets_a_sentence(content, said):
    """Other files, newer ones and damaged ones are refused with what was found."""
    with pytest.raises(NotebookComplaint, match=said):
        Notebook.from_file(content)


def test_a_file_that_is_not_there_gets_a_sentence(tmp_path, full_book):
    """Reading and writing at an impossible place is said with the place."""
    with pytest.raises(NotebookComplaint, match=r"gone\.meanlab\.json"):
        Notebook.open_file(tmp_path / "gone.meanlab.json")
    with pytest.raises(NotebookComplaint, match="cannot be used"):
        full_book.save_as(tmp_path / "no folder" / "bench.meanlab.json")
    (tmp_path / "taken.txt").write_text("no folder", encoding="utf-8")
    with pytest.raises(NotebookComplaint, match="cannot be used"):
        full_book.back_up(tmp_path / "taken.txt" / "copy.db")


def test_the_copy_is_the_notebook(full_book, tmp_path, analysis):
    """A copy has every entry and the bench defaults, is whole, and goes on by itself; nothing is written over."""
    full_book.remember(by="A. Keller")
    path = full_book.back_up(tmp_path / "copy.db")
    copied = Notebook(f"sqlite:///{path}")
    assert copied.verify() == []
    assert copied.exported() == full_book.exported()
    assert copied.bench_defaults() == full_book.bench_defaults()
    assert copied.add(analysis).number == len(full_book.entries()) + 1
    copied.close()
    with pytest.raises(NotebookComplaint, match="already"):
        full_book.back_up(path)


def test_a_copy_that_fails_leaves_nothing(full_book, tmp_path, monkeypatch):
    """Where copying breaks off, no half copy is left."""
    from meanlab.notebook import files

    def full(*_given):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(files, "insert", full)
    with pytest.raises(NotebookComplaint, match="No space left"):
        full_book.back_up(tmp_path / "copy.db")
    assert [one.name for one in tmp_path.iterdir() if one.is_file()] == []


@pytest.mark.parametrize("path", sorted(KEPT.glob("bench-*.meanlab.json")), ids=lambda path: path.name)
def test_files_of_earlier_versions_still_open(path):
    """A record file made by an earlier meanlab opens, is whole, gives every kept number, and is written the same."""
    opened = Notebook.open_file(path)
    assert opened.verify() == []
    lines = json.loads(path.read_text(encoding="utf-8"))["entries"]
    assert len(opened.entries()) == len(lines)
    for kept in lines:
        content = kept["content"]
        entry = opened.entry(content["key"])
        test, was = entry.analysis.test, content["analysis"]["test"]
        assert list(entry.analysis.readings.typed) == content["analysis"]["readings"]["typed"]
        assert (entry.title, entry.by, entry.digest) == (content["title"], content["by"], kept["digest"])
        assert (test is None) == (was is None)
        if test is not None:
            assert (test.p_value, test.statistic, test.df) == (was["p_value"], was["statistic"], was["df"])
            assert (test.interval.low, test.interval.high) == (was["interval"]["low"], was["interval"]["high"])
    assert opened.exported() == path.read_bytes()


@pytest.mark.parametrize("path", sorted(KEPT.glob("result-*.meanlab.json")), ids=lambda path: path.name)
def test_results_of_earlier_versions_still_open(path):
    """A single result that an earlier meanlab wrote opens as an entry with every number."""
    opened = Notebook.open_file(path)
    assert opened.verify() == []
    entry = opened.entry(opened.entries()[0].key)
    kept = json.loads(path.read_text(encoding="utf-8"))["analysis"]
    assert entry.analysis.test.p_value == kept["test"]["p_value"]
    assert entry.analysis.summary.mean == kept["summary"]["mean"]
    assert result_file(entry.analysis, entry.source, entry.written) == path.read_bytes()


@pytest.mark.parametrize("name", ["bench-1.0.0.meanlab.json", "result-1.0.0.meanlab.json"])
def test_there_are_files_of_the_first_version(name):
    """The files of the first version are there to be opened."""
    assert (KEPT / name).exists()
