"""Numbers as text, and sentences: the facts of an analysis in the words of a report."""

from meanlab.wording.cautions import cautions
from meanlab.wording.panel import PanelTexts, panel_texts, tab_separated
from meanlab.wording.sentences import (
    agreement_sentence,
    conclusion,
    decision_rule,
    enough_sentence,
    verdict_word,
    with_without_sentence,
)
from meanlab.wording.shown import Shown, shown

__all__ = [
    "PanelTexts",
    "Shown",
    "agreement_sentence",
    "cautions",
    "conclusion",
    "decision_rule",
    "enough_sentence",
    "panel_texts",
    "shown",
    "tab_separated",
    "verdict_word",
    "with_without_sentence",
]
