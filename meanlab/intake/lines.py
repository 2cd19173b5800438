"""The lines of a text: what is a comment or a ruler between them, and what may not be passed over in silence."""

import re
from collections.abc import Sequence
from dataclasses import dataclass, field

from meanlab.intake.characters import shown
from meanlab.intake.heading import heading_of
from meanlab.intake.table import parsed, sort_of_text
from meanlab.intake.words import ERROR_CELLS, plain_word

_LINE_END = re.compile(r"[\n\r\x0b\x0c\x1c-\x1e\x85\u2028\u2029]")
_COMMENT = re.compile(r"#(?!\d)|//|;\s")
_LIST_HASH = re.compile(r"#\s?\d{1,6}[.):]?\s+\S")
_RULER = re.compile(r"[\s|:+=_-]{5,}|(?:[-=_]{2,}[\s|+]+)+[-=_]{2,}|[|+][-=_:|+\s]+[|+]")
_ENTRIES = frozenset({"number", "limit", "missing", "word", "stamp"})
_SINGLE = frozenset({"lost power", "span", "formula", "width", "infinite"})
SAMPLE = 400
MOST_HEADING_LINES = 60


@dataclass
class Lines:
    """Lines that are neither comments nor rulers, with their numbers, and what was said about the others."""

    texts: list[str]
    numbers: list[int]
    notes: list[str] = field(default_factory=list)
    remarks: list[str] = field(default_factory=list)


def split_lines(text: str) -> list[str]:
    """Return the lines of a text, whatever ends them."""
    text = text.replace("\r\n", "\n")
    if text.isascii() and not any(mark in text for mark in "\r\x0b\x0c\x1c\x1d\x1e"):
        return text.split("\n")
    return _LINE_END.split(text)


def lines_of(text: str) -> Lines:
    """Return the lines of a text without comments and rulers; a number behind a comment sign is said aloud."""
    raw = split_lines(text)
    found = Lines(raw, list(range(1, len(raw) + 1)))
    if not any(mark in text for mark in ("#", "//", ";", "--", "==", "__")):
        return found
    numbered = sum(bool(_LIST_HASH.match(line.strip())) for line in raw[:SAMPLE]) > 1
    kept: list[tuple[int, str]] = []
    left: list[tuple[int, str]] = []
    for number, line in enumerate(raw, 1):
        bare = line.strip()
        if set(bare) == {"-"} and kept and sort_of_text(kept[-1][1].strip()) in _ENTRIES:
            kept.append((number, line))  # dashes between readings stand for a missing one
        elif not bare or bare[0] not in "#/;-=_+|:" or not _is_passed_over(bare, numbered):
            kept.append((number, line))
        elif bare[0] == "#" and number <= MOST_HEADING_LINES and heading_of(bare.lstrip("# ")).unit:
            kept.append((number, bare.lstrip("# ")))
        elif not _RULER.fullmatch(bare):
            left.append((number, bare))
    found = Lines([line for _, line in kept], [number for number, _ in kept])
    hidden = [(number, line) for number, line in left if sort_of_text(line.lstrip("#/; ")) in ("number", "limit")]
    if hidden:
        where = ", ".join(f'line {number} "{shown(line)}"' for number, line in hidden[:5])
        found.remarks.append(f"Numbers behind a comment sign were not read: {where}.")
    elif left:
        found.notes.append(f"{len(left)} comment {'line was' if len(left) == 1 else 'lines were'} not read.")
    return found


def _is_passed_over(line: str, numbered: bool) -> bool:
    if _RULER.fullmatch(line) and set(line) != {"+"}:
        return True
    if line[0] == "#" and (plain_word(line) in ERROR_CELLS or set(line) == {"#"} or "\t" in line):
        return False
    return bool(_COMMENT.match(line)) and not (numbered and _LIST_HASH.match(line))


def sample(lines: Sequence[str]) -> list[str]:
    """Return lines to look at: all of a short text, the first and evenly spread ones of a long text."""
    if len(lines) <= 2 * SAMPLE:
        return list(lines)
    return [*lines[:SAMPLE], *lines[SAMPLE :: len(lines) // SAMPLE]]


def is_entry(line: str) -> bool:
    """Tell whether a line is one entry as it stands, though perhaps one that cannot be read."""
    return sort_of_text(line) in _ENTRIES or parsed(line).sort in _SINGLE
