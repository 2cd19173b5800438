"""The numbers as CSV: in full, with the decimal sign of the readings, and nothing in it is a formula."""

import csv
import io

from hypothesis import given
from hypothesis import strategies as st

from meanlab.records import numbers_csv
from meanlab.records.numbers import safe


def rows_of(content: bytes) -> list[list[str]]:
    text = content.decode("utf-8-sig")
    return list(csv.reader(io.StringIO(text, newline=""), delimiter=";" if text.startswith("part;") else ","))


def figures(content: bytes) -> dict[tuple[str, str], str]:
    return {(part, name): value for part, name, value in rows_of(content)}


def test_every_number_stands_in_full_with_the_decimal_sign_of_the_readings(analysis):
    """Readings with a comma: numbers with a comma between semicolons, every digit of the double."""
    found = figures(numbers_csv(analysis))
    assert float(found["test", "statistic"].replace(",", ".")) == analysis.test.statistic
    assert float(found["test", "p value"].replace(",", ".")) == analysis.test.p_value
    assert float(found["test", "critical, high"].replace(",", ".")) == analysis.test.critical[1]
    assert found["summary", "n"] == "12"
    assert found["question", "target as typed"] == "5,000"
    assert all(
        "." not in value for (part, _), value in found.items() if part in ("summary", "test", "power", "difference")
    )


def test_readings_with_a_point_give_points_and_commas(many_kinds):
    """Readings with a point: numbers with a point, fields between commas."""
    content = numbers_csv(many_kinds["sign"])
    assert content.startswith(b"\xef\xbb\xbfpart,name,value\r\n")
    assert figures(content)["summary", "median"] == repr(many_kinds["sign"].summary.median)


def test_the_readings_stand_as_typed_with_role_and_cause(many_kinds):
    """Below-limit and left-out readings are told apart, with the cause."""
    below = figures(numbers_csv(many_kinds["below a limit"]))
    assert below["readings as typed", "3 (below-limit)"] == "<0.05"
    out = figures(numbers_csv(many_kinds["left out"]))
    assert out["readings as typed", "9 (reading, left out: air bubble in the cell, seen at the time)"] == "4,998"


def test_every_kind_of_result_has_three_columns(many_kinds):
    """Any result, a not testable one too, is a table of three columns with lines as RFC 4180 ends them."""
    for analysis in many_kinds.values():
        content = numbers_csv(analysis)
        assert {len(row) for row in rows_of(content)} == {3}
        assert content.count(b"\r\n") >= len(rows_of(content))
        assert numbers_csv(analysis) == content


def test_no_text_of_the_user_is_a_formula(analysed):
    """Texts that a spreadsheet would compute get an apostrophe; separators, quotes, line ends stay inside a field."""
    bad = '=HYPERLINK("http://x";"y")'
    analysis = analysed(material=bad, quantity="@sum", units_are="+1\r\n=2", unit='-"a";b')
    cells = [cell for row in rows_of(numbers_csv(analysis)) for cell in row]
    assert f"'{bad}" in cells
    assert "'@sum" in cells
    assert not any(cell.lstrip().startswith(("=", "@")) for cell in cells)


@given(st.text(max_size=20))
def test_a_cell_never_begins_like_a_formula_unless_it_is_a_number(text):
    """Whatever is typed: the cell begins with a sign of command only where the whole of it is a number."""
    cell = safe(text)
    if cell.lstrip(" ").startswith(("=", "+", "-", "@", "\t", "\r", "\n")):
        float(cell.replace(",", "."))


def test_negative_numbers_stay_numbers():
    """A difference of −0.5 can be added up in a spreadsheet; what only begins like a number cannot compute."""
    assert [safe(text) for text in ("-0.5", "-0,5", "+3", "-1e-05", "1.5")] == ["-0.5", "-0,5", "+3", "-1e-05", "1.5"]
    assert [safe(text) for text in ("-0.5+A1", "-", "+a", " =1", "−5")] == ["'-0.5+A1", "'-", "'+a", "' =1", "'−5"]
