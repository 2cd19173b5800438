"""Texts with one entry a line: they are kept as they are, without a row object for each line."""

import re
from collections.abc import Sequence
from typing import overload

SHORTEST = 20_000  # characters
MOST_HEADING_LINES = 20

# Neither takes steps back, so that a text of any length is searched once.
ODD_BY_POINT = re.compile(r"^(?![+-]?\d{1,20}(?:\.\d{0,19})?$)", re.ASCII | re.MULTILINE)
ODD_BY_COMMA = re.compile(r"^(?![+-]?\d{1,20}(?:,\d{0,19})?$)", re.ASCII | re.MULTILINE)


class OneColumn(Sequence[Sequence[str]]):
    """Rows of one cell each; a row is made when it is looked at.

    From the row ``plain_from`` on all are bare numbers with no other decimal sign than ``sign``.
    """

    def __init__(self, texts: list[str], plain_from: int | None = None, sign: str = "") -> None:
        self.texts, self.sign = texts, sign
        self.plain_from = len(texts) if plain_from is None else plain_from

    def __len__(self) -> int:
        return len(self.texts)

    @overload
    def __getitem__(self, where: int) -> Sequence[str]: ...
    @overload
    def __getitem__(self, where: slice) -> Sequence[Sequence[str]]: ...
    def __getitem__(self, where: int | slice) -> Sequence[str] | Sequence[Sequence[str]]:
        if isinstance(where, slice):
            return [[text] if text else [] for text in self.texts[where]]
        return [self.texts[where]] if self.texts[where] else []


def long_column(text: str) -> OneColumn | None:
    """Return a long text of plain numbers, perhaps under a few lines of heading, as one column; None for any other.

    >>> long_column("5.02\\n5.04") is None, len(long_column("Nitrate\\n" + "5.02\\n" * 9000))
    (True, 9001)
    """
    if len(text) < SHORTEST:
        return None
    text = text.replace("\r\n", "\n").rstrip("\n")
    start, line = 0, 0
    while line < MOST_HEADING_LINES and _is_odd(text, start):
        end = text.find("\n", start)
        if end < 0:
            return None
        start, line = end + 1, line + 1
    for sign, odd in ((".", ODD_BY_POINT), (",", ODD_BY_COMMA)):
        if not odd.search(text, start):
            head = [heading.strip() for heading in text[:start].split("\n")[:-1]] if start else []
            if any(mark in heading for heading in head for mark in ('"', "\t", ";", ",", "#", "//")):
                return None
            return OneColumn([*head, *text[start:].split("\n")], line, sign)
    return None


def _is_odd(text: str, start: int) -> bool:
    end = text.find("\n", start)
    line = text[start : end if end >= 0 else None]
    return bool(ODD_BY_POINT.match(line) and ODD_BY_COMMA.match(line))
