"""Frozen facts as plain JSON values."""

from collections.abc import Mapping
from dataclasses import fields, is_dataclass
from decimal import Decimal
from math import isfinite
from typing import Any


def plain(fact: Any) -> Any:
    """Return a frozen fact as dicts, lists, texts and numbers; a number that is not finite becomes None.

    >>> plain((1.5, float("inf"), Decimal("0.10")))
    [1.5, None, 0.1]
    """
    if hasattr(fact, "item") and not is_dataclass(fact):  # a numpy scalar
        fact = fact.item()
    if isinstance(fact, Decimal):
        return float(fact)
    if isinstance(fact, float):
        return fact if isfinite(fact) else None
    if fact is None or isinstance(fact, (str, bool, int)):
        return fact
    if is_dataclass(fact) and not isinstance(fact, type):
        return _fields_of(fact)
    if isinstance(fact, Mapping):
        return {str(key): _field(value) for key, value in fact.items()}
    return [_field(value) for value in fact]


def _fields_of(fact: Any) -> dict[str, Any]:
    return {one.name: _field(getattr(fact, one.name)) for one in fields(fact)}


def _field(value: Any) -> Any:
    return value.to_dict() if hasattr(value, "to_dict") else plain(value)


class Facts:
    """A frozen fact that can be had as plain JSON values."""

    def to_dict(self) -> dict[str, Any]:
        """Return every field as plain JSON values; an infinite or missing number is None."""
        return _fields_of(self)
