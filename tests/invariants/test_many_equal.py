"""Two thousand samples of every kind, judged together: each row is, to the last bit, what ``analyse`` finds of it."""

import numpy as np
import pandas as pd
import pytest

from meanlab import Question, ReadingSet, analyse_many
from meanlab.analysis import decide
from meanlab.many import COLUMNS

SAMPLES = 2000
SHAPES = (
    "normal",
    "ties",
    "skewed",
    "far",
    "both ends",
    "uniform",
    "constant",
    "single",
    "coarse",
    "wide",
    "computed",
    "at target",
)
KNOWN = {"sigma": "0.04", "sigma_origin": "records of 2026"}
# questions that take different ways through the rule, the tests, agreement and the verdict
QUESTIONS = {
    "two-sided, E": Question("5.00", equivalence_limit="0.05"),
    "greater": Question("5.01", "greater", "0.1"),
    "less, E, median": Question("5.01", "less", equivalence_limit="0.02", parameter="median"),
    "uncertain target": Question(
        "5.00", target_uncertainty="0.01", target_uncertainty_df=12.0, equivalence_limit="0.1"
    ),
    "known σ": Question("5.00", **KNOWN, sigma_df=30.0, measurement_uncertainty="0.005", equivalence_limit="0.05"),
    "declared step": Question("5.00", resolution="0.01"),
    "signed rank by method": Question("5.00", procedure="signed_rank", equivalence_limit="0.05"),
    "guarded t by method": Question("5.00", "greater", procedure="guarded_t"),
    "t by method, own u": Question("5.00", "less", procedure="t", measurement_uncertainty="0.01"),
    "sign by method": Question("5.00", procedure="sign", equivalence_limit="0.05"),
}


def readings_of(shape: str, n: int, generator: np.random.Generator) -> list[float]:
    """Return invented readings near 5 of one shape; most have two or three decimals and ties."""
    draws = {
        "normal": lambda: generator.normal(5.01, 0.04, n).round(3),
        "ties": lambda: generator.normal(5.0, 0.02, n).round(2),
        "skewed": lambda: (4.95 + generator.exponential(0.05, n)).round(3),
        "far": lambda: np.append(generator.normal(5.0, 0.02, n - 1), 5.9).round(3),
        "both ends": lambda: (5 + generator.choice([-0.3, 0.3], n) + generator.normal(0, 0.01, n)).round(3),
        "uniform": lambda: generator.uniform(4.9, 5.1, n).round(3),
        "constant": lambda: np.full(n, 5.02),
        "single": lambda: generator.normal(5.0, 0.05, 1).round(3),
        "coarse": lambda: generator.normal(5.0, 0.2, n).round(1),
        "wide": lambda: generator.normal(5e6, 4e5, n).round(6),
        "computed": lambda: generator.normal(5.01, 0.04, n),
        "at target": lambda: np.where(generator.random(n) < 0.5, 5.0, generator.normal(5.03, 0.03, n).round(2)),
    }
    return draws[shape]().tolist()


@pytest.fixture(scope="module")
def mixed() -> list[list[float]]:
    """Samples of every shape with 1 to 70 readings."""
    generator = np.random.default_rng(20261207)
    counts = generator.choice([2, 3, 5, 7, 8, 9, 10, 12, 20, 33, 70], SAMPLES, p=[0.05, *[0.1] * 9, 0.05])
    return [
        readings_of(str(shape), int(n), generator)
        for shape, n in zip(generator.choice(SHAPES, SAMPLES), counts, strict=True)
    ]


def row_of(readings, question: Question) -> tuple:
    """Return what the heart of an analysis finds, in the order of the columns."""
    found = decide(readings if isinstance(readings, ReadingSet) else ReadingSet(tuple(readings)), question)
    units, test, plain = found.units, found.test, found.units.sample
    return (
        units.n,
        plain.mean if plain else None,
        plain.s if plain and units.n > 1 else None,
        test.interval.low if test else None,
        test.interval.high if test else None,
        test.offsets[0] if test else plain.difference if plain else None,
        test.statistic if test else None,
        test.df if test else None,
        test.p_value if test else None,
        found.route.procedure,
        found.verdict,
        found.route.reasons[0] if test is None else "",
    )


def assert_rows_are(found: pd.DataFrame, expected: list[tuple]):
    """Assert that every figure of every row is the expected one to the last bit."""
    names = [name for name in COLUMNS if name != "p_holm"]
    flags = found["flags"].str.replace("; not after Holm", "").str.replace("not after Holm", "")
    rows = found.assign(flags=flags)[names].itertuples(index=False, name=None)
    for place, (row, wanted) in enumerate(zip(rows, expected, strict=True)):
        differing = {
            name: (one, other)
            for name, one, other in zip(names, row, wanted, strict=True)
            if not (pd.isna(one) if other is None else one == other)
        }
        assert not differing, (place, differing)


def long_table(samples: list[list]) -> pd.DataFrame:
    """Return the samples as one reading a row."""
    names = np.repeat([f"lot {place:04}" for place in range(len(samples))], [len(sample) for sample in samples])
    return pd.DataFrame({"lot": names, "value": [reading for sample in samples for reading in sample]})


def test_the_samples_are_of_every_kind(mixed):
    """The rule takes every way on them: each procedure, and samples that cannot be tested."""
    found = analyse_many(long_table(mixed), "value", "lot", QUESTIONS["two-sided, E"])
    assert set(found["procedure"].dropna()) == {"t", "guarded_t", "signed_rank"}
    assert set(found["verdict"]) == {"differs", "differs, within the limit", "agrees", "cannot tell", "not testable"}


@pytest.mark.parametrize("name", QUESTIONS)
def test_every_row_is_one_analysis(name, mixed):
    """Procedure, figures, verdict and reason of 2,000 samples are those of each alone, for every kind of question."""
    question, some = QUESTIONS[name], mixed if name == "two-sided, E" else mixed[:500]
    found = analyse_many(long_table(some), "value", "lot", question)
    assert_rows_are(found, [row_of(sample, question) for sample in some])


def test_texts_limits_and_gaps(mixed):
    """Decimal commas, entries below a limit, missing ones and own targets: each row is that of its own readings."""
    generator = np.random.default_rng(20261208)
    question, entries, expected, targets = Question("0"), [], [], {}
    for place, sample in enumerate(mixed[:400]):
        texts = [f"{reading:.6g}".replace(".", ",") for reading in sample]
        kinds = ["plain"] * len(texts)
        if place % 4 == 0:
            for at in generator.choice(len(texts), min(2, len(texts)), replace=False):
                texts[at], kinds[at] = "<4,98", "below"
        target = f"{5 + 0.01 * (place % 7):.2f}"
        targets[f"lot {place:04}"] = target
        censored = tuple(
            {"index": at, "kind": "below", "limit": "4,98"} for at, kind in enumerate(kinds) if kind == "below"
        )
        plain = tuple(text for text, kind in zip(texts, kinds, strict=True) if kind == "plain")
        expected.append(row_of(ReadingSet(plain, censored=censored), Question(target)))
        entries.append([*texts, *["n/a", ""][: place % 3]])
    found = analyse_many(long_table(entries), "value", "lot", question, targets)
    gone = [len(texts) - len(sample) for texts, sample in zip(entries, mixed[:400], strict=True)]
    assert [int((flags or "0").split(" ")[0]) if "missing" in flags else 0 for flags in found["flags"]] == gone
    found["flags"] = found["flags"].str.replace(r"^\d missing(; )?", "", regex=True)
    assert_rows_are(found, expected)


def test_a_wide_table_is_the_long_one(mixed):
    """Replicates in several columns, one row a sample, give the rows of the same readings one below the other."""
    some = [sample for sample in mixed if len(sample) in (7, 8)][:200]
    wide = pd.DataFrame([[*sample, None][:8] for sample in some], columns=[f"r{i}" for i in range(8)])
    question = QUESTIONS["two-sided, E"]
    found = analyse_many(wide.assign(lot=range(len(some))), list(wide.columns), "lot", question)
    assert [flags.startswith("1 missing") for flags in found["flags"]] == [len(sample) == 7 for sample in some]
    assert_rows_are(
        found.assign(flags=found["flags"].str.replace(r"^1 missing(; )?", "", regex=True)),
        [row_of(sample, question) for sample in some],
    )
