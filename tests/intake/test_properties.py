"""Whatever is pasted, an Intake comes back; and what was written in a known way is read back as it was."""

from contextlib import suppress
from decimal import Decimal
from random import Random

import hypothesis.strategies as drawn
import pytest
from hypothesis import HealthCheck, given, settings
from made_texts import made_selection, made_text

import meanlab
from meanlab.core.complaints import Complaint
from meanlab.intake import Intake, read_number
from meanlab.intake.characters import one_spelling
from meanlab.intake.entry import parse
from meanlab.intake.numerals import leaning, under

MANY = settings(max_examples=800, deadline=None, suppress_health_check=list(HealthCheck))
SOME = settings(max_examples=300, deadline=None, suppress_health_check=list(HealthCheck))
ODD = drawn.text(
    alphabet=drawn.one_of(drawn.sampled_from("0123456789.,;:<>±+-−eE%µ/()[]#*\"' \t\n\r"), drawn.characters())
)


def facts_of(source, filename=None, selection=None):
    found = meanlab.read(source, filename, selection)
    assert isinstance(found, Intake)
    facts = found.to_dict()
    counted = len(facts["values"]) + len(facts["censored"]) + facts["missing"] + len(facts["rejected"])
    assert counted == len(found.entries)
    assert bool(found.reason) == (found.refused or found.needs_choice)
    return facts


@MANY
@given(drawn.integers(0, 2**64))
def test_nothing_but_an_intake_comes_back_for_texts_like_those_people_have(seed):
    """Made-up columns, lists and tables, mixed and damaged: every entry is counted once, a refusal has its reason."""
    random = Random(seed)
    facts_of(made_text(random), None, made_selection(random))


@MANY
@given(ODD)
def test_nothing_but_an_intake_comes_back_for_any_text(text):
    """Any characters at all."""
    facts_of(text)


@SOME
@given(drawn.binary(max_size=300))
def test_nothing_but_an_intake_comes_back_for_any_bytes(data):
    """Any bytes under any name."""
    facts_of(data, "readings.xlsx")


@MANY
@given(ODD, drawn.sampled_from([None, ".", ","]))
def test_a_field_is_a_number_or_a_complaint(text, sign):
    """What comes back is read again as the same number; nothing but a Complaint is raised."""
    number = ""
    with suppress(Complaint):
        number = read_number(text, sign)
    if not number:
        return
    Decimal(number.replace(",", ".").replace("−", "-").replace("–", "-"))
    assert read_number(number, "," if "," in number else ".") == number


def exact_decimals(places):
    return drawn.integers(-(10**6), 10**6).map(lambda whole: Decimal(whole).scaleb(-places))


UNITS = ["", " mg/L", "mg/L", " %", "%", "\u00a0°C", " CFU/mL", " MPN/100 mL", " µS·cm⁻¹"]
STYLES = {
    "as it is": lambda i, text: text,
    "numbered": lambda i, text: f"{i}. {text}",
    "counted": lambda i, text: f"{i}\t{text}",
    "labelled": lambda i, text: f"QC-{i}: {text}",
    "timed": lambda i, text: f"09:{i:02d} {text}",
    "quoted": lambda i, text: f'"{text}"',
}


@MANY
@given(
    drawn.integers(1, 4).flatmap(lambda places: drawn.lists(exact_decimals(places), min_size=2, max_size=12)),
    drawn.sampled_from(".,"),
    drawn.sampled_from(UNITS),
    drawn.sampled_from(sorted(STYLES)),
    drawn.sampled_from(["\n", "\r\n", "\r"]),
    drawn.sampled_from(["", "Nitrate", "Nitrate (mg/L)", "Nitrate [mg/L]"]),
)
def test_a_well_formed_column_is_read_back_as_it_was_written(values, sign, unit, style, end, heading):
    """Every decimal sign, unit, numbering, line end and heading: same numbers, places, order and unit."""
    texts = [f"{value}".replace(".", sign) + unit for value in values]
    lines = [STYLES[style](i, text) for i, text in enumerate(texts, 1)]
    if heading.endswith((")", "]")) and unit.strip() not in ("", "mg/L"):
        heading = "Nitrate"
    heading = f"Run\t{heading}" if heading and style == "counted" else heading
    found = meanlab.read(end.join([heading] * bool(heading) + lines))
    decided = any(leaning(text.lstrip("-").removesuffix(unit)) == sign for text in texts)
    if not decided and sign == ",":
        assert found.needs_choice
        found = meanlab.read(end.join([heading] * bool(heading) + lines), None, {"decimal": ","})
    assert [Decimal(number) for number in found.numbers] == values
    assert found.decimals == -min(value.as_tuple().exponent for value in values)
    assert (found.unit or "") == (unit.strip() or ("mg/L" if "mg/L" in heading else ""))
    assert [entry.index for entry in found.entries] == list(range(len(values)))


@SOME
@given(drawn.lists(exact_decimals(2), min_size=2, max_size=9), drawn.sampled_from(["\t", ";", " ", "; ", ", "]))
def test_a_row_is_read_like_a_column(values, between):
    """Readings beside each other come in the order in which they stand."""
    found = meanlab.read(between.join(f"{value:.2f}" for value in values))
    assert [Decimal(number) for number in found.numbers] == values


@SOME
@given(
    drawn.lists(drawn.integers(1000, 10**9), min_size=2, max_size=8),
    drawn.sampled_from([(",", "."), (".", ","), ("'", "."), ("\u2009", ","), ("\u00a0", "."), ("’", ".")]),
)
def test_thousands_marks_are_taken_away(wholes, marks):
    """Grouped thousands of every style with one decimal place."""
    group, sign = marks
    texts = [f"{whole / 10:,.1f}".replace(",", "§").replace(".", sign).replace("§", group) for whole in wholes]
    found = meanlab.read("\n".join(texts))
    assert [Decimal(number) for number in found.numbers] == [Decimal(whole).scaleb(-1) for whole in wholes]


@SOME
@given(exact_decimals(3), drawn.sampled_from(["<", ">", "< ", "≤", "≥", ">="]), drawn.sampled_from(UNITS))
def test_a_limit_is_never_a_reading(value, sign, unit):
    """A below- or above-limit entry keeps its limit and stays out of the values."""
    found = meanlab.read(f"0.5{unit}\n{sign}{value}{unit}\n0.7{unit}")
    assert found.values == [0.5, 0.7]
    assert [(one.index, one.kind, one.limit) for one in found.censored] == [
        (1, "below" if sign[0] in "<≤" else "above", value)
    ]


@SOME
@given(drawn.text(alphabet="0123456789.,' ", min_size=1, max_size=12))
def test_a_numeral_has_at_most_two_meanings(text):
    """Under each decimal sign a numeral is one number or none; its plain text holds the same digits."""
    for sign in ".,":
        plain = under(text, sign)
        if plain is not None:
            assert [one for one in plain if one.isdigit()] == [one for one in text if one.isdigit()]
            Decimal(plain)
    assert (leaning(text) == "malformed") == (under(text, ".") is None and under(text, ",") is None)


@pytest.mark.parametrize("text", ["1" * 5000, "((((" * 2000, "1,2" * 3000, "- " * 5000, "±" * 4000, "e" * 5000 + "1"])
def test_long_entries_end_quickly(text):
    """No entry makes the grammar go back over itself without end."""
    assert parse(one_spelling(text)).kind in ("unread", "missing")
    facts_of(text)
    facts_of("5.02\n" + text)


MARKS = ["", "", "", "", "*", "(a)", "ok", "outlier", "<", "±", "%", "x", "QC-1", "Rep 1", "Sample", "pH:"]
BETWEEN = ["\t", ";", " ", "  ", ", ", "|", ": ", " - "]


def made_rows(random, marks):
    """Rows of numbers that are all different, and their texts with a decimal point."""
    used, rows = [], []
    between, sign = random.choice(BETWEEN), random.choice(".,")
    for _ in range(random.choice((1, 2, 3, 4))):
        cells = []
        for _ in range(random.choice((1, 1, 2, 3))):
            used.append(f"{random.randrange(1, 9)}.{10 + len(used)}")
            cells.append(f"{random.choice(marks)} {used[-1].replace('.', sign)}".strip())
        rows.append(between.join(cells))
    return "\n".join(rows), used


@MANY
@given(drawn.integers(0, 2**64))
def test_no_number_is_lost_or_made_up(seed):
    """Numbers in rows and columns of any shape: each is read or named in a message, and nothing else is read."""
    text, used = made_rows(Random(seed), [""])
    found = meanlab.read(text)
    if found.refused or found.needs_choice:
        return
    said = "\n".join([*(entry.text for entry in found.entries), *found.warnings, *found.notes]).replace(",", ".")
    assert [number for number in used if number not in said] == []
    assert set(found.values) <= {float(number) for number in used} | {-float(number) for number in used}


@MANY
@given(drawn.integers(0, 2**64))
def test_no_number_is_made_up_beside_marks_and_words(seed):
    """Whatever stands beside them: what is read are the numbers that were written, whole and not cut in two."""
    text, used = made_rows(Random(seed), MARKS)
    found = meanlab.read(text)
    allowed = {float(number) for number in used} | {-float(number) for number in used} | {1.0}
    assert set(found.values) <= allowed, (text, found.values)
