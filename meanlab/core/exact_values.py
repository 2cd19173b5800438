"""A frozen fact as JSON values that lose nothing, and the way back.

`to_dict()` is for reading: numbers as numbers, infinite ones as null. Here a fact comes back equal: an exact decimal is
its text, a double its shortest text, one that is not finite the text "inf", "-inf" or "nan", a mapping a list of pairs
(its order and the kind of its keys stay).
"""

import json
import types
from collections.abc import Mapping
from dataclasses import MISSING, fields, is_dataclass
from decimal import Decimal, InvalidOperation
from math import isfinite
from typing import Any, Literal, TypeVar, Union, get_args, get_origin, get_type_hints

Fact = TypeVar("Fact")
DECIMAL = "decimal"


def exact_values(fact: Any) -> dict[str, Any]:
    """Return every field of a frozen fact as JSON values from which `rebuilt` makes an equal fact.

    >>> from meanlab.core.readings import Censored
    >>> exact_values(Censored(3, "below", Decimal("0.050")))["limit"]
    '0.050'
    """
    hints = get_type_hints(type(fact))
    return {one.name: _values(getattr(fact, one.name), hints[one.name]) for one in fields(fact)}


def rebuilt(kind: type[Fact], values: Mapping[str, Any]) -> Fact:
    """Return the fact of a class from its exact values; a field that is absent takes its default.

    Raises ValueError, naming the field, for values that are not those of the class.

    >>> from meanlab.core.readings import Censored
    >>> rebuilt(Censored, {"index": 3, "kind": "below", "limit": "0.050"}).limit
    Decimal('0.050')
    """
    if not isinstance(values, Mapping):
        raise ValueError(f"{kind.__name__} is kept as {type(values).__name__}, not as named values")
    hints = get_type_hints(kind)
    given = {}
    for one in fields(kind):  # type: ignore[arg-type]  # every kind here is a dataclass
        if one.name in values:
            given[one.name] = _rebuilt(values[one.name], hints[one.name], f"{kind.__name__}.{one.name}")
        elif one.default is MISSING and one.default_factory is MISSING:
            raise ValueError(f"{kind.__name__}.{one.name} is missing")
    return kind(**given)


def canonical(values: Any) -> bytes:
    """Return JSON values as the one text that a digest is taken of: keys in order, no spaces, UTF-8.

    >>> canonical({"b": [1, 0.1], "a": "µ"}).decode()
    '{"a":"µ","b":[1,0.1]}'
    """
    text = json.dumps(values, ensure_ascii=False, allow_nan=False, sort_keys=True, separators=(",", ":"))
    return text.encode("utf-8")


def _values(value: Any, hint: Any) -> Any:
    if is_dataclass(value) and not isinstance(value, type):
        return exact_values(value)
    if isinstance(value, Decimal):
        return {DECIMAL: str(value)} if str in _options(hint) else str(value)
    if hasattr(value, "item"):  # a numpy scalar
        value = value.item()
    if isinstance(value, float):
        return float(value) if isfinite(value) else repr(float(value))
    if value is None or isinstance(value, (str, bool, int)):
        return value
    inner = get_args(next((one for one in _options(hint) if get_args(one)), hint))
    if isinstance(value, Mapping):
        return [[_values(key, inner[0]), _values(one, inner[1])] for key, one in value.items()]
    return [_values(one, part) for one, part in zip(value, _parts(inner, len(value)), strict=True)]


def _rebuilt(values: Any, hint: Any, where: str) -> Any:
    options = _options(hint)
    if values is None and types.NoneType in options:
        return None
    if isinstance(values, Mapping):
        return _from_names(values, options, where)
    if isinstance(values, list):
        return _from_list(values, options, where)
    if get_origin(hint) is Literal:
        if values in get_args(hint):
            return values
    elif isinstance(values, str):
        if str in options:
            return values
        if Decimal in options or float in options:
            return _from_text(values, Decimal if Decimal in options else float, where)
    elif any(type(values) is one or (one is float and type(values) is int) for one in options):
        return values
    raise ValueError(f"{where} cannot be {values!r}")


def _from_names(values: Mapping[str, Any], options: tuple[Any, ...], where: str) -> Any:
    if Decimal in options and set(values) == {DECIMAL}:
        return _from_text(values[DECIMAL], Decimal, where)
    for kind in options:
        if is_dataclass(kind) and isinstance(kind, type) and _needed(kind) <= set(values):
            return rebuilt(kind, values)
    raise ValueError(f"{where} cannot be made of {', '.join(map(str, values)) or 'nothing'}")


def _from_list(values: list[Any], options: tuple[Any, ...], where: str) -> Any:
    for option in options:
        inner = get_args(option)
        if get_origin(option) is tuple:
            parts = _parts(inner, len(values), where)
            return tuple(_rebuilt(one, part, where) for one, part in zip(values, parts, strict=True))
        if get_origin(option) is Mapping and all(isinstance(pair, list) and len(pair) == 2 for pair in values):
            return {_rebuilt(key, inner[0], where): _rebuilt(one, inner[1], where) for key, one in values}
    raise ValueError(f"{where} cannot be a list")


def _from_text(text: Any, kind: type, where: str) -> Any:
    try:
        return kind(str(text))
    except (InvalidOperation, ValueError) as problem:
        raise ValueError(f"{where} cannot be {text!r}") from problem


def _options(hint: Any) -> tuple[Any, ...]:
    """The kinds a field may have: those of a union, else the one."""
    return get_args(hint) if get_origin(hint) in (Union, types.UnionType) else (hint,)


def _parts(inner: tuple[Any, ...], count: int, where: str = "a field") -> tuple[Any, ...]:
    """The kind of each member of a tuple of so many."""
    if len(inner) == 2 and inner[1] is Ellipsis:
        return (inner[0],) * count
    if len(inner) != count:
        raise ValueError(f"{where} holds {count} values, not {len(inner)}")
    return inner


def _needed(kind: type) -> set[str]:
    """The fields without a default."""
    known = fields(kind)
    return {one.name for one in known if one.default is MISSING and one.default_factory is MISSING}
