"""What cannot be compared or asked gets a plain sentence on the page, and nothing that was typed is lost."""

from pathlib import Path

import pytest
from streamlit.testing.v1 import AppTest

import meanlab.page.cache as cache

ROOT = Path(__file__).resolve().parents[2]
TWELVE = "5.012\n5.043\n5.028\n5.009\n5.051\n5.017\n5.026\n5.033\n4.998\n4.987\n5.021\n5.034"


@pytest.fixture(autouse=True)
def bench(tmp_path, monkeypatch):
    """Each test has a notebook of its own, on this computer's own address."""
    monkeypatch.setenv("MEANLAB_DATABASE_URL", f"sqlite:///{tmp_path / 'notebook.db'}")
    monkeypatch.setattr(cache, "kept_on_this_address", lambda: True)


@pytest.mark.parametrize(
    ("readings", "fields", "said"),
    [
        ("5.02\n5.02\n5.02", {}, "they do not scatter at their resolution"),
        ("5.02", {}, "without a known σ nothing tells how far such readings scatter"),
        (TWELVE, {"sigma": "0", "sigma_origin": "records"}, "The known σ is 0; it must be more than 0"),
        (TWELVE, {"sigma": "-1", "sigma_origin": "records"}, "it must be more than 0"),
        (TWELVE, {"sigma": "0.02"}, "A known σ needs its origin"),
        (TWELVE, {"limit": "0"}, "The equivalence limit E is 0; it must be more than 0"),
        (TWELVE, {"limit": "a bit"}, "equivalence limit E"),
        (TWELVE, {"own_uncertainty": "-0.1"}, "it must be 0 or more"),
        (TWELVE, {"certificate_value": "0.02"}, "but not what it is"),
        (TWELVE, {"matters": "-1"}, "difference that matters"),
        ("<0.05\n<0.05\n<0.05\n<0.05\n<0.05", {}, "of 5 readings"),
        (
            "Preparation\tResult\nA\t5.01\nA\t5.02",
            {"preparation": "Preparation"},
            "which counts as one independent unit",
        ),
        ("Nitrate (mg/L)\n5.01\n5.04\n5.03", {"unit": "µg/L"}, "bring both to one unit"),
    ],
)
def test_a_question_that_cannot_be_answered_gets_a_sentence(readings, fields, said):
    """Identical readings, one reading, σ, E or u out of range, all below the limit, one preparation, two units."""
    page = AppTest.from_file(str(ROOT / "app.py"), default_timeout=60).run()
    page.text_area(key="readings_text").set_value(readings)
    page.text_input(key="target").set_value("5.00")
    page.run()
    for key, value in fields.items():
        if key == "preparation":
            page.selectbox(key=key).set_value(value)
        else:
            page.text_input(key=key).set_value(value)
    page.run()
    assert not page.exception
    text = "\n".join(element.proto.body for element in page.get("html"))
    assert said in text
    assert page.text_area(key="readings_text").value == readings
    assert all(page.text_input(key=key).value == value for key, value in fields.items() if key != "preparation")
