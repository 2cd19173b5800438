"""Compares what was read with what is expected, key by key; a key that is not expected is not looked at."""

import unicodedata
from collections.abc import Mapping, Sequence
from math import isclose
from typing import Any


def problems(expected: Mapping[str, Any], found: Mapping[str, Any]) -> list[str]:
    """Return how a dict of `Intake.to_dict` differs from one expected answer; empty where it does not.

    ``must_mention`` and ``warnings_any_of`` are words looked for in all messages, "a|b" means either.
    """
    wanting = [f"no mention of {words!r}" for words in expected.get("must_mention", ()) if not _said(found, [words])]
    any_of = expected.get("warnings_any_of")
    if any_of and not _said(found, any_of):
        wanting.append(f"none of {any_of} is said")
    if expected.get("ambiguous"):
        asks = found["refused"] or found["needs_choice"]
        return wanting + (
            []
            if asks or any(_same(found["values"], one) for one in expected["values_any_of"])
            else [f"values {found['values']}"]
        )
    if expected.get("needs_choice"):
        wanting += [] if found["needs_choice"] else ["no choice is asked for"]
        return wanting + [
            f"no choice {word!r}" for word in expected.get("choices_include", ()) if not _said(found, [word])
        ]
    if expected.get("refused"):
        return wanting + (
            [] if found["refused"] or (found["needs_choice"] and not found["values"]) else ["not refused"]
        )
    if found["refused"] or found["needs_choice"]:
        return [f"refused or asked: {found['reason']}"]
    return wanting + _fields(expected, found)


def _fields(expected: Mapping[str, Any], found: Mapping[str, Any]) -> list[str]:
    plain = {
        "values": found["values"],
        "censored": found["censored"],
        "missing": found["missing"],
        "rejected": len(found["rejected"]),
        "unit": _plain(found["unit"]),
        "name": (_plain(found["name"]) or "").lower() or None,
        "decimals": found["decimals"],
    }
    wanting = []
    for key, value in plain.items():
        wanted = [expected[key]] if key in expected else expected.get(f"{key}_any_of")
        if wanted is None:
            continue
        if key in ("unit", "name"):
            wanted = [_plain(one) for one in wanted]
        if key == "name":
            wanted = [(one or "").lower() or None for one in wanted]
        if not any(_same(value, one) for one in wanted):
            wanting.append(f"{key} {value!r}, expected {wanted!r}")
    if expected.get("quiet") and found["warnings"]:
        wanting.append(f"needless warning {found['warnings']}")
    return wanting


def _same(value: Any, other: Any) -> bool:
    if isinstance(value, list) and isinstance(other, Sequence) and all(isinstance(one, float) for one in value):
        return len(value) == len(other) and all(isclose(a, b, rel_tol=1e-11) for a, b in zip(value, other, strict=True))
    return bool(value == other)


def _plain(text: str | None) -> str | None:
    return "".join(unicodedata.normalize("NFKC", text).split()) or None if text is not None else None


def _said(found: Mapping[str, Any], words: list[str]) -> bool:
    said = [found["reason"], *found["warnings"], *found["notes"], str(found["rejected"]), str(found["choices"])]
    text = "\n".join(said).lower().replace("−", "-")
    text += unicodedata.normalize("NFKC", text)
    return any(part.lower().replace("−", "-") in text for word in words for part in word.split("|"))
