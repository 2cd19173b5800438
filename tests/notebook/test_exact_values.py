"""Facts as JSON values and back: equal, with every digit, every zero and the kind of every number."""

import json
from decimal import Decimal
from math import inf, isnan, nan

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from meanlab.core.exact_values import canonical, exact_values, rebuilt
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import Analysis, Check, Difference


def back(fact):
    """The fact after it was written as JSON and read again."""
    return rebuilt(type(fact), json.loads(canonical(exact_values(fact))))


texts_of_numbers = st.from_regex(r"-?[0-9]{1,12}([.,][0-9]{0,12})?(e-?[0-9]{1,2})?", fullmatch=True)


@given(st.lists(texts_of_numbers, min_size=1, max_size=8), st.text(st.characters(exclude_categories=["Cs"])))
def test_any_readings_come_back_as_typed(texts, name):
    """Typed texts, exact decimals with their zeros, causes with their whole-number keys, and any name."""
    readings = ReadingSet(texts, name=name, left_out={0: "cause"}, preparations=["a"] * len(texts))
    again = back(readings)
    assert again == readings
    assert again.typed == readings.typed == tuple(texts)
    assert list(map(str, again.values)) == list(map(str, readings.values))
    assert again.left_out == {0: "cause"}


@pytest.mark.parametrize("target", ["5,00", "5.00", 5, 5.0, Decimal("5.00"), -1e-300])
def test_the_target_keeps_its_kind_and_its_zeros(target):
    """A text stays a text, a double a double, an exact decimal an exact decimal; the sentence repeats it as typed."""
    again = back(Question(target)).target
    assert (type(again), str(again)) == (type(target), str(target))


@given(st.floats(allow_nan=False))
def test_any_double_comes_back(value):
    """Every double, the infinite ones and −0 too, is the same after the file."""
    again = back(Difference(value, None, -value, value))
    assert repr(again) == repr(Difference(value, None, -value, value))


def test_what_is_no_number_comes_back_as_none_of_its_size():
    """NaN is kept as a text, because JSON has no word for it."""
    assert isnan(back(Difference(nan, None, None, None)).value)
    assert b'"nan"' in canonical(exact_values(Difference(nan, None, None, None)))


def test_infinite_degrees_of_freedom_come_back():
    """σ known exactly has infinite degrees of freedom."""
    assert back(Question("5", sigma="0,1", sigma_origin="records", sigma_df=inf)).sigma_df == inf


def test_the_order_of_named_figures_stays():
    """Figures of a check are shown in their order; sorting the keys of the file does not touch it."""
    check = Check("normality", "clear", 0.9, None, "seen", {"z": 1.0, "a": inf, "m": 2.0}, (3, 1))
    assert list(back(check).figures.items()) == [("z", 1.0), ("a", inf), ("m", 2.0)]
    assert back(check).entries == (3, 1)


def test_numbers_of_numpy_become_plain_numbers():
    """A numpy scalar is written as the number it holds."""
    check = Check("normality", "clear", np.float64(0.1), None, "seen", {"n": np.int64(3)}, (np.int64(2),))
    assert back(check) == Check("normality", "clear", 0.1, None, "seen", {"n": 3}, (2,))
    assert json.loads(canonical(exact_values(check)))["statistic"] == 0.1


def test_every_kind_of_analysis_comes_back(many_kinds):
    """All parts of an analysis, whichever are there, are equal after the file."""
    for analysis in many_kinds.values():
        assert back(analysis) == analysis


def test_a_field_that_an_earlier_version_did_not_write_takes_its_default(analysis):
    """Fields added later, with a default, do not keep an older file from opening."""
    values = exact_values(analysis)
    del values["withouts"], values["question"]["look"], values["test"]["notes"]
    again = rebuilt(Analysis, values)
    assert (again.withouts, again.question.look, again.test.notes) == ((), 1, ())


@pytest.mark.parametrize(
    ("values", "said"),
    [
        ({"value": "five", "low": None, "high": None, "percent": None}, r"Difference\.value"),
        ({"value": 1.0, "low": None, "high": None}, r"Difference\.percent is missing"),
        ({"value": [1.0], "low": None, "high": None, "percent": None}, "list"),
        ({"value": {"a": 1}, "low": None, "high": None, "percent": None}, "made of a"),
        ({"value": True, "low": None, "high": None, "percent": None}, "True"),
        ([1.0], "list"),
    ],
)
def test_values_of_something_else_are_refused_with_the_field(values, said):
    """What cannot stand in a field is named with it."""
    with pytest.raises(ValueError, match=said):
        rebuilt(Difference, values)
