"""Entries: what is saved comes back whole, in order, chained; the list, the search, amendments, bench defaults."""

from datetime import UTC, datetime
from hashlib import sha256

import pytest

import meanlab
from meanlab.core.complaints import NotebookComplaint
from meanlab.core.source import entries_of
from meanlab.notebook import Notebook, recompute, source_of


def test_an_entry_comes_back_as_it_was_saved(book, many_kinds):
    """Readings, question, every number and every text of an analysis are equal after the notebook."""
    for name, analysis in many_kinds.items():
        saved = book.add(analysis, title=name, by="A. Keller", note="two\nlines", instrument="IC 2", method="M-17")
        again = book.entry(saved.key)
        assert again == saved
        assert again.analysis == analysis
        assert again.analysis.readings.typed == analysis.readings.typed
        assert [str(value) for value in again.analysis.readings.values] == list(map(str, analysis.readings.values))
        assert again.analysis.question.target_as_typed == analysis.question.target_as_typed
        assert (again.title, again.by, again.instrument, again.method) == (name, "A. Keller", "IC 2", "M-17")


def test_another_process_finds_the_entry(book, url, analysis):
    """An entry is on the disk when add returns: a second notebook on the same file has it."""
    saved = book.add(analysis, title="Run 1")
    again = Notebook(url)
    assert again.entry(saved.key) == saved
    again.close()


def test_entries_are_numbered_and_chained(book, analysis):
    """Each entry carries the SHA-256 of the content of the one before; the first carries none."""
    first, second = book.add(analysis), book.add(analysis)
    assert (first.number, second.number) == (1, 2)
    assert first.previous == ""
    assert second.previous == first.digest == sha256(first.content).hexdigest()
    assert first.key != second.key


def test_an_entry_says_when(book, analysis):
    """The time of saving is UTC; the time zone of the bench stands beside it."""
    before = datetime.now(UTC)
    entry = book.add(analysis, zone="Europe/Zurich")
    assert before <= datetime.fromisoformat(entry.time) <= datetime.now(UTC)
    assert entry.zone == "Europe/Zurich"
    assert book.add(analysis).zone.startswith("UTC")


def test_an_entry_holds_the_text_that_was_pasted(book):
    """The original text, the place, text and role of every entry read, and the cause of one left out are kept."""
    text = "5.02\n\n5.04\n<4.0\n5.03\n"
    intake = meanlab.read(text)
    readings = intake.reading_set(left_out={0: "first injection, system not stable"})
    analysis = meanlab.analyse(readings, meanlab.Question("5.00"))
    kept = book.entry(book.add(analysis, source=source_of(text, readings, intake)).key).source
    assert kept.text == text
    assert [(one.index, one.text) for one in kept.entries] == [(one.index, one.text) for one in intake.entries]
    assert [one.place for one in kept.entries] == [one.place for one in intake.entries]
    assert kept.entries[0].left_out == "first injection, system not stable"
    assert [one.left_out for one in kept.entries[1:]] == [""] * (len(kept.entries) - 1)


def test_an_entry_names_the_file_and_the_place_in_it(book, analysis):
    """Of a file: name, SHA-256, size, sheet, column and condition."""
    content = b"sample;value\nNC-7;5,02\n"
    chosen = {"sheet": "Run 3", "column": "value", "where": {"sample": "NC-7"}}
    source = source_of(content, analysis.readings, file_name="run3.csv", selection=chosen)
    kept = book.entry(book.add(analysis, source=source).key).source
    assert (kept.file_name, kept.size, kept.text) == ("run3.csv", len(content), "")
    assert kept.checksum == sha256(content).hexdigest()
    assert kept.selection == {"sheet": "Run 3", "column": "value", "where": "sample = NC-7"}


def test_without_a_source_the_readings_as_typed_are_the_source(many_kinds):
    """Readings given from Python stand with their texts, roles and causes, in reading order."""
    kept = entries_of(many_kinds["below a limit"].readings)
    assert (kept[2].text, kept[2].role) == ("<0.05", "below-limit")
    assert [one.index for one in kept] == list(range(12))
    assert entries_of(many_kinds["left out"].readings)[8].left_out.startswith("air bubble")


def test_when_each_part_of_the_question_was_set_is_kept(book, analysis):
    """The times of the parts of the question come back."""
    times = {"target": "2026-12-01T08:00:00+00:00", "equivalence limit": "2026-12-01T08:20:00+00:00"}
    assert book.entry(book.add(analysis, set_times=times).key).set_times == times


def test_an_amendment_is_a_new_entry(book, analysis, many_kinds):
    """The amended entry stays as it was; the new one names it and the reason, and keeps its title and method."""
    old = book.add(analysis, title="Run 1", method="M-17")
    new = book.amend(old.key, many_kinds["left out"], reason="  air bubble found in the log ", by="B. Odermatt")
    assert book.entry(old.key) == old
    assert (new.amends, new.reason, new.number) == (old.key, "air bubble found in the log", 2)
    assert (new.title, new.method, new.by) == ("Run 1", "M-17", "B. Odermatt")
    assert [(line.amends, line.amended_by) for line in book.entries()] == [(None, 2), (1, None)]
    assert book.verify() == []


def test_an_amendment_needs_a_reason_and_an_entry(book, analysis):
    """Without a reason, or of an entry that is not there, nothing is saved."""
    entry = book.add(analysis)
    with pytest.raises(NotebookComplaint, match="reason"):
        book.amend(entry.key, analysis, reason="  ")
    with pytest.raises(NotebookComplaint, match="no such entry"):
        book.amend("nothing", analysis, reason="typed wrong")
    assert len(book.entries()) == 1


def test_a_wrong_key_opens_nothing(book, analysis):
    """A guessed key is refused with a sentence; keys have 192 random bits."""
    key = book.add(analysis).key
    assert len(key) >= 32
    for guess in (key[:-1], "", "1", "' OR 1=1 --"):
        with pytest.raises(NotebookComplaint, match="no such entry"):
            book.entry(guess)


def test_the_list_shows_what_it_should(book, analysis):
    """A line has number, time, title, material, verdict and sentence; the list can be cut, reversed and walked."""
    saved = [book.add(analysis, title=f"Run {place}") for place in range(7)]
    lines = book.entries()
    assert len(lines) == 7
    assert [line.title for line in lines] == [f"Run {place}" for place in range(7)]
    assert [line.number for line in lines[-3:]] == [5, 6, 7]
    assert [line.number for line in lines[::-2]] == [7, 5, 3, 1]
    assert [line.number for line in reversed(lines)] == [7, 6, 5, 4, 3, 2, 1]
    assert lines[9:] == []
    last = lines[-1]
    assert last == lines[6]
    assert (last.key, last.time) == (saved[6].key, saved[6].time)
    assert (last.material, last.verdict) == ("control solution NC-7", analysis.verdict)
    assert last.sentence == analysis.conclusion
    with pytest.raises(IndexError):
        lines[7]


def test_an_empty_notebook_is_an_empty_list(book):
    """A notebook that was just made has no entry and no problem."""
    assert len(book.entries()) == 0
    assert list(book.entries()) == book.entries()[-50:] == []
    assert book.verify() == []


def test_the_search_finds_every_word_in_any_text(book, analysis, many_kinds):
    """All words must be there, capital or small; signs with a meaning in SQL are plain signs; numbers find entries."""
    book.add(analysis, title="Straße 5, morning", by="A. Keller", note="100 % of the batch")
    book.add(many_kinds["sign"], title="blank_value", by="B. Odermatt")
    found = {
        text: [line.number for line in book.search(text)] for text in ("NC-7 KELLER", "strasse", "morning odermatt")
    }
    assert found == {"NC-7 KELLER": [1], "strasse": [1], "morning odermatt": []}
    assert [line.number for line in book.search("100 %")] == [1]
    assert [line.number for line in book.search("blank_")] == [2]
    assert [line.number for line in book.search("n_trate")] == []
    assert [line.number for line in book.search("nitrate")] == [1, 2]
    printed = analysis.provenance.fingerprint[:12]
    assert [line.number for line in book.search(f"{printed[:4]} {printed[4:8]} {printed[8:]}")] == [1]
    assert [line.number for line in book.search("")] == [1, 2]


def test_bench_defaults_are_remembered(book, url):
    """Unit, α, by, instrument and method come back in the next notebook on the same file; other names are refused."""
    assert set(book.bench_defaults().values()) == {""}
    book.remember(unit="mg/L", significance="5 %", by="A. Keller")
    book.remember(unit="µg/L")
    again = Notebook(url)
    assert again.bench_defaults() == {
        "unit": "µg/L", "significance": "5 %", "by": "A. Keller", "instrument": "", "method": "",
    }  # fmt: skip
    again.close()
    with pytest.raises(NotebookComplaint, match="bench default"):
        book.remember(colour="blue")


def test_reopening_recomputes_every_digit(book, many_kinds):
    """From its own readings and question every kept analysis comes out again, to the last digit."""
    for name, analysis in many_kinds.items():
        entry = book.entry(book.add(analysis, title=name).key)
        assert recompute(entry) == []


def test_a_digit_that_differs_is_said(book, analysis):
    """Where the kept numbers do not come out again, each is named with both values."""
    from dataclasses import replace

    other = replace(analysis, summary=replace(analysis.summary, mean=5.0217), verdict="agrees")
    changed = {one.part: (one.kept, one.now) for one in recompute(book.add(other))}
    assert changed == {
        "analysis.summary.mean": ("5.0217", str(analysis.summary.mean)),
        "analysis.verdict": ("agrees", analysis.verdict),
    }


def test_a_text_that_cannot_be_written_gets_a_sentence(book, analysis):
    """Half of a surrogate pair is no character; the complaint says so, and nothing is saved."""
    with pytest.raises(NotebookComplaint, match="cannot be kept"):
        book.add(analysis, title="half \ud800")
    assert len(book.entries()) == 0


def test_any_text_of_the_user_comes_back(book, analysis):
    """Quotes, markup, a formula, a zero character and signs outside the basic plane are plain text."""
    text = "'; DROP TABLE entry; -- <b>=1+1</b> \x00 \u202e 🧪 \n\t end"
    entry = book.add(analysis, title=text, note=text)
    assert book.entry(entry.key).title == text
    assert book.entries()[0].title == text.replace("\x00", "")
    assert book.verify() == []
