"""Every published case that meanlab can answer, against the independent value and against what the source prints.

cases.json: readings, settings, ``computed`` (mpmath at 50 digits, exact whole numbers or quadrature: the value to meet)
and ``printed`` (digits of the source), with the source of each; ``how`` is "read", "computed" or "from memory". The
expected numbers come from there, none from meanlab.
"""

import json
from pathlib import Path

import pytest
from answers import ANSWERS

CASES = json.loads(Path(__file__).with_name("cases.json").read_text("utf-8"), parse_float=str, parse_int=str)
RELATIVE = 1e-9
LOOSER = {
    ("normality", "W"): 1e-6,
    ("normality", "p"): 1e-3,
    ("power", "power"): 1e-6,
    ("sample_size", "power_at_n"): 1e-6,
}

# figures of a source that belong to another question than ours, and why
OTHER_QUESTIONS = {
    ("descriptive", "lag1"): "shown with the run order only; tested there",
    ("t_test", "sd_n"): "the source's s has the divisor n",
    ("signed_rank", "z"): "normal approximation; ours is exact",
    ("signed_rank", "drop_T"): "zeros dropped; ours are by Pratt",
    ("signed_rank", "drop_p"): "zeros dropped; ours are by Pratt",
    ("signed_rank", "drop_exact_p"): "zeros dropped; ours are by Pratt",
    ("signed_rank", "pratt_p"): "normal approximation; ours is exact",
    ("median_interval", "rank_low"): "the place is told by the end of the interval",
    ("median_interval", "rank_high"): "the place is told by the end of the interval",
    ("run_order", "n1"): "only the runs and their expected number are given",
    ("run_order", "n2"): "only the runs and their expected number are given",
    ("run_order", "sd"): "runs are a figure, not a test",
    ("run_order", "z"): "runs are a figure, not a test",
    ("run_order", "p"): "runs are a figure, not a test",
    ("run_order", "bound"): "the lag-1 correlation is a figure, not a test",
    ("sample_size", "n_z_raw"): "whole numbers only",
    ("sample_size", "n_t_raw"): "whole numbers only",
    ("censored", "cohen_mean"): "Cohen's tabled approximation; ours is the maximum of the likelihood",
    ("censored", "cohen_sd"): "Cohen's tabled approximation; ours is the maximum of the likelihood",
    ("censored", "lambda_exact"): "a step of Cohen's approximation",
}
OTHER_NAMES = ("asym_", "nz(", "k(")  # normal approximations, z formula for n, place of a Walsh average
DROPPED_ZEROS = "_zeros_dropped"

# cases of the collection that meanlab has no answer to; they are not copied
WITHOUT_COUNTERPART = {
    "fisher1935_darwin_randomisation": "randomisation test of the mean: no such procedure",
    "vr_huber_chem": "robust mean: no such procedure",
    "nist_1352_zarr13": "a summary without readings; meanlab takes readings",
    "rorabacher1991_dixon_r10": "Dixon's ratio: far readings are found by Grubbs and generalised ESD",
    "dixon_one_sided_dean": "Dixon's ratio: far readings are found by Grubbs and generalised ESD",
    "statsmodels_runs_mean": "runs about the mean: ours are about the median, as a figure",
    "swed_eisenhart_10_10": "table of runs: ours are a figure, not a test",
    "willink2007_digitised_none3": "uncertainty of identical readings by Willink's formula: ours is r/√12, a note",
    "scipy_interval_norm": "readings between two limits: only one-sided limits are fitted",
    "nist_7263_tolerance": "tolerance interval: no such result",
    "iso16269_6_one_sided": "tolerance interval: no such result",
    "prediction_gum_temperature": "prediction interval: no such result",
    "prediction_tn1900": "prediction interval: no such result",
    "efron_mouse_median_se": "bootstrap: no such procedure",
    "exact_bootstrap_n5": "bootstrap: no such procedure",
    "chi2_table_nist": "a table of χ²; the check of σ is tested in tests/checks",
}


def is_other_question(topic: str, name: str) -> bool:
    """Tell whether a figure of the source answers another question than ours."""
    return (topic, name) in OTHER_QUESTIONS or name.startswith(OTHER_NAMES) or name == "k" or DROPPED_ZEROS in name


def numbers(value) -> list[float]:
    """Return a figure as a list of numbers; true and false are 1 and 0."""
    if isinstance(value, list):
        return [number for one in value for number in numbers(one)]
    return [float(value)]


@pytest.mark.parametrize("case", CASES, ids=lambda case: case["id"])
def test_a_published_case_is_met(case):
    """Each figure that meanlab gives agrees with the independent value: 1e-9; W 1e-6, its p 1e-3, power 1e-6."""
    found, topic = ANSWERS[case["topic"]](case), case["topic"]
    met = 0
    for name, expected in case["computed"].items():
        if is_other_question(topic, name):
            continue
        answer = found.get(name)
        assert answer is not None, f"{name} is not answered: list it as another question, or answer it"
        relative = LOOSER.get((topic, name.split("(")[0]), RELATIVE)
        assert numbers(answer) == pytest.approx(numbers(expected), rel=relative, abs=1e-300), (name, case["source"])
        met += 1
    assert met > 0


@pytest.mark.parametrize("case", [case for case in CASES if "printed" in case], ids=lambda case: case["id"])
def test_what_the_source_prints_is_met(case):
    """Where a source prints a figure, ours rounds to its digits; half a unit of its last digit is allowed twice."""
    found, topic = ANSWERS[case["topic"]](case), case["topic"]
    for name, text in case["printed"].items():
        answer = found.get(name)
        if is_other_question(topic, name) or answer is None or isinstance(text, list):
            continue
        digits = text.rstrip(".")
        places = len(digits.partition(".")[2].partition("e")[0])
        power = int(digits.partition("e")[2] or 0)
        assert float(answer) == pytest.approx(float(digits), rel=1e-9, abs=1.02 * 10.0 ** (power - places)), (
            name,
            case["source"],
        )


def test_every_case_is_told_apart():
    """A case is answered, or listed as without counterpart with the reason; a new one that is neither fails."""
    ids = [case["id"] for case in CASES]
    assert len(set(ids)) == len(ids)
    assert [case["id"] for case in CASES if case["topic"] not in ANSWERS] == []
    assert set(ids) & set(WITHOUT_COUNTERPART) == set()
    assert all(case["source"] and case["how"] in ("read", "computed", "from memory") for case in CASES)
