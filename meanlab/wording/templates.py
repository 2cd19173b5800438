"""The sentences of the report as one table: verdict × alternative × family, and not testable by its cause.

A template is a frame for the verdict with the evidence of the family in it. Names in braces are filled by
sentences.py:

    opening     "The mean of 12 readings of Nitrate in NC-7, 5.022 mg/L (95 % interval …)"
    target      "the certified value 5.000 mg/L", exactly as typed
    difference  "+0.022 mg/L (+0.43 %)"; plain_difference "+0.022 mg/L, +0.43 %"
    figures     "t(11) = 4.08, p = 0.0018, level 5 %; scatter of these readings only"
    scatter     "scatter", or "the combined uncertainty" where more than scatter is in it
    sides       "9 of 10 lie above it"
    missed      what could have been missed
    limit       the equivalence limit E as typed
    bound       the interval held against the limits, with its level
    agreeing    "p < 0.001 for agreement"; one-sided "p < 0.001 for that"
"""

from collections.abc import Mapping

FAMILIES: Mapping[str, str] = {
    "z": "mean",
    "t": "mean",
    "guarded_t": "mean",
    "signed_rank": "centre of symmetry",
    "sign": "median",
}

# family → evidence where the test rejects, where a two-sided one does not, where a one-sided one does not
_EVIDENCE: Mapping[str, tuple[str, str, str]] = {
    "mean": (
        "the difference of {difference} is more than {scatter} explains ({figures})",
        "the difference of {difference} is not more than {scatter} explains ({figures})",
        "the difference is {plain_difference} ({figures})",
    ),
    "centre of symmetry": (
        "the difference of {difference} is more than scatter about a symmetric centre explains ({figures})",
        "the difference of {difference} is not more than scatter about a symmetric centre explains ({figures})",
        "the difference is {plain_difference} ({figures})",
    ),
    "median": (
        "{sides}, more to one side than chance explains (difference {plain_difference}; {figures})",
        "{sides}, which chance alone can bring about (difference {plain_difference}; {figures})",
        "{sides} (difference {plain_difference}; {figures})",
    ),
}

# what is asked → the words of that side; "less" is the mirror of "greater"
_SIDES: Mapping[str, Mapping[str, str]] = {
    "greater": {
        "exceeds": "exceeds",
        "exceed": "exceed",
        "lies below": "lies below",
        "lie below": "lie below",
        "above it": "above it",
        "below it": "below it",
        "upper": "upper",
    },
    "less": {
        "exceeds": "falls below",
        "exceed": "fall below",
        "lies below": "lies above",
        "lie below": "lie above",
        "above it": "below it",
        "below it": "above it",
        "upper": "lower",
    },
}

_TWO_SIDED: Mapping[str, tuple[str, int]] = {
    "differs": ("{opening}, differs from {target}: {evidence}.", 0),
    "differs, with a limit": (
        "{opening}, differs from {target}: {evidence}; {bound}, does not lie within ± {limit} of it ({agreeing}).",
        0,
    ),
    "differs, within the limit": (
        "{opening}, differs from {target}, but by less than {limit}: {evidence}; {bound}, lies within ± {limit} of it "
        "({agreeing}).",
        0,
    ),
    "agrees": (
        "{opening}, agrees within ± {limit} with {target}: {bound}, lies within that limit ({agreeing}); {evidence}.",
        1,
    ),
    "cannot tell": ("{opening}, is not shown to differ from {target}: {evidence}. Cannot tell: {missed}.", 1),
    "cannot tell, with a limit": (
        "{opening}, is shown neither to differ from {target} nor to agree with it within ± {limit}: {evidence}; "
        "{bound}, does not lie within that limit ({agreeing}). Cannot tell: {missed}.",
        1,
    ),
    "undecided": ("{opening}, cannot be judged against {target}: {cause} ({figures}). Cannot tell: {missed}.", 1),
}

_ONE_SIDED: Mapping[str, tuple[str, int]] = {
    "differs": ("{opening}, [exceeds] {target}: {evidence}.", 0),
    "differs, with a limit": (
        "{opening}, [exceeds] {target}: {evidence}; that it does so by less than {limit} is not shown: {bound} "
        "({agreeing}).",
        0,
    ),
    "differs, within the limit": (
        "{opening}, [exceeds] {target}, by less than {limit}: {evidence}; {bound}, keeps to that ({agreeing}).",
        0,
    ),
    "agrees": ("{opening}, [lies below] {target}: {bound}, lies [below it] ({agreeing}); {evidence}.", 2),
    "agrees, beyond the target": (
        "{opening}, [lies below] {target}, and so does not [exceed] it by {limit} or more: {bound}, lies [below it] "
        "({agreeing}); {evidence}.",
        2,
    ),
    "agrees, with a limit": (
        "{opening}, does not [exceed] {target} by {limit} or more: {bound}, keeps to that ({agreeing}); {evidence}.",
        2,
    ),
    "cannot tell": (
        "{opening}, is shown neither to [exceed] {target} nor to [lie below] it: {evidence}. Cannot tell: {missed}.",
        2,
    ),
    "cannot tell, with a limit": (
        "{opening}, is shown neither to [exceed] {target} nor to stay less than {limit} [above it]: {evidence}. "
        "Cannot tell: {missed}.",
        2,
    ),
    "undecided": ("{opening}, cannot be judged against {target}: {cause} ({figures}). Cannot tell: {missed}.", 2),
}


def _mirrored(frame: str, alternative: str) -> str:
    for word, own in _SIDES[alternative].items():
        frame = frame.replace(f"[{word}]", own)
    return frame


def _table() -> dict[tuple[str, str, str], str]:
    table = {}
    for family, evidence in _EVIDENCE.items():
        for verdict, (frame, which) in _TWO_SIDED.items():
            table[verdict, "two-sided", family] = frame.replace("{evidence}", evidence[which])
        for alternative in ("greater", "less"):
            for verdict, (frame, which) in _ONE_SIDED.items():
                filled = frame.replace("{evidence}", evidence[which])
                table[verdict, alternative, family] = _mirrored(filled, alternative)
    return table


TEMPLATES: Mapping[tuple[str, str, str], str] = _table()

NOT_TESTABLE: Mapping[str, str] = {
    "one reading": (
        "One reading{of_subject}, {estimate}, cannot be tested against {target}: without a known σ nothing tells how "
        "far such readings scatter. {beside}"
    ),
    "identical": (
        "{Units}{of_subject}, all {estimate}, cannot be tested against {target}: they do not scatter at their "
        "resolution. {beside}"
    ),
    "one preparation": (
        "{Readings}{of_subject}, mean {estimate}, cannot be tested against {target}: they come from one preparation, "
        "which counts as one independent unit, and the scatter between preparations is unknown. {beside}"
    ),
    "two units": "{The_parameter} of {units}{of_subject} cannot be compared with {target}: {reason}.",
    "undecided": "{The_parameter} of {units}{of_subject} cannot be tested against {target}: {reason}.",
    "fixed": "{The_parameter} of {units}{of_subject}{value} cannot be tested against {target}: {reason}. {beside}",
    "other": "{The_parameter} of {units}{of_subject}{value} cannot be tested against {target}: {reason}. {beside}",
}

VERDICT_WORDS: Mapping[tuple[str, str], str] = {
    ("differs", "two-sided"): "differs",
    ("differs, within the limit", "two-sided"): "differs, by less than {limit}",
    ("agrees", "two-sided"): "agrees within ± {limit}",
    ("differs", "greater"): "exceeds",
    ("differs, within the limit", "greater"): "exceeds, by less than {limit}",
    ("agrees", "greater"): "lies below the {noun}",
    ("agrees, beyond the target", "greater"): "lies below the {noun}",
    ("agrees, beyond the target", "less"): "lies above the {noun}",
    ("agrees, with a limit", "greater"): "does not exceed the {noun} by {limit} or more",
    ("differs", "less"): "falls below",
    ("differs, within the limit", "less"): "falls below, by less than {limit}",
    ("agrees", "less"): "lies above the {noun}",
    ("agrees, with a limit", "less"): "does not fall below the {noun} by {limit} or more",
}

DECISION_RULES: Mapping[tuple[str, bool], str] = {
    ("two-sided", False): (
        "Decision rule: the {parameter} is said to differ from {target} only where its {level} interval leaves "
        "it out; if the true value were the target, this would be said wrongly with a risk of at most {risk}. "
        "Otherwise nothing is decided."
    ),
    ("two-sided", True): (
        "Decision rule: the {parameter} is said to differ from {target} only where its {level} interval leaves "
        "it out, and to agree within ± {limit} only where its {agreement_level} interval lies within that limit; each "
        "claim alone is wrong with a risk of at most {risk}. Otherwise nothing is decided."
    ),
    ("greater", False): (
        "Decision rule: the {parameter} is said to exceed {target} only where its {level} lower bound lies above "
        "it, and to lie below it only where its {level} upper bound lies below it; each claim alone is wrong with a "
        "risk of at most {risk}. Otherwise nothing is decided."
    ),
    ("greater", True): (
        "Decision rule: the {parameter} is said to exceed {target} only where its {level} lower bound lies above "
        "it, and not to exceed it by {limit} or more only where its {level} upper bound lies less than {limit} above "
        "it; each claim alone is wrong with a risk of at most {risk}. Otherwise nothing is decided."
    ),
    ("less", False): (
        "Decision rule: the {parameter} is said to fall below {target} only where its {level} upper bound lies "
        "below it, and to lie above it only where its {level} lower bound lies above it; each claim alone is wrong "
        "with a risk of at most {risk}. Otherwise nothing is decided."
    ),
    ("less", True): (
        "Decision rule: the {parameter} is said to fall below {target} only where its {level} upper bound lies "
        "below it, and not to fall below it by {limit} or more only where its {level} lower bound lies less than "
        "{limit} below it; each claim alone is wrong with a risk of at most {risk}. Otherwise nothing is decided."
    ),
}
