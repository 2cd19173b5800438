"""What the readings of one analysis can show: power, type II risk, smallest detectable difference, the OC curve."""

import time

import numpy as np
import pytest
from scipy import stats

import meanlab
from meanlab.core.question import Question
from meanlab.planning import analysis_power, operating_characteristic
from meanlab.planning.detection import detection_power
from meanlab.planning.of_analysis import design_of, upper_limit_of_s

PROCEDURES = ("z", "t", "guarded_t", "signed_rank", "sign")


def asked(**question):
    """Return a question with a known σ, so that every procedure can be planned."""
    return Question("5.00", **{"sigma": "1", "sigma_origin": "chart"} | question)


@pytest.mark.parametrize("procedure", PROCEDURES)
@pytest.mark.parametrize("alternative", ["two-sided", "greater", "less"])
def test_the_curve_is_one_minus_the_power(procedure, alternative):
    """Every point of the OC curve is 1 − power at that true difference; it covers the side that is asked."""
    question = asked(alternative=alternative)
    differences, missed = operating_characteristic(12, 1.0, question, procedure)
    design = design_of(1.0, question, procedure)
    for place in (0, 20, 40, 80):
        assert missed[place] == 1 - detection_power(12, float(differences[place]), design)
    assert np.all(np.diff(differences) > 0)
    found_at_the_end = {"two-sided": missed[[0, -1]], "greater": missed[[-1]], "less": missed[[0]]}[alternative]
    assert np.all(found_at_the_end < 0.01)
    assert np.max(missed) >= 0.94


def test_the_curve_at_no_difference_is_the_confidence_level():
    """In the middle of the two-sided OC curve of t stands 1 − α."""
    differences, missed = operating_characteristic(9, 0.02, Question("5"), "t")
    assert differences[40] == pytest.approx(0.0, abs=1e-15)
    assert missed[40] == pytest.approx(0.95, rel=1e-9)


@pytest.mark.parametrize("procedure", PROCEDURES)
def test_power_and_risk_of_the_difference_that_matters(procedure):
    """Power at the difference that matters and the type II risk add to 1; the side asked decides the sign."""
    for alternative in ("two-sided", "greater", "less"):
        question = asked(alternative=alternative, difference_that_matters="1.2")
        found = analysis_power(10, 1.0, question, procedure)
        signed = -1.2 if alternative == "less" else 1.2
        assert found.power == detection_power(10, signed, design_of(1.0, question, procedure))
        assert found.power + found.missed == 1.0
        assert found.difference_that_matters == 1.2


def test_figures_of_t_by_the_public_functions():
    """Smallest detectable, readings needed and power are those of the planning functions."""
    found = analysis_power(10, 0.4, Question("5", difference_that_matters="0.3"), "t")
    assert meanlab.power(10, found.smallest_detectable, 0.4) == pytest.approx(0.8, rel=1e-10)
    assert meanlab.power(10, found.smallest_detectable_90, 0.4) == pytest.approx(0.9, rel=1e-10)
    assert found.readings_needed == meanlab.plan_detection(0.3, 0.4).readings
    assert found.kind == "exact"


@pytest.mark.parametrize(("df", "factor"), [(4, 1.56), (9, 1.29)])
def test_upper_limit_of_s(df, factor):
    """The one-sided 80 % upper limit is 1.56 s at n = 5 and 1.29 s at n = 10, √(df/χ²(0.20; df)) by scipy."""
    assert upper_limit_of_s(1.0, df) == pytest.approx(factor, abs=0.005)
    assert upper_limit_of_s(2.0, df) == pytest.approx(2 * np.sqrt(df / stats.chi2.ppf(0.2, df)), rel=1e-12)


def test_the_cautious_difference_has_the_power_at_the_upper_limit():
    """With s at its upper limit the power at the cautious difference is 80 %, an uncertain target included."""
    for u in (0.0, 0.1):
        found = analysis_power(6, 0.3, Question("5", target_uncertainty=str(u)), "t")
        s = upper_limit_of_s(0.3, 5)
        power = meanlab.power(6, found.smallest_detectable_cautious, s, target_uncertainty=u)
        assert power == pytest.approx(0.8, rel=1e-9)
        assert "80 % upper limit" in found.message


def test_a_known_or_planned_s_is_not_doubted():
    """A known σ, or an s for planning, has no cautious line; the planned s goes before that of the readings."""
    assert analysis_power(6, 1.0, asked(), "z").smallest_detectable_cautious is None
    planned = analysis_power(6, 0.3, Question("5", planning_s="0.5"), "t")
    assert planned.smallest_detectable_cautious is None
    assert planned.planning_s == 0.5
    assert meanlab.power(6, planned.smallest_detectable, 0.5) == pytest.approx(0.8, rel=1e-9)


def test_five_readings_of_a_counting_procedure_show_nothing():
    """Signed rank and sign with five readings, two-sided at 5 %: no difference of any size (2/2⁵ = 0.0625)."""
    for procedure in ("signed_rank", "sign"):
        found = analysis_power(5, 1.0, Question("5", difference_that_matters="9"), procedure)
        assert (found.power, found.missed, found.smallest_detectable) == (0.0, 1.0, None)
        assert "no outcome of this procedure could be significant" in found.message
        assert found.readings_needed >= 6


def test_out_of_reach_is_said_with_its_cause():
    """A difference that matters below 2.80 u₀ needs a number that does not exist, and the message says so."""
    question = Question("5.00", target_uncertainty="0.1", difference_that_matters="0.25", unit="mg/L")
    found = analysis_power(8, 0.05, question, "t")
    assert found.readings_needed is None
    assert "0.280 mg/L (2.80 standard uncertainties) are out of reach" in found.message
    comma = analysis_power(8, 0.05, Question("5,00", target_uncertainty="0,1"), "t")
    assert "2,80 standard uncertainties" in comma.message


def test_more_than_ten_thousand_is_said():
    """Where more than 10,000 readings were needed there is no number and a sentence."""
    found = analysis_power(8, 1.0, Question("5", difference_that_matters="0.001"), "t")
    assert found.readings_needed is None
    assert "More than 10,000" in found.message


def test_without_scatter_nothing_is_known():
    """Without any s every part that needs it is None."""
    found = analysis_power(3, None, Question("5", difference_that_matters="1"), None)
    assert (found.power, found.smallest_detectable, found.readings_needed, found.planning_s) == (None,) * 4
    assert found.difference_that_matters == 1.0


def test_one_reading_can_still_be_planned():
    """One reading without σ shows nothing, but an s for planning gives the number needed, by t."""
    found = analysis_power(1, None, Question("5", difference_that_matters="1", planning_s="1"), None)
    assert (found.power, found.smallest_detectable) == (None, None)
    assert found.readings_needed == 10


def test_procedures_that_leave_the_target_uncertainty_out_say_so():
    """Signed rank and sign do not take u₀ in; their power does not either, and the message says it."""
    plain = analysis_power(12, 1.0, Question("5"), "signed_rank")
    found = analysis_power(12, 1.0, Question("5", target_uncertainty="0.5"), "signed_rank")
    assert found.smallest_detectable == plain.smallest_detectable
    assert "uncertainty of the target is not included" in found.message
    assert (found.kind, analysis_power(12, 1.0, Question("5"), "guarded_t").kind) == ("approximate", "upper bound")


def test_the_figures_move_with_the_unit():
    """In another unit the detectable differences change by the factor, the numbers of readings not at all."""
    for procedure in PROCEDURES:
        one = analysis_power(9, 1.0, asked(difference_that_matters="0.8"), procedure)
        other = analysis_power(9, 1e-6, asked(difference_that_matters="0.8e-6", sigma="1e-6"), procedure)
        assert other.smallest_detectable == pytest.approx(one.smallest_detectable * 1e-6, rel=1e-10)
        assert (other.readings_needed, other.power) == (one.readings_needed, pytest.approx(one.power, rel=1e-10))


def test_the_power_of_an_analysis_is_quick():
    """Power, both detectable differences and the number needed take less than 5 ms."""
    question = Question("5", difference_that_matters="0.8")
    for procedure in ("t", "signed_rank", "sign"):
        times = []
        for _ in range(7):
            start = time.perf_counter()
            analysis_power(12, 1.0, question, procedure)
            times.append(time.perf_counter() - start)
        assert min(times) < 0.005
