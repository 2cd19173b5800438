"""The door of the intake: a pasted text or the bytes of a file in, an Intake out."""

import re
from collections.abc import Mapping
from typing import Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.found import Column, Intake, Special

_NUMBER = re.compile(r"[+-]?(?:\d+[.,]?\d*|[.,]\d+)(?:[eE][+-]?\d{1,3})?", re.ASCII)


def read(source: str | bytes, filename: str | None = None, selection: Mapping[str, Any] | None = None) -> Intake:
    """Return what was read from a pasted text or the bytes of a file."""
    if not isinstance(source, (str, bytes)):
        raise IntakeComplaint("Readings come as a pasted text or as the bytes of a file.")
    text = source if isinstance(source, str) else source.decode("utf-8", "replace")
    lines = [(number, line.strip()) for number, line in enumerate(text.splitlines(), 1) if line.strip()]
    texts = [line for _, line in lines]
    special = {i: Special("unread", role="could not be read") for i, t in enumerate(texts) if not _NUMBER.fullmatch(t)}
    comma = any("," in t for i, t in enumerate(texts) if i not in special)
    numbers = [t.replace(",", ".") for i, t in enumerate(texts) if i not in special]
    if not numbers:
        return Intake(refused=True, reason="No reading could be read: paste the readings, one a line.")
    return Intake(
        texts, special, numbers, decimal_sign="," if comma else ".", place_of=lambda i: f"line {lines[i][0]}"
    )


def columns(source: str | bytes, filename: str | None = None) -> list[Column]:
    """Return what could be chosen in a text or file."""
    return []
