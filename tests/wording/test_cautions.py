"""What stands beside the sentence, the weightiest first."""

from dataclasses import replace

import pytest
from built_analyses import NITRATE, built

from meanlab.core.question import Question
from meanlab.core.results import Bound, Check
from meanlab.wording import cautions

ASKED = Question("5.000", unit="mg/L")
GENERAL = "a qualified person decide."


def test_the_general_caution_is_always_the_last():
    """What the statement speaks of, and who decides where harm is possible."""
    for procedure in ("t", "sign", "signed_rank", "guarded_t", None):
        found = cautions(built(question=ASKED, procedure=procedure))
        assert found[-1].endswith(GENERAL)
        assert len(set(found)) == len(found)


def test_stops_come_before_cautions_and_notes_do_not_come_at_all():
    """A stopped check first, then the cautions; notes stay with the checks."""
    checks = (
        Check("resolution", "caution", None, None, "the step is coarse"),
        Check("enough readings", "stop", None, None, "no outcome could be significant"),
        Check("normality", "note", None, None, "a note only"),
    )
    found = cautions(built(question=ASKED, checks=checks))
    assert found[:2] == ("No outcome could be significant.", "The step is coarse.")
    assert not any("note only" in text for text in found)


def test_few_readings_are_named():
    """Below eight readings the shape cannot be verified."""
    assert any("fewer than 8 readings" in text for text in cautions(built(NITRATE[:5], ASKED)))
    assert not any("fewer than 8 readings" in text for text in cautions(built(question=ASKED)))


@pytest.mark.parametrize(("alternative", "skewness", "said"), [
    ("less", 1.5, True), ("greater", -1.5, True), ("greater", 1.5, False), ("less", 0.1, False),
])  # fmt: skip
def test_the_thin_side_of_a_skewed_shape_is_named(alternative, skewness, said):
    """Below 15 readings a one-sided question on the thin side has a higher risk than its level."""
    analysis = built(question=replace(ASKED, alternative=alternative))
    skewed = replace(analysis, summary=replace(analysis.summary, skewness=skewness))
    assert any("thin side" in text for text in cautions(skewed)) == said


def test_uncertainties_that_a_procedure_leaves_out_are_named():
    """Only z and t take the target's and the laboratory's own uncertainty in."""
    both = replace(ASKED, target_uncertainty="0.01", measurement_uncertainty="0.01")
    found = cautions(built(question=both, procedure="sign"))
    assert any(
        "uncertainty of the target and the laboratory's own uncertainty are not included" in text for text in found
    )
    assert not any("not included" in text for text in cautions(built(question=both)))


def test_a_bound_that_would_decide_otherwise_is_named():
    """The stricter bound and the k = 2 comparison never decide, but a disagreement is said."""
    analysis = built(question=ASKED)
    bound = Bound("stricter bound", 1.0, False, "It takes the scatter by its own t.")
    disagreeing = replace(analysis, uncertainty=replace(analysis.uncertainty, bounds=(bound,)))
    assert any("stricter bound comparison would decide otherwise" in text for text in cautions(disagreeing))
    agreeing = replace(analysis.uncertainty, bounds=(replace(bound, rejects=True),))
    assert not any("otherwise" in text for text in cautions(replace(analysis, uncertainty=agreeing)))


def test_a_certified_value_without_uncertainty_is_said_to_be_taken_as_exact():
    """Leaving the certificate's uncertainty out raises the risk, so it is said."""
    certified = replace(ASKED, target_kind="certified value")
    assert any("treated as exact" in text for text in cautions(built(question=certified)))
    known = replace(certified, target_uncertainty="0.01")
    assert not any("treated as exact" in text for text in cautions(built(question=known)))


def test_a_side_chosen_afterwards_and_further_looks_are_named():
    """Both raise the risk of a false alarm."""
    late = replace(ASKED, alternative="greater", set_after=("alternative",), look=2)
    found = cautions(built(question=late))
    assert any("doubles the risk" in text for text in found)
    assert any("further test" in text for text in found)
