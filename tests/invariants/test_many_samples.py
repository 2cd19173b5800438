"""A table of many samples gives row by row the numbers of ``analyse``, and Holm's adjustment over the rows."""

from decimal import Decimal

import numpy as np
import pandas as pd
import pytest
from drawn import ALTERNATIVES, FEWER, drawn_readings
from hypothesis import given
from hypothesis import strategies as st

from meanlab import Complaint, Question, ReadingSet, analyse, analyse_many
from meanlab.many import COLUMNS, holm


def same(found, expected) -> bool:
    """Tell whether a cell is the number of an analysis to the last bit; nan where the analysis has None."""
    return bool(pd.isna(found)) if expected is None else found == expected


def assert_row_is(row, analysis):
    """Assert that a row of the results holds the figures of one analysis."""
    summary, test, difference = analysis.summary, analysis.test, analysis.difference
    expected = {
        "n": summary.n,
        "mean": summary.mean,
        "s": summary.s,
        "low": test.interval.low if test else None,
        "high": test.interval.high if test else None,
        "difference": difference.value if difference else None,
        "statistic": test.statistic if test else None,
        "df": test.df if test else None,
        "p": test.p_value if test else None,
        "procedure": analysis.route.procedure,
        "verdict": analysis.verdict,
    }
    assert {name: row[name] for name, value in expected.items() if not same(row[name], value)} == {}


@FEWER
@given(
    samples=st.lists(drawn_readings(fewest=1, most=12, scattering=False), min_size=1, max_size=6),
    alternative=st.sampled_from(ALTERNATIVES),
    seed=st.integers(0, 1000),
)
def test_each_row_is_one_analysis(samples, alternative, seed):
    """Samples mixed in one table, each with its own target: every figure is that of analyse, in order of appearance."""
    rows = [(f"sample {place}", text) for place, drawn in enumerate(samples) for text in drawn.readings]
    order = np.random.default_rng(seed).permutation(len(rows))
    table = pd.DataFrame([rows[place] for place in order], columns=["sample", "value"])
    targets = {f"sample {place}": drawn.target for place, drawn in enumerate(samples)}
    question = Question("0", alternative, equivalence_limit="0.5")
    found = analyse_many(table, "value", "sample", question, targets)
    assert found["sample"].tolist() == list(dict.fromkeys(table["sample"]))
    for _, row in found.iterrows():
        mine = Question(targets[row["sample"]], alternative, equivalence_limit="0.5")
        assert_row_is(row, analyse(table.loc[table["sample"] == row["sample"], "value"].tolist(), mine))


def test_preparations_limits_and_missing_values():
    """Preparations are averaged, "<0.05" counts as below a limit, missing and blank cells are counted in the flags."""
    table = pd.DataFrame(
        {
            "batch": ["A"] * 7 + ["B"] * 7 + ["C"] * 2,
            "prep": ["1", "1", "2", "2", "3", "3", "3"] * 2 + ["1", "1"],
            "mg": [
                *("5.1", "5.2", "4.9", "5.0", "5.3", None, "5.2"),
                *("0.2", "<0.1", "<0.1", "0.3", " ", "<0.1", "0.4"),
                *(None, ""),
            ],
        }
    )
    found = analyse_many(table, "mg", "batch", Question("0.5"), preparation="prep").set_index("batch")
    nested = ReadingSet(("5.1", "5.2", "4.9", "5.0", "5.3", "5.2"), preparations=("1", "1", "2", "2", "3", "3"))
    assert_row_is(found.loc["A"], analyse(nested, Question("0.5")))
    censored = tuple(
        {"index": i, "kind": "below", "limit": "0.1", "preparation": p} for i, p in ((1, 1), (2, 2), (4, 3))
    )
    limited = ReadingSet(("0.2", "0.3", "0.4"), preparations=("1", "2", "3"), censored=censored)
    assert_row_is(found.loc["B"], analyse(limited, Question("0.5")))
    assert found.loc["A", "flags"] == "1 missing"
    assert found.loc["C", "verdict"] == "not testable"
    assert "2 missing" in found.loc["C", "flags"]


@pytest.mark.parametrize("name", [*COLUMNS, "sample"])
def test_a_sample_column_may_bear_the_name_of_a_result(name):
    """A sample column called "s" or "p" stays apart from the result of that name."""
    table = pd.DataFrame({name: [1, 1, 1, 2, 2, 2], "x": [5.0, 5.1, 5.3, 4.0, 4.1, 4.5]})
    found = analyse_many(table, "x", name, Question("5"))
    label = name if name == "sample" else f"{name} (sample)"
    assert found.columns.tolist() == [label, *COLUMNS]
    assert found[label].tolist() == [1, 2]
    assert found["s"].tolist() == [analyse(one, Question("5")).summary.s for one in ([5.0, 5.1, 5.3], [4.0, 4.1, 4.5])]


def test_several_sample_columns_and_a_column_of_targets():
    """Samples may be told apart by several columns, and their targets may stand in a column of the table."""
    table = pd.DataFrame(
        {
            "lot": ["a", "a", "a", "a", "a", "a"],
            "day": [1, 1, 1, 2, 2, 2],
            "x": ["5.0", "5.1", "5.3", "4.0", "4.1", "4.5"],
            "nominal": ["5.0"] * 3 + ["4.2"] * 3,
        }
    )
    found = analyse_many(table, "x", ["lot", "day"], Question("0"), targets="nominal")
    assert found[["lot", "day"]].to_numpy().tolist() == [["a", 1], ["a", 2]]
    assert_row_is(found.iloc[1], analyse(["4.0", "4.1", "4.5"], Question("4.2")))


def test_a_sample_that_cannot_be_tested_keeps_its_row_with_the_reason():
    """What cannot be read, a sample without a target or without a reading: the others are judged all the same."""
    table = pd.DataFrame({"batch": ["A", "A", "B", "B", "C", "D", "D"], "x": ["1", "2", "3", "4,5,6", "", "7", "7"]})
    found = analyse_many(table, "x", "batch", Question("1")).set_index("batch")
    assert found["verdict"].tolist() == ["cannot tell", *["not testable"] * 3]
    assert found.loc["A", "flags"] == ""
    assert '"4,5,6" could not be read' in found.loc["B", "flags"]
    assert found.loc["C", "flags"] == "1 missing; no reading"
    assert found.loc["D", "flags"] == "the 2 readings are identical: they do not scatter at their resolution"
    found = analyse_many(table[:2], "x", "batch", Question("1"), {"B": 1})
    assert found["flags"].tolist() == ["it has no target; give each sample its own."]


def test_columns_that_are_not_there_are_complained_of():
    """A column that the table does not have, or has twice, ends in a complaint with what there is."""
    table = pd.DataFrame({"batch": ["A", "A"], "x": ["1", "2"]})
    with pytest.raises(Complaint, match='no column "lot" in the table; it has batch, x'):
        analyse_many(table, "x", "lot", Question("1"))
    doubled = pd.DataFrame([["A", 1.0, 2.0]], columns=["batch", "x", "x"])
    with pytest.raises(Complaint, match='more than one column "x"'):
        analyse_many(doubled, "x", "batch", Question("1"))


def test_a_table_in_pieces_is_gathered():
    """A table that is no pandas one is used by its compute(), as Dask's are."""
    whole = pd.DataFrame({"batch": ["A"] * 4, "x": [1.0, 2.0, 4.0, 3.0], "other": [object()] * 4})

    class InPieces:
        columns, dtypes = whole.columns, whole.dtypes

        def __getitem__(self, names):
            part = InPieces()
            part.compute = lambda: whole[names]
            return part

    found = analyse_many(InPieces(), "x", "batch", Question("2"))
    assert_row_is(found.iloc[0], analyse([1.0, 2.0, 4.0, 3.0], Question("2")))


def test_samples_without_a_label_are_one_sample():
    """Rows whose sample label is missing are kept together and keep their place in the order."""
    table = pd.DataFrame({"batch": ["z", None, "a", None, "z", "a"], "x": [1.0, 2.0, 3.0, 4.0, 5.0, 6.0]})
    found = analyse_many(table, "x", "batch", Question("2"))
    assert found["batch"].isna().tolist() == [False, True, False]
    assert found["mean"].tolist() == [3.0, 3.0, 4.5]


def test_progress_is_told_and_no_row_gives_no_result():
    """``progress`` hears (done, all) up to the last sample; an empty table gives an empty result with all columns."""
    heard = []
    table = pd.DataFrame({"batch": list("aabb"), "x": [1.0, 2.0, 3.0, 4.0]})
    analyse_many(table, "x", "batch", Question("2"), progress=lambda done, total: heard.append((done, total)))
    assert heard[-1] == (2, 2)
    empty = analyse_many(table[:0], "x", "batch", Question("2"))
    assert empty.columns.tolist() == ["batch", *COLUMNS]
    assert len(empty) == 0


@pytest.mark.parametrize(
    ("p", "adjusted"),
    [
        # step down by hand: (m − i)·p₍ᵢ₎ in rising order, never below an earlier one, at most 1 (Holm 1979)
        ([0.01, 0.04, 0.03, 0.005], [0.03, 0.06, 0.06, 0.02]),
        ([0.01, float("nan"), 0.04], [0.02, float("nan"), 0.04]),
        ([0.9, 0.8, 0.9], [1.0, 1.0, 1.0]),
        ([0.02, 0.02], [0.04, 0.04]),
        ([float("nan")], [float("nan")]),
        ([], []),
    ],
)
def test_holm_steps_down_over_the_rows_that_have_a_p(p, adjusted):
    """Rows without a p stay without one and do not count in the family."""
    assert holm(np.array(p, dtype=float)) == pytest.approx(np.array(adjusted), rel=1e-13, nan_ok=True)


def test_the_flag_of_a_rejection_that_holm_takes_back():
    """Verdicts stand by raw p; "not after Holm" where p < α ≤ p_holm."""
    generator = np.random.default_rng(20261201)
    table = pd.DataFrame({"batch": np.repeat(np.arange(40), 6), "x": generator.normal(0.25, 1, 240).round(2)})
    found = analyse_many(table, "x", "batch", Question("0"))
    flagged = found["flags"].str.contains("not after Holm")
    assert flagged.any()
    assert (flagged == ((found["p"] < 0.05) & (found["p_holm"] >= 0.05))).all()
    assert (found.loc[flagged, "verdict"] == "differs").all()


@pytest.mark.parametrize(
    ("column", "readings"),
    [
        (pd.Series([5, 4, 7, None], dtype="Int64"), [5, 4, 7]),
        (pd.Series([5.5, None, 4.25, 4.0], dtype="Float64"), [5.5, 4.25, 4.0]),
        (pd.Series(["5.50", "4.25", "4.0"], dtype="category"), ["5.50", "4.25", "4.0"]),
        (pd.Series([Decimal("5.50"), Decimal("4.25"), Decimal("4")]), ["5.50", "4.25", "4"]),
        (pd.Series([5.5, "4,25", None, " 4 "], dtype=object), ["5.5", "4.25", "4"]),
        (pd.Series([0.1, 0.2, 0.4], dtype="float32"), [0.1, 0.2, 0.4]),
        (pd.Series([10**17, 10**17 + 2, 10**17 + 8]), [10**17, 10**17 + 2, 10**17 + 8]),
        (pd.Series([0.1 + 0.2, 1 / 3, 0.3]), [0.1 + 0.2, 1 / 3, 0.3]),
        (pd.Series(["1,234.5", "1,250", "1,300"]), ["1234.5", "1250", "1300"]),
        (pd.Series(["5.1 mg/L", "5.2 mg/L", "5.4 mg/L"]), ["5.1", "5.2", "5.4"]),
    ],
    ids=["whole", "nullable", "categories", "decimals", "mixed", "narrow", "long", "computed", "thousands", "units"],
)
def test_every_kind_of_column(column, readings):
    """Stored numbers of any kind, decimals and texts with units or thousands marks: the row is that of the readings."""
    found = analyse_many(pd.DataFrame({"batch": "A", "x": column}), "x", "batch", Question("4.9"))
    assert_row_is(found.iloc[0], analyse(readings, Question("4.9")))


@pytest.mark.parametrize(
    "entries", [[1.0, float("inf")], [True, False], ["5", "12:30"], [complex(1, 2), 3], [[1], [2]], [5e-324, 1.0]]
)
def test_what_is_no_reading_leaves_a_row_with_the_entry_in_its_reason(entries):
    """No other exception, no number: the sample is not testable, and its flags quote what could not be read."""
    found = analyse_many(pd.DataFrame({"batch": "A", "x": pd.Series(entries)}), "x", "batch", Question("1"))
    assert found["verdict"].tolist() == ["not testable"]
    assert any(str(entry) in found.loc[0, "flags"] for entry in entries)
