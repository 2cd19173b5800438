"""The notebook on the page without a browser: save, find, open, amend, verify, and who sees what."""

import json
import sqlite3
from contextlib import closing
from hashlib import sha256
from pathlib import Path

import pytest
from streamlit.testing.v1 import AppTest

import meanlab.page.cache as cache
from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook import Notebook

ROOT = Path(__file__).resolve().parents[2]


@pytest.fixture(autouse=True)
def bench(tmp_path, monkeypatch):
    """Each test has a notebook of its own, on this computer's own address."""
    monkeypatch.chdir(ROOT)
    monkeypatch.setenv("MEANLAB_DATABASE_URL", f"sqlite:///{tmp_path / 'notebook.db'}")
    monkeypatch.setattr(cache, "kept_on_this_address", lambda: True)


def opened(key: str = "") -> AppTest:
    page = AppTest.from_file(str(ROOT / "app.py"), default_timeout=60)
    if key:
        page.query_params["nb"] = key
    return page.run()


def typed(page: AppTest, readings: str, target: str = "5.000") -> AppTest:
    page.text_area(key="readings_text").set_value(readings)
    page.text_input(key="target").set_value(target)
    return page.run()


def said(page: AppTest) -> str:
    assert not page.exception
    return "\n".join(element.proto.body for element in page.get("html"))


def save(page: AppTest, **written: str) -> AppTest:
    page.button(key="save_entry").click().run()
    for name, text in written.items():
        page.text_input(key=f"written_{name}").set_value(text)
    return page.button(key="save_now").click().run()


def show_notebook(page: AppTest, number: int = 0) -> AppTest:
    """Show the part Notebook, and one entry of it as a click on its line does."""
    page.get("button_group")[0].set_value("Notebook").run()
    if number:
        page.session_state["entry_chosen"] = Notebook().entries()[number - 1].key
        page.run()
    return page


def key_of(page: AppTest) -> str:
    given = page.query_params["nb"]
    return given if isinstance(given, str) else given[0]


def test_a_result_is_saved_with_all_that_was_typed(twelve):
    """One click more than the words; number and time stand beside the button, the words and the text in the entry."""
    page = save(typed(opened(), twelve), title="Control, morning", by="A. Keller", method="SOP 12")
    assert "Entry 1 saved" in said(page)
    (line,) = Notebook().entries()
    entry = Notebook().entry(line.key)
    assert (entry.title, entry.by, entry.method) == ("Control, morning", "A. Keller", "SOP 12")
    assert entry.source.text == twelve
    assert [one.text for one in entry.source.entries] == twelve.split()
    assert {"readings", "target"} <= set(entry.set_times)
    assert entry.set_times["target"] <= entry.time
    assert Notebook().verify() == []


def test_the_same_result_is_no_second_entry(twelve):
    """A second click saves nothing; another result does."""
    page = save(typed(opened(), twelve))
    page.session_state["save_entry_wanted"] = True
    page.run()
    assert len(Notebook().entries()) == 1
    page.button(key="save_entry").click().run()
    assert "This result is entry 1" in said(page)
    typed(page, twelve, "5.010")
    assert "Entry 1 saved" not in said(page)
    page.button(key="save_now").click().run()
    assert "Entry 2 saved" in said(page)


def test_what_was_set_after_the_result_has_its_own_time_and_name(twelve):
    """A limit set after a result is in the entry as set afterwards, with the time at which it was set."""
    page = typed(opened(), twelve)
    page.text_input(key="limit").set_value("0.05").run()
    save(page)
    entry = Notebook().entry(Notebook().entries()[0].key)
    assert entry.analysis.question.set_after == ("equivalence limit",)
    assert entry.set_times["equivalence limit E"] >= entry.set_times["target"]


def test_an_entry_is_found_after_a_refresh_and_in_a_new_page(twelve):
    """The list, the search and the line beside the button know it; the bench's words stand in a new page."""
    page = typed(opened(), twelve)
    page.text_input(key="material").set_value("control NC-7")
    page.selectbox(key="significance").set_value("1 %").run()
    save(page, title="Morning", by="A. Keller", instrument="photometer 2")
    again = opened(key_of(page))
    assert "Entry 1 saved" in said(again)
    fresh = show_notebook(opened())
    assert "1 entry" in said(fresh)
    assert fresh.session_state["written_by"] == "A. Keller"
    assert fresh.session_state["written_instrument"] == "photometer 2"
    assert fresh.selectbox(key="significance").value == "1 %"
    assert fresh.session_state["written_title"] == ""
    fresh.text_input(key="search").set_value("nc-7 keller").run()
    assert "1 entry found" in said(fresh)
    fresh.text_input(key="search").set_value("no such words").run()
    assert "No entry holds all of these words" in said(fresh)


def test_an_entry_opens_with_readings_and_question_and_the_page_before_can_be_put_back(twelve):
    """Open brings text, target and the rest back; the same result is known to be entry 1; put back undoes it."""
    page = typed(opened(), twelve)
    page.selectbox(key="target_kind").set_value("upper limit").run()
    save(page, title="Morning")
    page.selectbox(key="target_kind").set_value("nominal value").run()
    typed(page, "7.1\n7.2\n7.3", "7.0")
    show_notebook(page, 1)
    assert "every digit is the same" in said(page)
    page.button(key="entry_open").click().run()
    assert page.text_area(key="readings_text").value == twelve
    assert page.selectbox(key="target_kind").value == "upper limit"
    assert "Entry 1 saved" in said(page)
    assert page.button(key="put_back").help.startswith("Entry 1 was opened")
    page.button(key="put_back").click().run()
    assert page.text_area(key="readings_text").value == "7.1\n7.2\n7.3"
    assert page.text_input(key="target").value == "7.0"
    assert page.selectbox(key="target_kind").value == "nominal value"


def test_an_entry_of_a_file_opens_with_its_file_in_a_new_page(twelve):
    """The entry holds name, checksum and column; the file that another page still keeps comes back with it."""
    content = "Run,Nitrate,Nitrite\n" + "".join(f"{n},{text},0.1\n" for n, text in enumerate(twelve.split(), 1))
    page = opened()
    page.get("file_uploader")[0].upload("runs.csv", content.encode(), "text/csv").run()
    page.selectbox(key="column").set_value(1)
    page.text_input(key="target").set_value("5.000").run()
    save(page)
    source = Notebook().entry(Notebook().entries()[0].key).source
    assert (source.file_name, source.size, source.text) == ("runs.csv", len(content), "")
    assert source.checksum == sha256(content.encode()).hexdigest()
    fresh = show_notebook(opened(), 1)
    fresh.button(key="entry_open").click().run()
    assert "From <b>runs.csv</b>" in said(fresh)
    assert fresh.selectbox(key="column").value == 1
    assert "t(11) = 4.08" in said(fresh)
    assert "Entry 1 saved" in said(fresh)


def test_what_was_set_after_stays_so_when_the_entry_is_opened(twelve):
    """Opening an entry does not make an afterthought forgotten."""
    page = typed(opened(), twelve)
    page.text_input(key="limit").set_value("0.05").run()
    save(page)
    fresh = show_notebook(opened(), 1)
    fresh.button(key="entry_open").click().run()
    assert "Set after the readings were seen" in said(fresh)
    assert "Entry 1 saved" in said(fresh)


def test_an_amendment_needs_its_reason_and_leaves_the_entry_as_it_is(twelve):
    """Without a reason a sentence; with one a new entry that names the old one, which stays."""
    page = save(typed(opened(), twelve), title="Morning", by="A. Keller")
    before = Notebook().entry(Notebook().entries()[0].key)
    typed(page, twelve.replace("4.998", "4.989"))
    show_notebook(page, 1)
    page.button(key="amend_save").click().run()
    assert "needs its reason" in said(page)
    assert len(Notebook().entries()) == 1
    page.text_input(key="amend_reason").set_value("reading 9 was copied wrongly").run()
    page.button(key="amend_save").click().run()
    assert "Entry 2 saved" in said(page)
    assert "Amends" in said(page)
    first, second = Notebook().entries()
    assert (first.amended_by, second.amends) == (2, 1)
    assert Notebook().entry(first.key) == before
    assert Notebook().entry(second.key).by == "A. Keller"
    assert Notebook().verify() == []


def test_verify_says_whole_and_finds_a_change(twelve, tmp_path):
    """Verify says that all is as saved; after a change behind its back it names the entry."""
    page = show_notebook(save(typed(opened(), twelve)))
    page.button(key="verify").click().run()
    assert "1 entry is as it was saved" in said(page)
    with closing(sqlite3.connect(tmp_path / "notebook.db")) as connection:
        connection.execute("DROP TRIGGER entry_content_no_update")
        connection.execute("UPDATE entry_content SET content = CAST(replace(content, '5.012', '5.013') AS BLOB)")
        connection.commit()
    page.button(key="verify").click().run()
    assert "not all is as it was saved" in said(page)
    assert "Entry 1: its content is not what was saved." in said(page)
    show_notebook(page, 1)
    assert "The content of this entry is not what was saved" in said(page)


def test_a_copy_is_made_where_it_is_asked_for(twelve, tmp_path):
    """Back up writes a database that is the same notebook; a folder that is not there gets a sentence."""
    page = show_notebook(save(typed(opened(), twelve)))
    page.text_input(key="copy_folder").set_value(str(tmp_path / "absent")).run()
    page.button(key="back_up").click().run()
    assert "Not copied" in said(page)
    (tmp_path / "stick").mkdir()
    page.text_input(key="copy_folder").set_value(str(tmp_path / "stick")).run()
    page.button(key="back_up").click().run()
    (copy,) = (tmp_path / "stick").glob("*.db")
    assert str(copy) in said(page)
    assert Notebook(f"sqlite:///{copy}").verify() == []
    assert [one.key for one in Notebook(f"sqlite:///{copy}").entries()] == [one.key for one in Notebook().entries()]


def test_a_record_file_is_opened_to_read(twelve):
    """Its entries are shown and verified; none of it enters the notebook, nothing of it can be amended."""
    page = show_notebook(save(typed(opened(), twelve), title="Morning"))
    content = Notebook().exported()
    page.get("file_uploader")[-1].upload("bench.meanlab.json", content, "application/json").run()
    assert "Record file bench.meanlab.json, opened to read" in said(page)
    assert "1 entry is as it was saved" in said(page)
    with pytest.raises(KeyError):
        page.button(key="amend_save")
    page.button(key="record_close").click().run()
    assert "opened to read" not in said(page)
    assert len(Notebook().entries()) == 1


@pytest.mark.parametrize(
    ("change", "expected"),
    [
        (lambda text: text.replace("5.012", "5.013"), "not all is as it was saved"),
        (lambda text: text[: len(text) // 2], "no record file"),
        (lambda text: text.replace('"format":1', '"format":99', 1), "newer meanlab"),
        (lambda text: json.dumps([1, 2]), "no record file"),
    ],
)
def test_a_record_file_that_was_changed_or_is_none_gets_a_sentence(change, expected, twelve):
    """A changed figure is found, half a file and a newer one are refused with a sentence."""
    page = show_notebook(save(typed(opened(), twelve)))
    content = change(Notebook().exported().decode()).encode()
    page.get("file_uploader")[-1].upload("bench.meanlab.json", content, "application/json").run()
    assert expected in said(page)


def test_on_another_address_the_notebook_is_off(twelve, monkeypatch, tmp_path):
    """Open to other computers nothing is kept or shown, and both places say why; the files can be taken."""
    save(typed(opened(), twelve), title="Secret of the bench")
    monkeypatch.setattr(cache, "kept_on_this_address", lambda: False)
    before = (tmp_path / "notebook.db").stat().st_mtime_ns
    page = show_notebook(typed(opened(), twelve, "5.010"))
    page.button(key="save_entry").click().run()
    assert said(page).count("The notebook is off") == 2
    assert "Secret of the bench" not in said(page)
    with pytest.raises(KeyError):
        page.button(key="save_now")
    page.session_state["save_entry_wanted"] = True
    page.run()
    assert (tmp_path / "notebook.db").stat().st_mtime_ns == before
    assert len(Notebook().entries()) == 1
    page.button(key="record_files").click().run()
    assert len(page.get("download_button")) == 6


def test_a_guessed_address_opens_no_page_and_the_notebook_says_whose_entries_these_are(twelve):
    """A wrong key gives an empty page; entries belong to the bench and say so; no entry opens by a guessed key."""
    page = save(typed(opened(), twelve))
    other = opened(key_of(page)[:-1] + "_")
    assert "Nothing is kept under this address" in said(other)
    assert other.text_area(key="readings_text").value == ""
    show_notebook(other)
    assert "whoever opens meanlab on this computer sees these entries" in said(other)
    other.session_state["entry_chosen"] = "guessed"
    other.run()
    assert "There is no such entry" in said(other)


def test_a_notebook_that_cannot_be_written_is_said_and_the_page_works_on(twelve, monkeypatch):
    """The result stands, the words stay in their fields, and a sentence says that nothing was saved."""
    page = typed(opened(), twelve)
    page.button(key="save_entry").click().run()
    page.text_input(key="written_title").set_value("Morning").run()

    def full(*_args, **_kwargs):
        raise NotebookComplaint("The notebook cannot be used (database or disk is full).")

    monkeypatch.setattr(Notebook, "add", full)
    page.button(key="save_now").click().run()
    assert "disk is full" in said(page)
    assert "t(11) = 4.08" in said(page)
    assert page.text_input(key="written_title").value == "Morning"


def test_markup_in_an_entry_stays_text(twelve):
    """Words about an entry, and what a record file says, appear letter by letter."""
    word = "<img src=x onerror=alert(1)> [a](http://b.c)"
    page = typed(opened(), twelve)
    page.text_input(key="quantity").set_value(word).run()
    save(page, title=word, by=word, note=word)
    show_notebook(page, 1)
    assert "&lt;img src=x" in said(page)
    assert "<img" not in said(page)
    assert not page.markdown
