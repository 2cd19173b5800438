"""What an Intake tells: its entries with their places and roles, its counts, its readings for the analysis."""

import subprocess
import sys
from decimal import Decimal

import pytest

import meanlab
from meanlab.core.complaints import IntakeComplaint, QuestionComplaint
from meanlab.intake import read_number

MIXED = "Nitrate (mg/L)\n5,02\n\n<0,05\nNA\n12,3O\n5,10*\nOVER\n"


def test_every_entry_has_its_place_its_text_and_its_role():
    """Blank lines and headings are no entries; a plain reading has the role "reading", all others say what they are."""
    found = meanlab.read(MIXED)
    assert [(entry.index, entry.place, entry.text, entry.role) for entry in found.entries] == [
        (0, "line 2", "5,02", "reading"),
        (1, "line 4", "<0,05", "below the limit 0,05"),
        (2, "line 5", "NA", "missing"),
        (3, "line 6", "12,3O", "could not be read: not a number"),
        (4, "line 7", "5,10*", 'reading, marked "*"'),
        (5, "line 8", "OVER", "above a limit that is not named"),
    ]
    assert found.entries[-1].text == "OVER"
    assert [entry.place for entry in found.entries[1:3]] == ["line 4", "line 5"]


def test_one_line_says_the_counts():
    """What was read, kept apart, missing and refused, the decimal sign and the places."""
    assert meanlab.read(MIXED).counts_line() == (
        "2 read · 1 below a limit · 1 above a limit · 1 missing · 1 refused · decimal comma · 2 places"
    )
    assert meanlab.read("5.1\n5.2\n").counts_line() == "2 read · 0 refused · decimal point · 1 place"


def test_the_readings_for_the_analysis_keep_texts_places_and_limits():
    """Numbers as exact decimals with their zeros, the texts as typed, places among all entries, limits beside them."""
    readings = meanlab.read(MIXED).reading_set(left_out={4: "air bubble"})
    assert readings.values == (Decimal("5.02"), Decimal("5.10"))
    assert readings.typed == ("5,02", "5,10*")
    assert readings.positions == (0, 4)
    assert [(one.index, one.kind, one.limit, one.typed) for one in readings.censored] == [
        (1, "below", Decimal("0.05"), "<0,05"),
        (5, "above", None, "OVER"),
    ]
    assert (readings.unit, readings.name, readings.decimal_sign, readings.computed) == ("mg/L", "Nitrate", ",", False)
    assert readings.left_out == {4: "air bubble"}


def test_the_dict_has_the_fixed_names():
    """The public face: these keys and no others."""
    assert meanlab.read("5.10\n<0.5\n").to_dict() == {
        "values": [5.1],
        "censored": [{"index": 1, "kind": "below", "limit": 0.5}],
        "missing": 0,
        "rejected": [],
        "unit": None,
        "name": None,
        "decimals": 2,
        "warnings": [],
        "notes": [],
        "refused": False,
        "reason": "",
        "needs_choice": False,
        "choices": [],
    }


def test_the_grounds_of_the_decimal_sign_are_kept():
    """The evidence names an entry that cannot be read otherwise."""
    found = meanlab.read("1,234\n0,412\n")
    assert (found.decimal_sign, found.evidence) == (",", 'decimal comma: "0,412" cannot be read otherwise')


def test_a_refused_or_open_intake_gives_no_readings():
    """The complaint of the readings is the reason of the intake."""
    with pytest.raises(IntakeComplaint, match="Two units"):
        meanlab.read("5 mg/L\n5 g\n").reading_set()
    with pytest.raises(IntakeComplaint, match="decimal sign"):
        meanlab.read("1,234\n1,235\n").reading_set()


@pytest.mark.parametrize(
    "wrong",
    [(5,), (None,), (["5.02"],), ("5", 3), ("5", None, "A"), ("5", None, {"colour": 1}), ("5", None, {"decimal": ";"})],
)
def test_arguments_of_a_wrong_type_are_a_complaint(wrong):
    """Content never raises; a wrong call does."""
    with pytest.raises(IntakeComplaint):
        meanlab.read(*wrong)


def test_preparations_between_pasted_readings_are_proposed():
    """Lines that name preparations label the readings below them; they count only where they are taken."""
    found = meanlab.read("Nitrate (mg/L)\nPrep A\n5.02\n<0.05\n\nPrep B:\n5.01\n5.03\n")
    assert found.preparations == ("Prep A", "Prep A", "Prep B", "Prep B")
    assert (found.values, found.name) == ([5.02, 5.01, 5.03], "Nitrate")
    assert any("preparation" in note for note in found.notes)
    assert found.reading_set().preparations is None
    taken = found.reading_set(preparations=found.preparations)
    assert taken.preparations == ("Prep A", "Prep B", "Prep B")
    assert taken.censored[0].preparation == "Prep A"


def test_a_chosen_preparation_column_counts():
    """The labels of the column that was chosen reach the readings without a further word."""
    text = "Prep,Injection,Nitrate\n1,1,5.02\n1,2,5.04\n2,1,4.98\n2,2,5.01\n"
    assert meanlab.read(text).preparations == ("1", "1", "2", "2")
    assert meanlab.read(text).reading_set().preparations is None
    assert meanlab.read(text, None, {"preparation": "Prep"}).reading_set().preparations == ("1", "1", "2", "2")


def test_columns_tell_what_could_be_chosen():
    """Readings first; heading, place, unit, role, number of rows and the first three values."""
    found = meanlab.columns(b"Run;Sample;Nitrat [mg/l];;pH\n1;QC-2;5,02;;7,2\n2;QC-2;<0,05;;7,3\n", "x.csv")
    assert [(one.column, one.column_index, one.unit, one.role, one.count, one.rows) for one in found] == [
        ("Nitrat [mg/l]", 2, "mg/l", "readings", 2, 2),
        ("pH", 4, None, "readings", 2, 2),
        ("Run", 0, None, "counter", 2, 2),
        ("Sample", 1, None, "label", 0, 2),
    ]
    assert found[0].first == ("5,02", "<0,05")


@pytest.mark.parametrize(
    ("typed", "sign", "expected"),
    [
        ("5.000", ".", "5.000"),
        (" 5,000 ", ",", "5,000"),
        ("5,02", ".", "5,02"),
        ("−0.05", ".", "−0.05"),
        ("+5.0", None, "+5.0"),
        ("1.5e-3", ".", "1.5e-3"),
        ("1.2×10⁻³", ".", "1.2e-3"),
        ("1,2×10⁻³", ",", "1,2e-3"),
        ("1,234.50", ".", "1234.50"),
        ("1.234,50", ",", "1234,50"),
        ("1 234.5", ".", "1234.5"),
        ("1’234", ".", "1234"),
        ("1.234", ".", "1.234"),
        ("1,234", ",", "1,234"),
        ("\u200b5.02\ufeff", ".", "5.02"),
        ("５．０２", ".", "5.02"),
    ],
)
def test_the_number_of_a_field_stays_as_typed(typed, sign, expected):
    """Zeros and the decimal sign stay; marks of thousands and invisible characters go."""
    assert read_number(typed, sign) == expected


@pytest.mark.parametrize(
    ("typed", "sign", "said"),
    [
        ("", ".", "not a number"),
        ("five", ".", "not a number"),
        ("5 6", ".", "not a number"),
        ("12,3O", ",", "12,30"),
        ("NA", ".", "leave the field empty"),
        ("<5", ".", "limit"),
        ("5.02 ± 0.03", ".", "remark"),
        ("5.02*", ".", "remark"),
        ("5 mg/L", ".", "unit"),
        ("5 %", ".", "unit"),
        ("1,234", ".", "1.234 or 1234"),
        ("1.234", ",", "1.234 or 1234"),
        ("1,234", None, "1.234 or 1234"),
        ("12:30", ".", "not a number"),
        ("=5", ".", "not a number"),
        ("1e400", ".", "1e-300"),
        ("9" * 50, ".", "40 significant"),
    ],
)
def test_a_field_without_one_number_is_a_complaint(typed, sign, said):
    """The complaint is one of the question and says what was found and what to do."""
    with pytest.raises(QuestionComplaint, match=said):
        read_number(typed, sign)


def test_the_intake_starts_without_the_heavy_libraries():
    """A child process that only parses files imports no numerical library and no reader of workbooks."""
    heavy = "numpy scipy pandas statsmodels openpyxl python_calamine streamlit plotly sqlalchemy"
    asked = f"import sys, meanlab.intake; print([name for name in {heavy.split()!r} if name in sys.modules])"
    done = subprocess.run([sys.executable, "-c", asked], capture_output=True, text=True, check=True)
    assert done.stdout.strip() == "[]"


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("Dear colleague, samples 3 and 4 were fine.", "is not a number"),
        ("Dear all,\nthe mean was 5.02\nregards", "computed figures"),
        ("The samples were fine and we all went home at 5.", "is not a number"),
    ],
)
def test_a_letter_is_no_column_of_readings(text, said):
    """A number inside a sentence is no reading."""
    found = meanlab.read(text)
    assert found.refused
    assert said in found.reason
