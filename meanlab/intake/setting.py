"""One number of one field (target, σ, U, E): the same grammar as a reading, but one number and nothing else."""

import re

from meanlab.core.complaints import QuestionComplaint
from meanlab.core.numbers import exact

_PLAIN = re.compile(r"[+-]?(?:\d+[.,]?\d*|[.,]\d+)(?:[eE][+-]?\d{1,4})?", re.ASCII)
_SIGNS = str.maketrans({"−": "-", "–": "-", "＋": "+"})


def read_number(text: str, decimal_sign: str | None = None) -> str:
    """Return the number of one field as typed, with its zeros and its decimal sign."""
    plain = text.strip().translate(_SIGNS)
    if not _PLAIN.fullmatch(plain):
        raise QuestionComplaint(
            f'"{text.strip()[:60]}" is not a number. Type one number with one decimal point or comma.'
        )
    exact(plain, "This field", QuestionComplaint)
    return plain
