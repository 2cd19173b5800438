"""The sentence of each outcome: what it names, which verdict it states, and what it never says."""

import re
from dataclasses import replace
from itertools import product

import pytest
from built_analyses import NITRATE, built

from meanlab.core.question import ALTERNATIVES, PROCEDURES, Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import Route, Without
from meanlab.wording import (
    agreement_sentence,
    conclusion,
    decision_rule,
    enough_sentence,
    verdict_word,
    with_without_sentence,
)
from meanlab.wording.sentences import verdict_key
from meanlab.wording.templates import DECISION_RULES, NOT_TESTABLE, TEMPLATES, VERDICT_WORDS

# what vocabulary and ISO/IEC 17025 7.8.6 forbid to claim from a test: nothing is accepted or proven, no item conforms
FORBIDDEN = re.compile(
    r"\b(accept\w*|proven?|proves|no difference|compl(?:y|ies|iant)|conforms?|pass(?:ed|es)?|failed|OK|outliers?|"
    r"data points?|sample size|SEM|error bars?|nan|None|inf)\b|p = 0\.0+\b|\{|\}|  "
)
KINDS = {"two-sided": "certified value", "greater": "upper limit", "less": "lower limit"}
VERDICTS = ("differs", "differs, within the limit", "agrees", "cannot tell")
ONE_SIDED_WORDS = {
    "greater": {"differs": "exceeds", "agrees": "lies below", "cannot tell": "neither to exceed"},
    "less": {"differs": "falls below", "agrees": "lies above", "cannot tell": "neither to fall below"},
}


def asked(alternative="two-sided", procedure="t", limit=None, **parts):
    known = {"sigma": "0.02", "sigma_origin": "control records 2025"} if procedure == "z" else {}
    return Question(
        "5.000",
        quantity="Nitrate",
        material="control solution NC-7",
        unit="mg/L",
        alternative=alternative,
        target_kind=KINDS[alternative],
        equivalence_limit=limit,
        **known,
        **parts,
    )


CELLS = [
    (procedure, alternative, limit, verdict)
    for procedure, alternative, limit, verdict in product(PROCEDURES, ALTERNATIVES, (None, "0.05"), VERDICTS)
    if limit or not (verdict == "differs, within the limit" or (verdict == "agrees" and alternative == "two-sided"))
]


@pytest.mark.parametrize(("procedure", "alternative", "limit", "verdict"), CELLS)
def test_each_sentence_names_what_a_report_needs(procedure, alternative, limit, verdict):
    """Quantity, material, n, value with unit, target as typed with its kind, statistic, p and level stand in each."""
    analysis = built(question=asked(alternative, procedure, limit), procedure=procedure, verdict=verdict)
    sentence = conclusion(analysis)
    parameter = {"signed_rank": "centre of symmetry", "sign": "median"}.get(procedure, "mean")
    for part in (
        f"The {parameter} of 12 readings (taken as independent) of Nitrate in control solution NC-7, 5.02",
        f"the {KINDS[alternative]} 5.000 mg/L",
        "95 % ",
        "level 5 %",
        "p ",
        limit or "",
    ):
        assert part in sentence
    assert not FORBIDDEN.search(sentence), sentence
    assert sentence.endswith(".")


@pytest.mark.parametrize(("procedure", "alternative", "limit", "verdict"), CELLS)
def test_each_sentence_states_its_verdict_and_no_other(procedure, alternative, limit, verdict):
    """One-sided questions never get "differs" or "agrees"; a two-sided one gets exactly its own."""
    analysis = built(question=asked(alternative, procedure, limit), procedure=procedure, verdict=verdict)
    sentence, word = conclusion(analysis), verdict_word(analysis)
    if alternative == "two-sided":
        assert (" differs from " in sentence) == verdict.startswith("differs")
        assert (" agrees within ± 0.05 mg/L " in sentence) == (verdict == "agrees")
        assert word.startswith(verdict.split(",")[0])
    else:
        assert "differs" not in sentence
        assert "agree" not in sentence.replace("for agreement", "")
        expected = ONE_SIDED_WORDS[alternative][verdict.split(",")[0]]
        if verdict == "agrees" and limit:
            expected = {"greater": "does not exceed", "less": "does not fall below"}[alternative]
        assert expected in sentence
    assert ("Cannot tell" in sentence) == (verdict == "cannot tell") == (word == "cannot tell")


def test_the_tables_have_no_gap_and_no_stray_brace():
    """Every verdict a question can get has its template, its word and its decision rule."""
    for (key, alternative, _), template in TEMPLATES.items():
        assert "[" not in template
        assert "evidence" not in template
        if key not in ("undecided", "cannot tell", "cannot tell, with a limit", "differs, with a limit"):
            assert (key, alternative) in VERDICT_WORDS
    assert {key[0] for key in DECISION_RULES} == set(ALTERNATIVES)
    for text in (*TEMPLATES.values(), *NOT_TESTABLE.values(), *VERDICT_WORDS.values(), *DECISION_RULES.values()):
        assert not FORBIDDEN.search(re.sub(r"\{\w+\}", "x", text)), text


def test_less_is_the_mirror_of_greater():
    """The words of one side turned round are the words of the other, in every template."""
    words = (
        ("exceeds", "falls below"),
        ("exceed", "fall below"),
        ("lies below", "lies above"),
        ("lie below", "lie above"),
    )
    words += (("above it", "below it"),)
    either = re.compile("|".join(word for pair in words for word in pair))
    turned = dict(words) | {second: first for first, second in words}
    for (key, side, family), template in TEMPLATES.items():
        if side == "greater":
            assert either.sub(lambda found: turned[found.group()], template) == TEMPLATES[key, "less", family]


def test_a_decimal_comma_stays_a_comma():
    """The sentence has the decimal sign of the readings, and the target as it was typed."""
    comma = [text.replace(".", ",") for text in NITRATE]
    sentence = conclusion(built(comma, Question("5,000", quantity="Nitrat")))
    assert "the nominal value 5,000 mg/L" in sentence
    assert "t(11) = 4,08, p = 0,0018" in sentence
    assert not re.search(r"\d\.\d", sentence)


def test_what_was_set_after_the_readings_is_said():
    """A side or a limit chosen afterwards, and a further look, stand behind the sentence."""
    late = asked("greater", set_after=("alternative", "equivalence limit"), look=3)
    sentence = conclusion(built(question=late))
    assert sentence.endswith(
        "Set after the readings were seen: side asked and equivalence limit. This is test no. 3 on this question."
    )


def test_units_of_the_technician_are_repeated():
    """What one reading is stands in the sentence instead of what would be taken for granted."""
    sentence = conclusion(built(question=asked(units_are="weighings of separate portions")))
    assert "12 readings (weighings of separate portions)" in sentence
    assert "taken as independent" not in sentence


def test_an_uncertain_target_is_said_to_be_included_or_not():
    """z and t take the target's uncertainty in; the others say that they do not, and decide nothing."""
    uncertain = asked(target_uncertainty="0.004")
    included = conclusion(built(question=uncertain))
    assert "is more than the combined uncertainty explains" in included
    assert "scatter of these readings and uncertainty of the target)" in included
    undecided = built(question=uncertain, procedure="signed_rank", verdict="cannot tell")
    assert verdict_key(undecided) == "undecided"
    assert "signed rank cannot take the uncertainty of the target in" in conclusion(undecided)
    assert "target treated as exact" in conclusion(built(question=asked()))


@pytest.mark.parametrize(
    ("row", "reason", "expected"),
    [
        (3, "one reading", "nothing tells how far such readings scatter"),
        (4, "identical", "do not scatter at their resolution"),
        (-1, "one preparation", "counts as one independent unit"),
        (
            0,
            "the counts leave it open",
            "cannot be tested against the nominal value 5.0 mg/L: the counts leave it open",
        ),
        (1, "z needs a known σ", "cannot be tested against the nominal value 5.0 mg/L: z needs a known σ"),
    ],
)
def test_what_cannot_be_tested_says_why(row, reason, expected):
    """Each cause has its own sentence, without a verdict in it."""
    question = Question("5.0", quantity="Nitrate", unit="mg/L")
    analysis = built(["5.02", "5.02"], question, procedure=None, route=Route(None, "mean", (reason,), False, row))
    sentence = conclusion(analysis)
    assert expected in sentence
    assert verdict_word(analysis) == "not testable"
    assert not FORBIDDEN.search(sentence), sentence


def test_agreement_says_what_is_shown_and_what_is_not_examined():
    """With a limit the 90 % interval is named by its use; without one agreement is said not to be examined."""
    within = agreement_sentence(built(question=asked(limit="0.05")))
    assert within == (
        "Agreement within ± 0.05 mg/L with the certified value 5.000 mg/L is shown: its 90 % interval for agreement "
        "is 5.012 mg/L to 5.031 mg/L (p < 0.001 for agreement, level 5 %)."
    )
    assert "is not shown" in agreement_sentence(built(question=asked(limit="0.02")))
    assert agreement_sentence(built(question=asked())) == ("Agreement is not examined: no equivalence limit E was set.")
    one_sided = agreement_sentence(built(question=asked("greater")))
    assert one_sided.startswith(
        "That the mean lies below the upper limit 5.000 mg/L is not shown: its 95 % upper bound"
    )


@pytest.mark.parametrize(("alternative", "limit"), [*product(ALTERNATIVES, (None, "0.05"))])
def test_the_decision_rule_names_its_risk(alternative, limit):
    """What must be shown before something is said, and the risk of saying it wrongly (ISO/IEC 17025:2017, 7.8.6)."""
    rule = decision_rule(built(question=asked(alternative, limit=limit)))
    assert rule.startswith("Decision rule: ")
    assert "with a risk of at most 5 %" in rule
    assert not FORBIDDEN.search(rule)
    assert (limit is None) == ("0.05 mg/L" not in rule)


def test_enough_says_what_could_and_could_not_be_found():
    """The smallest detectable difference with 80 and 90 %, and the chance to find the difference that matters."""
    analysis = built(question=asked(difference_that_matters="0.02"))
    found = replace(
        analysis,
        power=replace(analysis.power, power=0.931, missed=0.069, difference_that_matters=0.02, readings_needed=9),
    )
    sentence = enough_sentence(found)
    assert (
        "find a true difference of 0.015 mg/L with a probability of 80 %, and one of 0.018 mg/L with 90 %" in sentence
    )
    assert "0.02 mg/L, would be found with 93 % and missed with 7 %" in sentence
    assert "To find it with 80 % takes 9 readings." in sentence


def test_with_and_without_a_reading_stand_as_one_line_each():
    """The label, the entry's number, the statistic, p and the verdict."""
    analysis = built(question=asked())
    line = with_without_sentence(Without("without", (3,), analysis.test, "differs", ""), asked())
    assert line == "Without entry 4: t(11) = 4.08, p = 0.0018; verdict: differs."
    assert (
        with_without_sentence(Without("with", (1, 4), None, "not testable", ""))
        == "With entries 2 and 5: not testable."
    )


def test_text_of_the_user_stays_on_one_line_and_is_text():
    """Line ends and control characters in a name cannot break the sentence; markup stays the characters it is."""
    odd = Question("5.000", quantity="Nitrate\n\tas N\u2028", material="<b>NC-7</b> {n}", unit="mg/L")
    sentence = conclusion(built(question=odd))
    assert "Nitrate as N in <b>NC-7</b> {n}, 5.022" in sentence
    assert "\n" not in sentence


def test_left_out_readings_are_counted_in_the_sentence():
    """A reading left out with its cause is said beside n, its cause in words."""
    readings = ReadingSet(tuple(NITRATE), unit="mg/L", left_out={3: "air bubble"})
    analysis = built(readings, asked())
    shown = replace(analysis, summary=replace(analysis.summary, n=11, left_out=1))
    assert "11 readings (taken as independent; 1 left out: air bubble)" in conclusion(shown)
