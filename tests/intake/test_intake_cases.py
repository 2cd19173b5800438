"""Texts and files as laboratories have them, each with the parse that a technician calls right.

cases.json and files/ were invented for this project with their answers before any code was written; where sensible
people differ, several answers are listed.
"""

import json
from pathlib import Path

import pytest
from judging import problems

import meanlab

HERE = Path(__file__).parent
CASES = json.loads((HERE / "cases.json").read_text(encoding="utf-8"))


def _read(case):
    if "text" in case:
        source = case["text"]
    else:
        source = (HERE / "files" / case["path"]).read_bytes() if "path" in case else case["bytes"].encode("latin-1")
    return meanlab.read(source, case.get("filename"), case.get("selection")).to_dict()


@pytest.mark.parametrize("case", CASES, ids=[f"{case['kind']}: {case['why'][:60]}" for case in CASES])
def test_what_people_have_is_read_right(case):
    """The dict of the intake is one of the answers that a technician would give."""
    found = _read(case)
    differences = [problems(expected, found) for expected in case["expected"]]
    assert [] in differences, differences[0]


def test_two_thousand_columns_are_no_trouble():
    """One of very many columns is found by its heading and its place."""
    headings = ",".join(f"ch{i}" for i in range(2000))
    rows = "\n".join(",".join(f"{(i % 97 + 10 * row) / 100:.2f}" for i in range(2000)) for row in range(1, 7))
    found = meanlab.read(f"{headings}\n{rows}\n".encode(), "wide.csv", {"column": "ch1234", "column_index": 1234})
    assert found.values == [(1234 % 97 + 10 * row) / 100 for row in range(1, 7)]
    assert found.name == "ch1234"
