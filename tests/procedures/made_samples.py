"""Samples made of number texts, for the tests of the procedures."""

from collections.abc import Sequence
from fractions import Fraction

from meanlab.core.numbers import common_exponent, exact, scaled
from meanlab.procedures.sample import Sample, whole_array


def sample_of(texts: Sequence[str], target: str = "0") -> Sample:
    """Return the readings of these texts as a Sample against a target."""
    values, held_against = [exact(text) for text in texts], exact(target)
    exponent = common_exponent([*values, held_against])
    whole, scaled_target = [scaled(value, exponent) for value in values], scaled(held_against, exponent)
    return Sample(whole_array(whole, scaled_target), scaled_target, exponent)


def fractions_of(texts: Sequence[str]) -> list[Fraction]:
    """Return the readings of these texts as fractions, by the standard library's own reading of them."""
    return [Fraction(text) for text in texts]
