"""One name for one thing: the words that the page, the records and the sentences use for the keys of the package."""

from collections.abc import Mapping

from meanlab.core.results import Analysis
from meanlab.wording.numbers import plain_words

IN_TWO_UNITS = -2  # the row of a route where readings and target are in different units
PROCEDURE_NAMES: Mapping[str, str] = {
    "z": "z (known σ)",
    "t": "Student's t",
    "guarded_t": "guarded t",
    "signed_rank": "signed rank",
    "sign": "sign",
}
PROCEDURE_SHORT: Mapping[str, str] = {
    "z": "z",
    "t": "t",
    "guarded_t": "guarded t",
    "signed_rank": "signed rank",
    "sign": "sign",
}
PARAMETER_TITLES: Mapping[str, str] = {
    "mean": "Mean",
    "centre of symmetry": "Centre of symmetry",
    "median": "Median",
}
ALTERNATIVE_NAMES: Mapping[str, str] = {
    "two-sided": "two-sided",
    "greater": "one-sided: exceeds",
    "less": "one-sided: falls below",
}
ALTERNATIVE_QUESTIONS: Mapping[str, str] = {
    "two-sided": "differs either way",
    "greater": "exceeds",
    "less": "falls below",
}
TARGET_NOUNS: Mapping[str, str] = {
    "certified value": "certified value",
    "nominal value": "nominal value",
    "upper limit": "upper limit",
    "lower limit": "lower limit",
    "historical level": "historical level",
    "zero (blank)": "blank value",
}
CHECK_TITLES: Mapping[str, str] = {
    "normality": "Normality",
    "far readings": "Far readings",
    "run order": "Run order",
    "resolution": "Resolution",
    "enough readings": "Enough readings",
    "units": "Units",
    "sigma": "Scatter against the known σ",
}
AFTERTHOUGHT_NAMES: Mapping[str, str] = {
    "alternative": "side asked",
    "target": "target",
    "equivalence limit": "equivalence limit",
    "difference that matters": "difference that matters",
    "left-out readings": "choice of readings left out",
}


def target_noun(kind: str) -> str:
    """Return the noun the sentence puts before the target; a kind of the user's own stays as typed.

    >>> target_noun("zero (blank)"), target_noun("action level")
    ('blank value', 'action level')
    """
    return TARGET_NOUNS.get(kind, plain_words(kind) or "target")


def short_noun(kind: str) -> str:
    """Return "limit" for a target that is one, else "target".

    >>> short_noun("upper limit"), short_noun("certified value")
    ('limit', 'target')
    """
    return "limit" if "limit" in kind else "target"


def unit_of(analysis: Analysis) -> str:
    """Return the unit of the readings on one line: as the question writes it, else the heading."""
    if analysis.route.row == IN_TWO_UNITS:
        return plain_words(analysis.readings.unit)
    return plain_words(analysis.question.unit) or plain_words(analysis.readings.unit)


def subject_of(analysis: Analysis) -> str:
    """Return what was measured, and of what: "Nitrate in control solution NC-7"; "" where neither was named."""
    quantity = plain_words(analysis.question.quantity) or plain_words(analysis.readings.name)
    material = plain_words(analysis.question.material)
    return f"{quantity} in {material}" if quantity and material else quantity or material


def counted(number: int, noun: str) -> str:
    """Return a number with its noun, in the singular for one.

    >>> counted(1, "reading"), counted(12, "independent reading")
    ('1 reading', '12 independent readings')
    """
    return f"{number} {noun}" if number == 1 else f"{number} {noun}s"
