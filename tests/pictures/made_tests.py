"""Tests of all five procedures on made-up whole numbers, for the drawings."""

from math import inf

from hypothesis import strategies as given

from meanlab.core.results import Test
from meanlab.procedures.mean_tests import NONE_FURTHER, guarded_t, known_sigma, students_t
from meanlab.procedures.sample import Sample, Spans, whole_array
from meanlab.procedures.sign import sign_test
from meanlab.procedures.signed_rank import signed_rank

PROCEDURES = ("z", "t", "guarded_t", "signed_rank", "sign")
ALTERNATIVES = ("two-sided", "greater", "less")


def made(procedure: str, whole: list[int], target: int, alternative: str = "two-sided", alpha: float = 0.05) -> Test:
    """Return a procedure's test of whole hundredths against a target in hundredths; z takes σ = 1."""
    sample = Sample(whole_array(whole), target, -2)
    if procedure == "z":
        return known_sigma(sample, 1.0, inf, alternative, alpha, NONE_FURTHER)
    if procedure == "sign":
        return sign_test(Spans.of(sample), alternative, alpha)
    return {"t": students_t, "guarded_t": guarded_t, "signed_rank": signed_rank}[procedure](sample, alternative, alpha)


whole_numbers = given.lists(given.integers(-400, 400), min_size=3, max_size=14).filter(lambda x: len(set(x)) > 1)
targets = given.integers(-500, 500)
alternatives = given.sampled_from(ALTERNATIVES)
procedures = given.sampled_from(PROCEDURES)
levels = given.sampled_from((0.2, 0.05, 0.01))
