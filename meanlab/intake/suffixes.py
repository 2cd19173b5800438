"""What stands behind the numbers of a column: behind every reading a unit, behind some of them a mark or a slip."""

import re
from collections import Counter
from collections.abc import Hashable, Mapping
from dataclasses import replace
from typing import Any

from meanlab.intake.entry import Parsed, meant_by_letter
from meanlab.intake.units import is_unit, same_unit
from meanlab.intake.words import FLAGS

_OPEN_UNIT = re.compile(r"[^\W\d_][^\s()\d]{0,11}|[€£¥¢]")

_UNITS_OF_ONE_LETTER = "gLV"  # others, such as H, J, U or m, are marks where only some readings carry them


def settled(known: Mapping[Hashable, Parsed], counts: Counter[Any], heading_unit: str | None) -> dict[Hashable, Parsed]:
    """Return the different entries of a column, each key once, with what stands behind their numbers settled.

    ``counts`` tells how often each stands in the column. A word that no list knows is a unit where every reading
    carries it; a single letter is a unit where most carry it, and a mark, or a slip like "12,3O", elsewhere.
    """
    carried: Counter[str] = Counter()
    for key, one in known.items():
        if one.numeral:
            carried[_behind(one)] += counts[key]
    total = carried.total()
    word = next(iter(carried), "")
    if len(carried) == 1 and total > 1 and _is_open_unit(word) and not heading_unit:
        return {
            key: replace(one, unit=word, remark="", sort="open unit") if one.numeral else one
            for key, one in known.items()
        }
    usual = {unit for unit, times in carried.items() if times * 2 > total and not _is_foreign(unit, heading_unit)}
    return {key: one if _behind(one) in usual else _without_letter(key, one) for key, one in known.items()}


def _behind(one: Parsed) -> str:
    return one.remark if one.sort == "flag" else one.unit


def _text_of(key: Any) -> str:
    return _text_of(key[0]) if isinstance(key, tuple) else str(key)


def _is_open_unit(word: str) -> bool:
    return bool(_OPEN_UNIT.fullmatch(word)) and not is_unit(word) and word.casefold() not in FLAGS


def _is_foreign(unit: str, heading_unit: str | None) -> bool:
    """Tell whether a single letter is not the unit of the heading, hence a mark and no clash of units."""
    return bool(heading_unit) and len(unit) == 1 and unit.isalpha() and not same_unit(unit, heading_unit or "")


def _without_letter(key: Hashable, one: Parsed) -> Parsed:
    letter = one.unit or one.remark
    is_lone = len(letter) == 1 and letter.isalpha() and letter not in _UNITS_OF_ONE_LETTER
    if not one.numeral or one.sort not in ("", "flag") or not is_lone:
        return one
    slip = meant_by_letter(_text_of(key), one)
    return Parsed("unread", sort="text", meant=slip) if slip else replace(one, unit="", remark=letter, sort="flag")
