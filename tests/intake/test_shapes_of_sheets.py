"""Sheets as people lay them out, from the file to the readings; the workbooks are written here by openpyxl."""

import datetime
import io

import openpyxl
import pytest
from judging import problems

import meanlab

READINGS = [5.02, 5.04, 4.98, 5.01]
PLAIN = {"values": READINGS, "name": "Nitrate", "unit": "mg/L", "decimals": 2, "missing": 0, "rejected": 0}
DAY = datetime.datetime(2026, 3, 4)


def workbook(sheets, number_format="General"):
    book = openpyxl.Workbook()
    book.remove(book.active)
    for name, rows in sheets.items():
        sheet = book.create_sheet(name)
        for row in rows:
            sheet.append(list(row))
        for cells in sheet.iter_rows(min_row=2):
            for cell in cells:
                if isinstance(cell.value, float):
                    cell.number_format = number_format
    file = io.BytesIO()
    book.save(file)
    return file.getvalue()


def beside(heading, *labels):
    return [[heading, "Nitrate (mg/L)"], *zip(labels, READINGS, strict=True)]


def under(heading, *values):
    return [[heading], *([value] for value in values)]


CASES = {
    "one column": ({"R": under("Nitrate (mg/L)", *READINGS)}, {}, PLAIN | {"quiet": True}),
    "a counter beside": ({"R": beside("Run", 1, 2, 3, 4)}, {}, PLAIN | {"quiet": True}),
    "sample numbers beside": ({"R": beside("Sample no.", 417, 418, 419, 420)}, {}, PLAIN),
    "dates beside": ({"R": beside("Date", *(DAY + datetime.timedelta(i) for i in range(4)))}, {}, PLAIN),
    "times beside": ({"R": beside("Time", *(datetime.time(9, 10 + i) for i in range(4)))}, {}, PLAIN),
    "notes on another sheet": (
        {"Notes": [["Worksheet WS-1"], ["Analyst M. Keel"]], "R": under("Nitrate (mg/L)", *READINGS)},
        {},
        PLAIN,
    ),
    "not in the corner": (
        {"R": [[], [], [None, None, "Nitrate (mg/L)"], *([None, None, v] for v in READINGS)]},
        {},
        PLAIN,
    ),
    "facts above": (
        {"R": [["Northmere"], ["Cell length (mm)", 10], [], *beside("Run", 1, 2, 3, 4)]},
        {},
        PLAIN,
    ),
    "a row of units": (
        {"R": [["Run", "Nitrate"], [None, "mg/L"], *enumerate(READINGS, 1)]},
        {},
        PLAIN,
    ),
    "on its side": ({"R": [["Nitrate (mg/L)", *READINGS]]}, {}, PLAIN),
    "figures below": (
        {"R": [*beside("Run", 1, 2, 3, 4), [None, None], ["Mean", 5.0125], ["SD", 0.025]]},
        {},
        PLAIN | {"warnings_any_of": ["Mean"]},
    ),
    "a figure without a name below": (
        {"R": [*beside("Run", 1, 2, 3, 4), [None, 5.05]]},
        {},
        {"values": [*READINGS, 5.05], "warnings_any_of": ["last row"]},
    ),
    "no heading": ({"R": [[value] for value in READINGS]}, {}, PLAIN | {"name": None, "unit": None}),
    "limits and gaps": (
        {"R": under("Nitrate (mg/L)", 5.02, "<0.05", "NA", 4.98)},
        {},
        {"values": [5.02, 4.98], "censored": [{"index": 1, "kind": "below", "limit": 0.05}], "missing": 1},
    ),
    "decimal commas as text": ({"R": under("Nitrate (mg/L)", 5.02, "5,04", "4,98", "5,01")}, {}, PLAIN),
    "a truth value": ({"R": under("Nitrate (mg/L)", 5.02, True)}, {}, {"values": [5.02], "rejected": 1}),
    "signs beside": (
        {"R": [["Sample", "Q", "Value", "Unit"], ["a", None, 0.12, "mg/L"], ["b", "<", 0.05, "mg/L"]]},
        {},
        {"values": [0.12], "censored": [{"index": 1, "kind": "below", "limit": 0.05}], "unit": "mg/L"},
    ),
    "two sheets": (
        {"A": under("Nitrate", *READINGS), "B": under("Chloride", 24.1)},
        {},
        {"needs_choice": True, "choices_include": ["Nitrate", "Chloride"]},
    ),
    "two sheets, one chosen": (
        {"A": under("Nitrate (mg/L)", *READINGS), "B": under("Cl", 24.1)},
        {"sheet": "A"},
        PLAIN,
    ),
    "a sheet that is not there": (
        {"A": under("Nitrate", *READINGS)},
        {"sheet": "X"},
        {"refused": True, "must_mention": ["X"]},
    ),
    "two columns": (
        {"R": [["Nitrate", "pH"], *([value, 7.2] for value in READINGS)]},
        {},
        {"needs_choice": True, "choices_include": ["Nitrate", "pH"]},
    ),
    "samples with replicates": (
        {"R": beside("Sample", "A", "A", "B", "B")},
        {},
        {"needs_choice": True, "choices_include": ["'Sample': 'B'"]},
    ),
    "one of the samples": (
        {"R": beside("Sample", "A", "A", "B", "B")},
        {"where": {"Sample": "B"}},
        PLAIN | {"values": [4.98, 5.01]},
    ),
    "replicates across": (
        {"R": [["Sample", "rep 1", "rep 2"], ["A", 5.02, 5.04], ["B", 6.02, 6.04]]},
        {"columns": ["rep 1", "rep 2"], "where": {"Sample": "B"}},
        {"values": [6.02, 6.04]},
    ),
    "words only": ({"R": [["hello"], ["world"]]}, {}, {"refused": True, "must_mention": ["not a number"]}),
}


@pytest.mark.parametrize(("sheets", "selection", "expected"), CASES.values(), ids=CASES.keys())
def test_a_sheet_of_any_usual_shape_is_read(sheets, selection, expected):
    """Where the readings stand, what stands beside, above and below them."""
    found = meanlab.read(workbook(sheets), "readings.xlsx", selection)
    assert problems(expected, found.to_dict()) == []


def test_entries_of_a_sheet_have_their_cells_as_places():
    """A reading from a workbook is found again by its cell."""
    found = meanlab.read(workbook({"R": beside("Run", 1, 2, 3, 4)}), "readings.xlsx")
    assert [entry.place for entry in found.entries] == ["B2", "B3", "B4", "B5"]
    on_its_side = meanlab.read(workbook({"R": [["Nitrate", *READINGS]]}), "readings.xlsx")
    assert [entry.place for entry in on_its_side.entries] == ["B1", "C1", "D1", "E1"]


def test_the_format_of_numbers_shows_their_places():
    """Zeros that the number format shows belong to the reading; a unit in the format is the unit."""
    shown = meanlab.read(workbook({"R": under("Mass", 1.2, 1.25)}, "0.000"), "readings.xlsx")
    assert ([entry.text for entry in shown.entries], shown.decimals) == (["1.200", "1.250"], 3)
    with_unit = meanlab.read(workbook({"R": under("Mass", 1.2, 1.25)}, '0.000" g"'), "readings.xlsx")
    assert (with_unit.values, with_unit.unit) == ([1.2, 1.25], "g")
    percent = meanlab.read(workbook({"R": under("Fat", 0.0381, 0.0379)}, "0.00%"), "readings.xlsx")
    assert (percent.values, percent.unit) == ([3.81, 3.79], "%")
