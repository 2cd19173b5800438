"""NIST StRD certified means and standard deviations: all 15 digits, and the nearest double to the exact value."""

import json
from fractions import Fraction
from math import nextafter
from pathlib import Path

import pytest

from meanlab import Question, analyse

CASES = json.loads(Path(__file__).with_name("cases.json").read_text("utf-8"), parse_float=str, parse_int=str)
# Univariate Summary Statistics of the Statistical Reference Datasets (public domain)
STRD = [case for case in CASES if case["id"].startswith("strd_")]
MICHELSON = next(case for case in CASES if case["id"] == "michelson1879_vs_true_greater")
ALTERNATING = {
    "NumAcc3": ["1000000.2"] + ["1000000.1", "1000000.3"] * 500,
    "NumAcc4": ["10000000.2"] + ["10000000.1", "10000000.3"] * 500,
}
FIFTEEN_DIGITS = "{:.14e}"


def summary_of(readings):
    """Return the readings in figures."""
    return analyse(readings, Question("0", procedure="t")).summary


def to_fifteen(number: float) -> str:
    """Return a number with 15 significant digits."""
    return FIFTEEN_DIGITS.format(number)


@pytest.mark.parametrize("case", STRD, ids=lambda case: case["id"])
def test_certified_values_are_met_to_all_15_digits(case):
    """Mean and s print the 15 certified digits, whatever the offset of the readings."""
    summary = summary_of(case["data"])
    for name, found in (("mean", summary.mean), ("sd", summary.s)):
        assert to_fifteen(found) == to_fifteen(float(case["printed"][name])), name


@pytest.mark.parametrize("case", [*STRD, MICHELSON], ids=lambda case: case["id"])
def test_means_and_s_are_the_nearest_doubles(case):
    """Against exact fractions: the mean is rounded once, and s is the double nearest to the exact root."""
    values = [Fraction(text) for text in case["data"]]
    n, mean = len(values), sum(values) / len(values)
    variance = sum((value - mean) ** 2 for value in values) / (n - 1)
    summary = summary_of(case["data"])
    assert summary.mean == float(mean)
    below, above = ((Fraction(summary.s) + Fraction(nextafter(summary.s, end))) / 2 for end in (0.0, 1e300))
    assert below**2 <= variance <= above**2


@pytest.mark.parametrize(("name", "mean"), [("NumAcc3", "1000000.2"), ("NumAcc4", "10000000.2")])
def test_alternating_readings_have_exactly_the_certified_s(name, mean):
    """NumAcc3 and NumAcc4 (StRD): 1,001 readings of certified mean and s = 0.1; plain sums keep 8 digits of s."""
    summary = summary_of(ALTERNATING[name])
    assert (summary.n, summary.mean, summary.s) == (1001, float(mean), 0.1)


def test_the_dataset_michelso_of_strd():
    """Michelson's 100 readings in 1,000 km/s: certified mean 299.8524 and s 0.0790105478190518 (StRD, from memory)."""
    readings = [
        f"299.{int(text):03d}" if int(text) < 1000 else f"300.{int(text) - 1000:03d}" for text in MICHELSON["data"]
    ]
    summary = summary_of(readings)
    assert summary.mean == 299.8524
    assert to_fifteen(summary.s) == to_fifteen(0.0790105478190518)
