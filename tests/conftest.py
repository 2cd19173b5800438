"""Analyses of every kind, for the tests of what keeps or writes them; the readings are invented."""

import pytest

import meanlab

NITRATE = ("5,012", "5,043", "5,028", "5,009", "5,051", "5,017", "5,026", "5,033", "4,998", "5,021", "5,034", "4,987")


def analysed(readings=NITRATE, target="5,000", unit="mg/L", **known):
    """Return the analysis of readings; ``known`` goes to the question, but for what a ReadingSet takes."""
    of_set = {name: known.pop(name) for name in ("preparations", "censored", "left_out") if name in known}
    given = meanlab.ReadingSet(tuple(readings), unit=unit, name="Nitrate", **of_set)
    return meanlab.analyse(given, meanlab.Question(target, **known))


@pytest.fixture(scope="session", name="analysed")
def analysed_fixture():
    """The function that analyses readings."""
    return analysed


@pytest.fixture(scope="session")
def analysis():
    """An ordinary analysis: twelve readings by Student's t."""
    return analysed(material="control solution NC-7", units_are="independent preparations")


@pytest.fixture(scope="session")
def many_kinds():
    """Analyses of every kind: each procedure, preparations, censored, left out, agreement, not testable."""
    skewed = ("0.11", "0.12", "0.12", "0.14", "0.15", "0.18", "0.25", "0.47", "0.93", "0.13", "0.16")
    return {
        "t": analysed(),
        "agreement with a certificate": analysed(
            target="5,010", equivalence_limit="0,05", target_uncertainty=0.004, target_kind="certified value",
            target_uncertainty_df=30.0, difference_that_matters="0,03", set_after=("equivalence limit",), look=2,
        ),
        "z": analysed(procedure="z", sigma="0,02", sigma_origin="control chart, 60 results", sigma_df=59.0),
        "guarded t": analysed(skewed, "0.15", procedure="guarded_t", alternative="greater"),
        "signed rank": analysed(procedure="signed_rank", alternative="less", target_kind="upper limit"),
        "sign": analysed(skewed, "0.15", parameter="median", procedure="sign"),
        "below a limit": analysed(
            skewed, "0.10", censored=[{"index": 2, "kind": "below", "limit": "0.05", "typed": "<0.05"}],
            target_kind="lower limit", alternative="less",
        ),
        "preparations": analysed(NITRATE[:9], preparations=list("aaabbbccc"), run_order=True),
        "left out": analysed(left_out={8: "air bubble in the cell, seen at the time"}),
        "one reading": analysed(NITRATE[:1]),
        "alike": analysed(["5.0"] * 6, "5.1"),
    }  # fmt: skip
