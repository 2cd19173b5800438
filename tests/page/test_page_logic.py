"""The page without a browser: what it says for what is typed, what it keeps and what it brings back."""

from pathlib import Path

import pytest
from streamlit.testing.v1 import AppTest

import meanlab.page.cache as cache
from meanlab.page import guard

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


def typed(page: AppTest, readings: str, target: str = "") -> AppTest:
    page.text_area(key="readings_text").set_value(readings)
    if target:
        page.text_input(key="target").set_value(target)
    return page.run()


def said(page: AppTest) -> str:
    assert not page.exception
    return "\n".join(element.proto.body for element in page.get("html"))


def key_of(page: AppTest) -> str:
    given = page.query_params["nb"]
    return given if isinstance(given, str) else given[0]


def test_an_empty_page_says_what_to_do_and_keeps_nothing():
    """One sentence, no error, and no address is given out before anything was typed."""
    page = opened()
    assert "Paste the readings, one a line, and type the target" in said(page)
    assert "nb" not in page.query_params


def test_readings_and_a_target_give_the_result(twelve):
    """No further click is needed."""
    page = typed(opened(), twelve, "5.000")
    text = said(page)
    assert "t(11) = 4.08" in text
    assert "p = 0.0018" in text
    assert "<span>12</span> of 12 readings" in text
    assert "5.000" in text


@pytest.mark.parametrize(
    ("readings", "target", "expected"),
    [
        ("5.02\n5.03\n5.04", "", "type the target"),
        ("", "5.00", "paste the readings"),
        ("5.02", "5.00", "not testable"),
        ("5.02\n5.02\n5.02", "5.00", "not testable"),
        ("5.02\n5.03\n5.04", "five", "not a number"),
        ("Dear colleague, the samples were fine and we all went home early.", "5.00", "read"),
    ],
)
def test_what_cannot_be_tested_gets_a_sentence(readings, target, expected):
    """Half a question, one value, identical readings, a target in words, prose: a sentence, and the text stays."""
    page = typed(opened(), readings, target)
    assert expected in said(page)
    assert page.text_area(key="readings_text").value == readings
    assert page.text_input(key="target").value == target


def test_the_side_follows_a_limit():
    """An upper limit is asked for its excess, a lower one for what falls below, anything else either way."""
    page = typed(opened(), "5.02\n5.03\n5.04", "5.00")
    page.selectbox(key="target_kind").set_value("upper limit").run()
    assert page.selectbox(key="alternative").value == "greater"
    page.selectbox(key="target_kind").set_value("lower limit").run()
    assert page.selectbox(key="alternative").value == "less"
    page.selectbox(key="target_kind").set_value("nominal value").run()
    assert page.selectbox(key="alternative").value == "two-sided"


def test_a_refresh_brings_everything_back(twelve):
    """The address alone is enough: readings, question, choices and what is left out."""
    page = typed(opened(), twelve, "5.000")
    page.text_input(key="sigma").set_value("0.02")
    page.text_input(key="sigma_origin").set_value("chart 2025")
    page.get("button_group")[0].set_value("Checks").run()
    again = opened(key_of(page))
    assert again.text_area(key="readings_text").value == twelve
    assert again.text_input(key="target").value == "5.000"
    assert again.text_input(key="sigma_origin").value == "chart 2025"
    assert again.get("button_group")[0].value == "Checks"
    assert "chart 2025" in said(again)


def test_an_address_is_not_adopted(twelve):
    """A wrong key opens nothing, and what is typed then goes under a key of the server's own."""
    page = typed(opened(), twelve, "5.000")
    other = opened("guessed")
    assert other.text_area(key="readings_text").value == ""
    assert "Nothing is kept under this address" in said(other)
    typed(other, "1\n2\n3", "2")
    assert key_of(other) not in ("guessed", key_of(page))
    assert opened(key_of(page)).text_area(key="readings_text").value == twelve


def test_a_clear_can_be_put_back(twelve):
    """Readings and question go and come back, also after a refresh in between."""
    page = typed(opened(), twelve, "5.000")
    page.button(key="clear").click().run()
    assert page.text_area(key="readings_text").value == ""
    assert page.text_input(key="target").value == ""
    again = opened(key_of(page))
    again.button(key="put_back").click().run()
    assert again.text_area(key="readings_text").value == twelve
    assert "t(11) = 4.08" in said(again)


def test_a_replace_can_be_put_back_and_a_correction_is_none(twelve):
    """Other readings set the old ones aside; a corrected line does not."""
    page = typed(opened(), twelve, "5.000")
    typed(page, twelve.replace("4.998", "4.989"))
    with pytest.raises(KeyError):
        page.button(key="put_back")
    typed(page, "7.1\n7.2\n7.3")
    page.button(key="put_back").click().run()
    assert page.text_area(key="readings_text").value == twelve.replace("4.998", "4.989")
    page.button(key="put_back").click().run()
    assert page.text_area(key="readings_text").value == "7.1\n7.2\n7.3"


def test_a_reading_is_left_out_only_with_a_cause(twelve):
    """Without a cause it stays; with one it is left out, stays visible, and can be counted again."""
    page = typed(opened(), twelve, "5.000")
    page.text_input(key="leave_out_number").set_value("10")
    page.button(key="leave_out").click().run()
    assert "only with its cause" in said(page)
    page.text_input(key="leave_out_cause").set_value("air bubble")
    page.button(key="leave_out").click().run()
    assert "left out: air bubble" in said(page)
    assert "<span>11</span> of 12 readings" in said(page)
    page.button(key="take_back_9").click().run()
    assert "<span>12</span> of 12 readings" in said(page)


def test_further_readings_are_a_further_look(twelve):
    """Readings added after a result are counted and said in the sentence."""
    first = "\n".join(twelve.split()[:8])
    page = typed(opened(), first, "5.000")
    assert "test no." not in said(page)
    typed(page, twelve)
    assert "test no. 2 on this question" in said(page)


def test_a_limit_set_after_the_result_is_said_unless_it_was_fixed_before(twelve):
    """The sentence says so; the technician can state that the limit was fixed before measuring."""
    page = typed(opened(), twelve, "5.000")
    page.text_input(key="limit").set_value("0.05").run()
    assert "Set after the readings were seen" in said(page)
    page.checkbox(key="fixed_before").check().run()
    assert "Set after the readings were seen" not in said(page)


def test_a_place_that_cannot_be_written_is_said_and_the_page_works_on(twelve, tmp_path, monkeypatch):
    """The result stands, and a sentence says that nothing is saved."""
    (tmp_path / "taken").write_text("no folder", encoding="utf-8")
    monkeypatch.setenv("MEANLAB_DATABASE_URL", f"sqlite:///{tmp_path / 'taken' / 'notebook.db'}")
    page = typed(opened(), twelve, "5.000")
    assert "t(11) = 4.08" in said(page)
    assert "Not saved" in said(page)
    assert "nb" not in page.query_params


def test_on_another_address_nothing_is_kept(twelve, monkeypatch, tmp_path):
    """Open to other computers the page keeps nothing on the server, and says so."""
    monkeypatch.setattr(cache, "kept_on_this_address", lambda: False)
    page = typed(opened(), twelve, "5.000")
    assert "nothing is kept on the server" in said(page)
    assert not (tmp_path / "notebook.db").exists()


def test_a_fault_of_ours_becomes_a_sentence(twelve, monkeypatch):
    """An unexpected failure leaves the inputs and what was typed as they are."""

    def broken(*_args):
        raise RuntimeError("boom")

    monkeypatch.setattr(cache, "outcome", broken)
    page = typed(opened(), twelve, "5.000")
    assert "a fault of meanlab" in said(page)
    assert "boom" not in said(page)
    assert page.text_area(key="readings_text").value == twelve


def test_markup_stays_text(twelve):
    """Names with markup, links or formulas appear letter by letter."""
    page = typed(opened(), twelve, "5.000")
    page.text_input(key="quantity").set_value("<b>x</b> [a](http://b.c) $y$").run()
    assert "&lt;b&gt;x&lt;/b&gt; [a](http://b.c) $y$" in said(page)
    assert "<b>x</b>" not in said(page)
    assert not page.markdown


@pytest.mark.parametrize(
    "part",
    ["What was read", "Checks", "Same readings, other procedures", "Enough readings?", "Uncertainty", "Agreement"],
)
def test_every_lower_part_can_be_drawn_with_and_without_a_result(part, twelve):
    """No part needs a result to say what it is for."""
    page = opened()
    page.get("button_group")[0].set_value(part).run()
    assert "could not be drawn" not in said(page)
    typed(page, twelve, "5.000")
    assert "could not be drawn" not in said(page)


def test_planning_needs_no_reading():
    """Ten readings find a difference of one standard deviation with 80 % (exact: 9.94 → 10, from memory)."""
    page = opened()
    page.get("button_group")[0].set_value("Enough readings?").run()
    page.text_input(key="plan_difference").set_value("1")
    page.text_input(key="plan_s").set_value("1").run()
    assert "10 readings" in said(page)


def test_what_is_typed_into_a_part_is_there_when_the_part_comes_back():
    """Fields that are not on the page for a while keep what was typed, also over a refresh."""
    page = opened()
    page.get("button_group")[0].set_value("Enough readings?").run()
    page.text_input(key="plan_difference").set_value("1.5").run()
    page.get("button_group")[0].set_value("Checks").run()
    page.run()
    again = opened(key_of(page))
    for shown in (page, again):
        shown.get("button_group")[0].set_value("Enough readings?").run()
        assert shown.text_input(key="plan_difference").value == "1.5"
        shown.text_input(key="plan_difference").set_value("").run()
        assert shown.text_input(key="plan_difference").value == ""


def test_a_decimal_sign_is_asked_for_where_nothing_shows_it_and_forgotten_with_the_readings():
    """ "1,234" alone asks, one click settles it, and other readings are read as they are written."""
    page = typed(opened(), "1,234\n1,241\n1,229", "1,23")
    assert "The decimal sign cannot be told" in said(page)
    sign = next(group for group in page.get("button_group") if group.key == "decimal_sign")
    page = sign.set_value("decimal comma").run()
    assert "<span>3</span> of 3 readings" in said(page)
    page = typed(page, "5.1\n5.2\n5.4", "5.0")
    assert "<span>3</span> of 3 readings" in said(page)
    assert "5.23" in said(page)


def test_a_session_that_ends_in_the_middle_of_a_run_is_no_fault(caplog):
    """Streamlit's state changed by another thread is a warning without a traceback; any other failure keeps its own."""
    source = "def moved():\n    raise RuntimeError('dictionary changed size during iteration')\n"
    names = {}
    exec(compile(source, "/x/streamlit/runtime/state/session_state.py", "exec"), names)
    with guard.guarded("question"):
        names["moved"]()
    assert "Traceback" not in caplog.text
    with guard.guarded("question"):
        raise RuntimeError("ours")
    assert "Traceback" in caplog.text
