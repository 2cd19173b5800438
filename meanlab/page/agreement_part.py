"""Agreement: what was asked, which decision rule follows, and the interval held against the limits."""

from meanlab.page import pictures, tables
from meanlab.page.cache import Outcome
from meanlab.wording import agreement_sentence, decision_rule


def draw(found: Outcome | None) -> None:
    """Draw the sentence on agreement, its decision rule, and the picture where there is a limit."""
    if found is None:
        tables.sentences(["Whether the mean agrees within a limit E stands here as soon as there is a result."])
        return
    analysis = found.analysis
    tables.sentences([agreement_sentence(analysis), decision_rule(analysis)])
    if analysis.equivalence is not None:
        pictures.agreement(analysis)
