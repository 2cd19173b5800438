"""What a cell shows for the number it stores.

Source of the codes and of what they show: ECMA-376-1 §18.8.30 and §18.8.31 (number formats); the fifteen digits a
spreadsheet shows are common practice.
"""

import pytest

from meanlab.intake.number_formats import NumberFormat, number_text


@pytest.mark.parametrize(
    ("code", "number", "text", "kind"),
    [
        ("0.00", 5.1, "5.10", "number"),
        ("0.0", 5.0234, "5.0234", "number"),
        ("General", 5.1, "5.1", "number"),
        ("", 4.0, "4", "number"),
        ("0.0##", 5.12, "5.12", "number"),
        ("#.##", 5.1, "5.1", "number"),
        ("#,##0.00", 1234.5, "1234.50", "number"),
        ("_-* #,##0.00_-;-* #,##0.00_-", -1234.5, "-1234.50", "number"),
        ("[Red]0.000", -5.1, "-5.100", "number"),
        ("0.00;(0.00)", -5.1, "-5.10", "number"),
        ("0.00%", 0.0381, "3.81%", "number"),
        ("0.00%", 0.38, "38.00%", "number"),
        ("0%", 0.0381, "3.81%", "number"),
        ("0.00E+00", 5.1, "5.10E+0", "number"),
        ("0.0,", 12345.0, "12345", "number"),
        ("# ?/?", 0.5, "0.5", "number"),
        (";;;", 3.0, "3", "number"),
        ("@", 5.1, "5.1", "number"),
        ('0.00" mg/L"', 5.1, "5.10 mg/L", "number"),
        ('0.0\\ "°C"', 20.0, "20.0 °C", "number"),
        ('0.00" kg (dry)"', 5.1, "5.10 kg (dry)", "number"),
        ('"<"0.00', 0.05, "<0.05", "number"),
        ('[<0.05]"<0.05";0.00', 0.02, "<0.05", "text"),
        ('[<0.05]"<0.05";0.00', 0.2, "0.20", "number"),
        ('0.00;-0.00;"n.d."', 0.0, "n.d.", "text"),
        ("yyyy-mm-dd", 46058.0, "2026-02-05", "date"),
        ("[$-407]d. mmm", 46058.5, "2026-02-05 12:00:00", "date"),
        ("hh:mm", 0.35, "08:24:00", "date"),
        ("[h]:mm", 0.35, "08:24:00", "date"),
        ("mm:ss.0", 0.001, "00:01:26", "date"),
        ('"day "0', 3.0, "day 3", "number"),
    ],
)
def test_a_number_takes_from_its_format_what_decides_a_reading(code: str, number: float, text: str, kind: str) -> None:
    """The stored number stays whole; the format adds zeros, percent, unit or limit sign, or makes it a date."""
    cell = NumberFormat(code).cell(number)
    assert (cell.text, cell.kind) == (text, kind)


@pytest.mark.parametrize(
    ("number", "text"),
    [
        (0.1 + 0.2, "0.3"),
        (5.02 * 3 / 3 + 0.0, "5.02"),
        (5.0199999999999996, "5.02"),
        (2 / 3, "0.6666666666666666"),
        (5e-05, "0.00005"),
        (1e300, "1E+300"),
        (-0.0, "0"),
        (12345678901.5, "12345678901.5"),
        (123456789012345.0, "123456789012345"),
    ],
)
def test_a_stored_number_is_written_as_short_as_it_is(number: float, text: str) -> None:
    """Binary dust behind the fifteen digits a spreadsheet shows is no resolution; true digits stay."""
    assert number_text(number) == text
    assert float(text) == pytest.approx(number, rel=1e-15)
