"""The texts of the panel and the figures to copy."""

from dataclasses import replace

import pytest
from built_analyses import NITRATE, built
from scipy import stats

from meanlab.core.question import PROCEDURES, Question
from meanlab.core.results import Component, Route
from meanlab.wording import panel_texts, shown, tab_separated

ASKED = Question("5.000", quantity="Nitrate", material="NC-7", unit="mg/L", target_kind="certified value")


def rows_of(analysis):
    return dict(panel_texts(analysis).rows)


def test_the_table_reads_as_a_report_does():
    """n, mean, s, target, difference, interval, procedure, statistic, critical value, p and what could be detected.

    The figures are those of scipy's t(11): statistic 4.0806, p 0.001818, critical value 2.2010, s 0.018323.
    """
    assert list(rows_of(built(question=ASKED)).items()) == [
        ("n", "12 of 12 readings"),
        ("Mean", "5.022 mg/L"),
        ("s", "0.0183 mg/L"),
        ("Target", "5.000 mg/L"),
        ("Difference", "+0.022 mg/L (+0.43 %)"),
        ("95 % interval", "5.010 to 5.033"),
        ("Procedure", "Student's t, two-sided"),
        ("Statistic", "t(11) = 4.08"),
        ("Critical value", "± 2.20"),
        ("p", "p = 0.0018"),
        ("Detectable (80 %)", "0.015 mg/L"),
    ]


def test_title_why_and_origin_are_whole():
    """Quantity and material, the reason for the procedure, and when and with what it was made."""
    texts = panel_texts(built(question=ASKED))
    assert texts.title == "Nitrate in NC-7"
    assert texts.why == "t because: 12 readings, a reason."
    assert texts.origin == "2026-12-01 05:30 UTC · meanlab 1.0 · fingerprint 3f9a 61c0 22be"
    assert texts.mean_line == "x̄ ± U = (5.022 ± 0.012) mg/L (k = 2.20, 95 %, ν = 11, n = 12)"


@pytest.mark.parametrize("procedure", PROCEDURES)
def test_every_row_has_a_text(procedure):
    """No row is empty and none shows a number that is none."""
    known = {"sigma": "0.02", "sigma_origin": "records"} if procedure == "z" else {}
    for label, text in panel_texts(built(question=replace(ASKED, **known), procedure=procedure)).rows:
        assert label
        assert text
        assert not {"nan", "None", "inf"} & set(text.replace(",", " ").split())


def test_a_fixed_procedure_is_said_to_be_set_by_the_written_method():
    """The panel names who chose."""
    reasons = ("Student's t is set by the written method", "the rule's choice: guarded t (skewed)")
    fixed = built(question=ASKED, route=Route("t", "mean", reasons, True, 1))
    assert panel_texts(fixed).why == "Student's t is set by the written method; the rule's choice: guarded t (skewed)."


def test_without_a_test_the_rows_end_with_the_procedure():
    """What cannot be tested shows no statistic and no p."""
    found = rows_of(built(["5.02"], ASKED, procedure=None, route=Route(None, "mean", ("one reading",), False, 3)))
    assert found["Procedure"] == "none"
    assert not {"p", "Statistic", "Critical value"} & set(found)


def test_agreement_gets_a_row_labelled_by_its_use():
    """The 90 % interval stands beside E, the 95 % interval says that it belongs to the test."""
    found = rows_of(built(question=replace(ASKED, equivalence_limit="0.05")))
    assert found["90 % interval (E)"] == "5.012 to 5.031; E = 0.05 mg/L"
    assert found["95 % interval (test)"] == "5.010 to 5.033"


def test_copied_numbers_are_whole_and_safe_in_a_spreadsheet():
    """Two lines, as many headings as numbers, full precision, decimal sign kept, no text that would be a command."""
    comma = [text.replace(".", ",") for text in NITRATE]
    asked = replace(ASKED, target="5,000", quantity="=1+1", material="@NC-7")
    heading, numbers = tab_separated(built(comma, asked)).rstrip("\n").split("\n")
    row = dict(zip(heading.split("\t"), numbers.split("\t"), strict=True))
    assert row["quantity"] == "'=1+1"
    assert row["material"] == "'@NC-7"
    assert row["mean"].startswith("5,0215833333")
    assert row["target"] == "5,000"
    expected = stats.ttest_1samp([float(text) for text in NITRATE], 5.0).pvalue
    assert float(row["p"].replace(",", ".")) == pytest.approx(expected, rel=1e-12)
    assert "." not in row["statistic"]


def test_digits_follow_the_expanded_uncertainty_of_the_difference():
    """Two significant digits of U set the places of mean, difference and interval (JCGM 100:2008, 7.2.6)."""
    analysis = built(question=ASKED)
    wide = replace(analysis.uncertainty, expanded=0.34, components=(Component("target", 0.17, None, 0.99),))
    numbers = shown(replace(analysis, uncertainty=wide))
    assert (numbers.estimate, numbers.difference) == ("5.02 mg/L", "+0.02 mg/L")
    fine = shown(replace(analysis, uncertainty=replace(wide, expanded=0.00034)))
    assert fine.estimate == "5.02158 mg/L"


def test_rounding_never_hides_a_rejection():
    """A mean that differs is never printed as the target, nor an interval end on it."""
    readings = [f"5.000{digit}" for digit in (1, 2, 1, 2, 1, 2, 1, 2)]
    analysis = built(readings, Question("5.0000", unit="mg/L"))
    assert analysis.test.reject
    numbers = shown(analysis)
    assert "5.0000 mg/L" not in (numbers.estimate, *numbers.interval.split(" to "))
    assert float(numbers.interval_bare.split(" to ")[0]) > 5


def test_a_limit_gets_the_value_rounded_to_its_own_places():
    """Beside a specification with fewer places stands the mean rounded to them (common practice)."""
    limit = Question("5.0", unit="mg/L", alternative="greater", target_kind="upper limit")
    assert rows_of(built(question=limit))["Mean"] == "5.022 mg/L (5.0 in the limit's places)"
