"""The record file of one result: JSON → notebook → JSON is the same, and every number comes out again."""

import json

import pytest

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.exact_values import exact_values
from meanlab.core.source import source_of
from meanlab.core.written import Written
from meanlab.notebook import Notebook, recompute
from meanlab.records import result_file

WRITTEN = Written(
    "Run 1", "A. Keller", "=1+1\nsecond line <b>", "IC 2", "M-17", {"target": "2026-12-01T08:00:00+00:00"}
)


def opened(content: bytes):
    book = Notebook.from_file(content)
    assert book.verify() == []
    (line,) = book.entries()
    return book.entry(line.key)


def test_a_result_comes_back_with_every_digit(many_kinds):
    """Result → JSON → notebook → JSON: equal facts, the same bytes, the same numbers when computed anew."""
    for analysis in many_kinds.values():
        content = result_file(analysis, written=WRITTEN)
        entry = opened(content)
        assert entry.analysis == analysis
        assert exact_values(entry.analysis) == exact_values(analysis)
        assert result_file(entry.analysis, entry.source, entry.written) == content
        assert recompute(entry) == []


def test_what_was_written_and_typed_comes_back(analysis):
    """Title, names, note, times and the pasted text are in the file."""
    text = "\n".join(analysis.readings.typed)
    entry = opened(result_file(analysis, source_of(text, analysis.readings), WRITTEN))
    assert (entry.title, entry.by, entry.note) == (WRITTEN.title, WRITTEN.by, WRITTEN.note)
    assert (entry.instrument, entry.method, entry.set_times) == ("IC 2", "M-17", WRITTEN.set_times)
    assert entry.source.text == text


def test_the_same_result_gives_the_same_bytes(many_kinds):
    """Nothing of the moment of writing is in the file."""
    for analysis in many_kinds.values():
        assert result_file(analysis) == result_file(analysis)


def test_any_json_reader_finds_the_numbers(analysis):
    """The file is plain JSON with the numbers as numbers and the readings as texts."""
    values = json.loads(result_file(analysis))
    assert (values["meanlab record"], values["format"]) == ("result", 1)
    assert values["analysis"]["summary"]["mean"] == analysis.summary.mean
    assert values["analysis"]["readings"]["typed"] == list(analysis.readings.typed)


def test_a_text_that_cannot_be_written_gets_a_sentence(analysed):
    """Half of a surrogate pair is no character: the file is refused with a sentence."""
    with pytest.raises(NotebookComplaint, match="cannot be written"):
        result_file(analysed(material="half \ud800"))


@pytest.mark.parametrize(
    ("path", "value", "said"),
    [
        (("analysis",), None, "Analysis"),
        (("analysis", "summary", "n"), "twelve", "Summary.n"),
        (("analysis", "verdict"), "all is well", "verdict"),
        (("analysis", "question", "target"), "five", "five"),
        (("analysis", "readings", "values"), ["1", "x"], "ReadingSet.values"),
        (("analysis", "test", "critical"), [1.0], "critical"),
        (("written",), [], "Written"),
    ],
)
def test_a_damaged_result_gets_a_sentence_that_names_the_place(analysis, path, value, said):
    """A value that cannot stand where it stands is a complaint with its place, never another error."""
    values = json.loads(result_file(analysis))
    inner = values
    for name in path[:-1]:
        inner = inner[name]
    inner[path[-1]] = value
    with pytest.raises(NotebookComplaint, match=said):
        Notebook.from_file(json.dumps(values).encode())
