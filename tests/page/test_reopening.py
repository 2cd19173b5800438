"""From an entry back to the fields of the page: the same numbers come out, whatever was asked."""

from datetime import UTC, datetime
from decimal import Decimal
from io import BytesIO

import openpyxl
import pytest

import meanlab
from meanlab.core.exact_values import exact_values
from meanlab.core.source import source_of
from meanlab.notebook import Notebook
from meanlab.page import asked, question_times, reopening
from meanlab.page.cache import Source
from meanlab.page.fields import FIELDS
from meanlab.page.file_choice import selection_of
from meanlab.page.working import empty, note_times, times_stand

KINDS = (
    "t", "agreement with a certificate", "z", "guarded t", "signed rank", "sign", "below a limit", "preparations",
    "left out", "one reading", "alike",
)  # fmt: skip
FILE = Source(b"", "runs.xlsx", (("column_index", 1),))


@pytest.fixture
def book():
    opened = Notebook("sqlite://")
    yield opened
    opened.close()


def nowhere(_digest):
    return None


def asked_again(again):
    """Return the analysis that the page makes of what was brought back."""
    fields = dict(FIELDS) | dict(again.fields)
    content, name = (fields["readings_text"], None) if again.file is None else (again.file[1], again.file[0])
    found = meanlab.read(content, name, dict(selection_of(fields)) or None)
    by_preparation = fields["preparation"] is not None or fields["labels_name_preparations"]
    left_out = {int(place): said["cause"] for place, said in again.left_out.items()}
    assert all(found.entries[int(place)].text == said["text"] for place, said in again.left_out.items())
    readings = found.reading_set(left_out, found.preparations if by_preparation else None)
    parts = asked.parts_set(fields, list(again.left_out))
    look = {"set_after": asked.set_after(again.first_parts, parts)}
    return meanlab.analyse(readings, asked.question_from(fields, found.decimal_sign, **look))


@pytest.mark.parametrize("kind", KINDS)
def test_every_kind_of_question_comes_out_again(kind, many_kinds, book):
    """Verdict, test, interval, power and checks of the reopened entry equal the kept ones in every digit."""
    kept = many_kinds[kind]
    again = asked_again(reopening.reopened(book.add(kept), nowhere))
    before, after = exact_values(kept), exact_values(again)
    for kept_or_now in (before, after):
        del kept_or_now["power"]["message"]  # names the unit only where the question, not the heading, gives it
    for part in ("verdict", "test", "difference", "equivalence", "power", "checks", "summary", "withouts", "others"):
        assert after[part] == before[part], part
    assert again.question.set_after == kept.question.set_after


def test_a_pasted_text_comes_back_sign_by_sign(book):
    """The text itself, not only its numbers, stands in the box again, and the fingerprint is the same."""
    text = "Nitrate (mg/L)\n5,012\n5,043\n<0,05\n\n5,028\n5,009\n"
    found = meanlab.read(text)
    readings = found.reading_set({1: "air bubble"})
    kept = meanlab.analyse(readings, asked.question_from(dict(FIELDS) | {"target": "5,000", "limit": "0,050"}, ","))
    entry = book.add(kept, source=source_of(text, readings, found))
    again = reopening.reopened(entry, nowhere)
    assert again.fields["readings_text"] == text
    assert again.fields["limit"] == "0,050"
    assert asked_again(again).provenance.fingerprint == kept.provenance.fingerprint


@pytest.fixture
def workbook():
    book = openpyxl.Workbook()
    book.active.append(["Run", "Nitrate (mg/L)", "Nitrite (mg/L)"])
    for place in range(8):
        book.active.append([place + 1, 5.01 + place / 1000, 0.1])
    content = BytesIO()
    book.save(content)
    return content.getvalue()


def test_a_file_comes_back_where_it_is_still_at_hand(workbook, book):
    """File, column and result are those of the entry; without the file its readings stand there as typed."""
    chosen = {"column_index": 1}
    found = meanlab.read(workbook, "runs.xlsx", chosen)
    readings = found.reading_set()
    kept = meanlab.analyse(readings, asked.question_from(dict(FIELDS) | {"target": "5.000"}, "."))
    entry = book.add(kept, source=source_of(workbook, readings, found, "runs.xlsx", chosen))
    with_file = reopening.reopened(entry, {entry.source.checksum: workbook}.get)
    assert with_file.file == ("runs.xlsx", workbook)
    assert with_file.fields["column"] == 1
    assert asked_again(with_file).provenance.fingerprint == kept.provenance.fingerprint
    without = reopening.reopened(entry, nowhere)
    assert without.file is None
    assert "runs.xlsx" in without.notice
    assert exact_values(asked_again(without).test) == exact_values(kept.test)


def test_another_file_under_the_same_checksum_is_not_taken(workbook, book):
    """A file that does not give the kept readings is left aside."""
    readings = meanlab.ReadingSet(["5.012", "5.043", "5.028"])
    kept = meanlab.analyse(readings, meanlab.Question("5.000"))
    entry = book.add(kept, source=source_of(workbook, readings, None, "runs.xlsx", {"column_index": 1}))
    again = reopening.reopened(entry, {entry.source.checksum: workbook}.get)
    assert again.file is None
    assert again.fields["readings_text"] == "5.012\n5.043\n5.028"


@pytest.mark.parametrize(("s", "count"), [("0.4", 16), ("0.037", 12), ("1.25", 7)])
def test_a_historical_level_asks_for_its_values_again(s, count):
    """s and m come back as typed: u = s/√m with m − 1 degrees of freedom (JCGM 100:2008, 4.2.3)."""
    fields = dict(FIELDS) | {"target": "5.0", "target_kind": "historical level"}
    fields |= {"certificate_value": s, "historical_count": str(count)}
    again = reopening.question_fields(asked.question_from(fields, "."), ".")
    assert (again["certificate_value"], again["historical_count"]) == (s, str(count))


def test_times_are_noted_as_parts_change_and_stand_where_they_are_brought_back(twelve_minutes):
    """A part is set when it becomes what it is; what is taken away has no time; what is brought back keeps its own."""
    now = empty()
    first, second, third = twelve_minutes
    note_times(now, first)
    assert now.set_times == {}
    now.fields |= {"target": "5.00", "limit": "0.05"}
    note_times(now, first)
    now.fields |= {"readings_text": "5.01\n5.02", "limit": ""}
    note_times(now, second)
    assert question_times.in_words(now.set_times) == {"readings": second.isoformat(), "target": first.isoformat()}
    now.fields |= {"target": "5.10", "alternative": "greater"}
    note_times(now, third)
    assert now.set_times["target"] == now.set_times["alternative"] == third.isoformat()
    now.fields["alternative"] = "two-sided"
    kept = question_times.in_words(now.set_times) | {"a part of another version": "2026-12-01T08:00:00+00:00"}
    times_stand(now, question_times.from_words(kept))
    note_times(now, third)
    assert now.set_times["readings"] == second.isoformat()


@pytest.fixture
def twelve_minutes():
    return [datetime(2026, 12, 1, 9, minute, tzinfo=UTC) for minute in (0, 6, 12)]


def test_a_level_that_is_no_round_percentage_comes_back(book):
    """α = 0.0125 stands in its field as 1.25 %, and is read as the same number."""
    fields = reopening.question_fields(meanlab.Question("5.0", significance="0.0125"), ".")
    assert fields["significance"] == "1.25 %"
    assert asked.significance(fields["significance"]) == Decimal("0.0125")
