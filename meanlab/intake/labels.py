"""What stands before a reading on its line: a list number, a time stamp, a sample code, the name of the quantity."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from meanlab.intake.entry import STAMP, Parsed, parse
from meanlab.intake.units import is_unit
from meanlab.intake.words import FLAGS, is_summary

_LIST_NUMBER = re.compile(
    r"(?:\(\d{1,6}\)|\[\d{1,6}\]|#\s?\d{1,6}[.):]?(?=\s|$)|(?:no|nr)\.?\s?\d{1,6}[.):]?(?=\s|$)"
    r"|\d{1,6}\s?[.):](?=\s|$)|\d{1,6}\)|(?:[ivx]{1,4}|[A-Za-z])(?:\)|\.(?=\s)))\s*",
    re.IGNORECASE | re.ASCII,
)
_BULLET = re.compile(r"[•·‣▪◦*]\s+")
_STAMP = re.compile(rf"[\[(]?(?:{STAMP})[\])]?(?:\s*[,;|=]\s*|\s+|:\s+)(?=\S)", re.IGNORECASE | re.ASCII)
_STAMP_ALONE = re.compile(rf"[\[(]?(?:{STAMP})[\])]?[,;|=:]?\s", re.IGNORECASE | re.ASCII)
_PATTERNS = {"number": _LIST_NUMBER, "stamp": _STAMP_ALONE}
_DASH = re.compile(r"\d{1,4}\s+-\s+(?=[\d<>.+])", re.ASCII)
_BEGINNINGS = (("number", _LIST_NUMBER), ("bullet", _BULLET), ("stamp", _STAMP), ("dash", _DASH))
_BARE_NUMBER = re.compile(r"-?\d+(?:[.,]\d+)?", re.ASCII)
_QUICK_LINE = re.compile(
    r"([^\W\d_][\w#/-]*(?: [\w#/-]+){0,2})(?:\s?[:=]\s?| )(-?\d+(?:[.,]\d+)?(?:\s?([^\W\d_%][^\s\d]*|%))?)"
)
_QUICK = Parsed("reading")
_NO_LABELS = frozenset({"minus", "negative", "neg", "neg.", "not", "no", "nearly", "almost", "half", "twice", "times"})
_DECIMALS = re.compile(r"\d[.,]\d")
MOST_LABEL = 32
MOST_WORDS = 3


@dataclass(frozen=True, slots=True)
class Labelled:
    """A line taken apart: what stands before the entry, which sort of thing that is, and the entry itself."""

    sort: str
    label: str
    entry: str
    parsed: Parsed


def is_clean(parsed: Parsed) -> bool:
    """Tell whether an entry is a number, a limit or a mark for no value, with no doubt about it."""
    return parsed.kind != "unread" and not (parsed.kind == "reading" and parsed.sort in ("flag", "trailing minus"))


def take_apart(line: str) -> list[Labelled]:
    """Return every way to see a line as something before an entry; empty where there is none.

    >>> [(found.sort, found.label, found.entry) for found in take_apart("QC-1 5.02")]
    [('label', 'QC-1', '5.02')]
    """
    found = []
    for sort, pattern in _BEGINNINGS:
        start = pattern.match(line)
        rest = line[start.end() :] if start else ""
        if start and rest and (parsed := parse(rest)).kind != "unread":
            found.append(Labelled(sort, start[0].strip(), rest, parsed))
    if not found:
        found.extend(_by_label(line))
    return found


def quickly_apart(line: str, style: str) -> Labelled | None:
    """Return the commonest beginnings of a known style before a bare number; None where a closer look is needed.

    >>> quickly_apart("QC-1: 5.02 mg/L", "label").entry
    '5.02 mg/L'
    """
    if style == "label":
        found = _QUICK_LINE.fullmatch(line)
        if not found or (found[3] and not is_unit(found[3])) or len(found[1]) > MOST_LABEL or is_summary(found[1]):
            return None
        return Labelled(style, found[1], line[found.start(2) :], _QUICK) if _is_label(found[1]) else None
    before, blank, entry = line.rpartition(" ")
    if not blank or style not in _PATTERNS or not _BARE_NUMBER.fullmatch(entry):
        return None
    before = before.strip()
    whole = _PATTERNS[style].fullmatch(before + " " if style == "stamp" else before)
    return Labelled(style, before, entry, _QUICK) if whole else None


def _by_label(line: str) -> list[Labelled]:
    """The longest label that leaves a clean entry."""
    words = line.replace(":", ": ").replace("=", "= ").split()
    if len(words) < 2 or len(line) > 80:
        return []
    for count in range(min(len(words) - 1, MOST_WORDS + 2), 0, -1):
        label, rest = " ".join(words[:count]), " ".join(words[count:])
        bare = label.rstrip(" :=")
        if not _is_label(bare) or len(bare) > MOST_LABEL or (count > MOST_WORDS and label[-1] not in ":="):
            continue
        parsed = parse(rest)
        if (parsed.numeral and (is_clean(parsed) or _is_marked(parsed, label))) or parsed.kind == "missing":
            return [Labelled("summary" if is_summary(bare) else "label", bare, rest, parsed)]
    return []


def _is_marked(parsed: Parsed, label: str) -> bool:
    """Tell whether a mark or a remark stands behind a labelled reading, and not the next words of a sentence."""
    mark = parsed.remark
    is_mark = len(mark) < 3 or not mark[0].isalpha() or mark.casefold() in FLAGS
    is_code = len(label.split()) < 3 and any(map(str.isdigit, label))
    return parsed.sort == "flag" and (is_mark or is_code)


def _is_label(text: str) -> bool:
    if not text or _DECIMALS.search(text) or any(mark in text for mark in "±<>≤≥"):
        return False
    if text.split()[0].casefold() in _NO_LABELS:
        return False
    return text[0].isalpha() or (bool(re.match(r"\d+[-/A-Za-z]", text)) and not parse(text).numeral)


def common_style(lines: Sequence[list[Labelled]], plain: int) -> str:
    """Return the sort of beginning that most lines share ("" for none); ``plain`` lines are entries as they stand.

    List numbers that do not go up are none: "5. 02", "5. 04" is a slip of the keyboard.
    """
    counts: dict[str, list[str]] = {}
    for ways in lines:
        for way in ways:
            if way.sort != "summary":
                counts.setdefault(way.sort, []).append(way.label)
    numbers = [int(found[0]) for label in counts.get("number", ()) if (found := re.search(r"\d+", label))]
    if any(b <= a for a, b in pairwise(numbers)) or (len(numbers) == 1 and numbers[0] > 1):
        del counts["number"]
    dashed = [int(label.split()[0]) for label in counts.get("dash", ())]
    if dashed != list(range(1, len(dashed) + 1)) or len(dashed) < 3:
        counts.pop("dash", None)  # "10 - 12" is a range, "1 - 5.02", "2 - 5.04", "3 - 4.98" are numbered lines
    best = max(counts, key=lambda sort: len(counts[sort]), default="")
    most = len(counts[best]) if best else 0
    return best if most >= max(plain, 1) and (most > 1 or not plain) else ""
