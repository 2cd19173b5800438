"""Lines that part the readings of one preparation from those of the next: "Prep A", then its readings, "Prep B" …"""

import re
from dataclasses import replace

from meanlab.intake.lines import Lines
from meanlab.intake.roles import PREPARATIONS
from meanlab.intake.table import sort_of_text
from meanlab.intake.words import plain_word

_RUNNING = re.compile(r"(?P<stem>[^\W\d_][^\d:]*?)[\s_.#-]*(?P<mark>\d{1,3}|[A-Za-z]|[IVX]{1,4})\s*:?")
MOST_LINES = 200_000


def preparation_of(text: str) -> str:
    """Return the label of a preparation if a line is one, "" otherwise.

    >>> preparation_of("Prep A:"), preparation_of("Vial 2"), preparation_of("Nitrate")
    ('Prep A', 'Vial 2', '')
    """
    found = _RUNNING.fullmatch(text.strip()) if text[:1].isalpha() and len(text) < 60 else None
    return text.strip().rstrip(": ") if found and plain_word(found["stem"]) in PREPARATIONS else ""


def without_group_lines(lines: Lines) -> tuple[Lines, dict[int, str] | None]:
    """Return the lines without those that name a preparation, and {line number: label} of the lines below them."""
    if len(lines.texts) > MOST_LINES:
        return lines, None
    bare = [line.strip() for line in lines.texts]
    labels = [label if (label := preparation_of(line)) and sort_of_text(line) == "text" else "" for line in bare]
    if len({label for label in labels if label}) < 2:
        return lines, None
    first = next(place for place, label in enumerate(labels) if label)
    if any(sort_of_text(line) in ("number", "limit") for line in bare[:first]):
        return lines, None
    named: dict[int, str] = {}
    current = ""
    for number, label in zip(lines.numbers, labels, strict=True):
        current = label or current
        named[number] = current
    kept = [place for place, label in enumerate(labels) if not label]
    found = replace(
        lines, texts=[lines.texts[place] for place in kept], numbers=[lines.numbers[place] for place in kept]
    )
    return found, named
