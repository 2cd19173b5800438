"""From the fields of the page to a question."""

from decimal import Decimal
from math import inf

import pytest

from meanlab.core.complaints import QuestionComplaint
from meanlab.page import asked
from meanlab.page.fields import FIELDS


def fields(**given):
    return dict(FIELDS) | {"target": "5.000"} | given


def test_the_target_stays_as_typed():
    """The zeros of the target reach the sentence."""
    question = asked.question_from(fields(), ".")
    assert question.target_as_typed == "5.000"
    assert question.significance == Decimal("0.05")
    assert (question.alternative, question.procedure, question.sigma) == ("two-sided", "rule", None)


def test_numbers_follow_the_decimal_sign_of_the_readings():
    """With a decimal comma in the readings a target with a comma is read."""
    question = asked.question_from(fields(target="5,02", limit="0,05"), ",")
    assert question.exact_target == Decimal("5.02")
    assert question.number("equivalence_limit") == 0.05


@pytest.mark.parametrize(
    ("meaning", "more", "expected"),
    [
        ("expanded U with k", {"certificate_k": "2"}, 0.030 / 2),
        ("expanded U with k", {"certificate_k": "2.26"}, 0.030 / 2.26),
        ("standard uncertainty u", {}, 0.030),
        ("half of a 95 % interval", {}, 0.030 / 1.959963984540054),  # normal quantile 0.975, NIST handbook 1.3.6.7.1
        ("bounds ± a (rectangular)", {}, 0.030 / 3**0.5),  # JCGM 100:2008, 4.3.7
    ],
)
def test_what_a_certificate_states_becomes_a_standard_uncertainty(meaning, more, expected):
    """Each meaning of the certificate's figure has its own divisor (JCGM 100:2008, 4.3)."""
    given = fields(certificate_value="0.030", certificate_meaning=meaning, **more)
    assert asked.target_uncertainty(given, ".") == (pytest.approx(expected, rel=1e-15), inf)


def test_a_historical_level_brings_its_own_scatter():
    """The mean of m values has u = s/√m with m − 1 degrees of freedom (JCGM 100:2008, 4.2.3)."""
    given = fields(target_kind="historical level", historical_count="16", certificate_value="0.4")
    assert asked.target_uncertainty(given, ".") == (pytest.approx(0.1), 15.0)


@pytest.mark.parametrize(
    ("more", "said"),
    [
        ({"certificate_value": "0.03"}, "what it is"),
        ({"certificate_value": "0.03", "certificate_meaning": "expanded U with k"}, "coverage factor"),
        (
            {"certificate_value": "0.03", "certificate_meaning": "expanded U with k", "certificate_k": "0"},
            "more than 0",
        ),
        ({"target_kind": "historical level", "historical_count": "16"}, "standard deviation"),
        ({"target_kind": "historical level", "historical_count": "1", "certificate_value": "1"}, "at least 2"),
        ({"sigma": "0.02"}, "origin"),
        ({"sigma": "-1", "sigma_origin": "chart"}, "more than 0"),
        ({"limit": "0"}, "more than 0"),
        ({"limit": "wide"}, "not a number"),
        ({"target": "abc"}, "not a number"),
        ({"significance": "60 %"}, "between 0 and 0.5"),
        ({"procedure": "z"}, "known σ"),
    ],
)
def test_a_contradiction_is_said_plainly(more, said):
    """A field that cannot be used is a complaint that names what to do; k = 2 is never assumed."""
    with pytest.raises(QuestionComplaint, match=said):
        asked.question_from(fields(**more), ".")


@pytest.mark.parametrize(
    ("target", "has_readings", "said"),
    [
        ("", False, "Paste the readings"),
        ("5", False, "paste the readings"),
        ("", True, "type the target"),
        ("5", True, ""),
    ],
)
def test_a_half_typed_question_says_what_is_missing(target, has_readings, said):
    """One sentence names the part that is missing; none where nothing is."""
    sentence = asked.missing(fields(target=target), has_readings)
    assert said in sentence
    assert bool(sentence) == bool(said)


@pytest.mark.parametrize(
    ("before", "after", "expected"),
    [
        ({}, {"alternative": "greater"}, ("alternative",)),
        ({}, {"alternative": "greater", "target_kind": "upper limit"}, ()),
        ({"alternative": "less"}, {"alternative": "two-sided"}, ()),
        ({}, {"target": "5.0"}, ()),
        ({}, {"target": "5.1"}, ()),  # the old target stands until the new one is typed
        ({}, {"limit": "0.05"}, ("equivalence limit",)),
        ({"limit": "0.05"}, {}, ()),
        ({}, {"matters": "0.02"}, ("difference that matters",)),
    ],
)
def test_what_was_set_after_a_result_is_known(before, after, expected):
    """A side or limit chosen after a result counts as an afterthought; what makes the claim no easier does not."""
    first, now = (asked.parts_set(fields(**given), []) for given in (before, after))
    assert asked.set_after(first, now) == expected


def test_a_reading_left_out_after_a_result_is_known():
    """An exclusion after a result was seen is an afterthought."""
    first, now = (asked.parts_set(fields(), left_out) for left_out in ([], ["3"]))
    assert asked.set_after(first, now) == ("left-out readings",)
