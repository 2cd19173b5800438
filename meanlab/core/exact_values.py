"""A frozen fact as JSON values that lose nothing, and the way back.

`to_dict()` is for reading: numbers as numbers, infinite ones as null. Here a fact comes back equal: an exact decimal is
its text, a double its shortest text, one that is not finite the text "inf", "-inf" or "nan", a mapping a list of pairs
(its order and the kind of its keys stay).
"""

import json
import types
from collections.abc import Iterable, Mapping
from dataclasses import MISSING, fields, is_dataclass
from decimal import Decimal, InvalidOperation
from itertools import repeat
from math import isfinite
from typing import Any, Literal, TypeVar, Union, cast, get_args, get_origin, get_type_hints

Place = tuple[type, str]
Fact = TypeVar("Fact")
DECIMAL = "decimal"


def exact_values(fact: Any) -> dict[str, Any]:
    """Return every field of a frozen fact as JSON values from which `rebuilt` makes an equal fact.

    >>> from meanlab.core.readings import Censored
    >>> exact_values(Censored(3, "below", Decimal("0.050")))["limit"]
    '0.050'
    """
    return _of_fact(fact, _Kinds())


def rebuilt(kind: type[Fact], values: Mapping[str, Any]) -> Fact:
    """Return the fact of a class from its exact values; a field that is absent takes its default.

    Raises ValueError, naming the field, for values that are not those of the class.

    >>> from meanlab.core.readings import Censored
    >>> rebuilt(Censored, {"index": 3, "kind": "below", "limit": "0.050"}).limit
    Decimal('0.050')
    """
    if not isinstance(values, Mapping):
        raise ValueError(f"{kind.__name__} is kept as {type(values).__name__}, not as named values")
    return cast(Fact, _to_fact(kind, values, _Kinds()))


def canonical(values: Any) -> bytes:
    """Return JSON values as the one text that a digest is taken of: keys in order, no spaces, UTF-8.

    >>> canonical({"b": [1, 0.1], "a": "µ"}).decode()
    '{"a":"µ","b":[1,0.1]}'
    """
    text = json.dumps(values, ensure_ascii=False, allow_nan=False, sort_keys=True, separators=(",", ":"))
    return text.encode("utf-8")


class _Kinds:
    """What the fields of the facts may hold, looked up once for each class."""

    def __init__(self) -> None:
        self._fields: dict[type, tuple[tuple[str, tuple[Any, ...], bool], ...]] = {}

    def fields(self, kind: Any) -> tuple[tuple[str, tuple[Any, ...], bool], ...]:
        """Return name, possible kinds, and whether it must be there, of every field of a class."""
        if kind not in self._fields:
            hints = get_type_hints(kind)
            self._fields[kind] = tuple(
                (one.name, _options(hints[one.name]), one.default is MISSING and one.default_factory is MISSING)
                for one in fields(kind)
            )
        return self._fields[kind]


def _of_fact(fact: Any, kinds: _Kinds) -> dict[str, Any]:
    return {name: _values(getattr(fact, name), options, kinds) for name, options, _ in kinds.fields(type(fact))}


def _values(value: Any, options: tuple[Any, ...], kinds: _Kinds) -> Any:
    if value is None or type(value) in (str, bool, int):
        return value
    if isinstance(value, Decimal):
        return {DECIMAL: str(value)} if str in options else str(value)
    if hasattr(value, "item"):  # a numpy scalar
        return _values(value.item(), options, kinds)
    if isinstance(value, float):
        return value if isfinite(value) else repr(value)
    if is_dataclass(value):
        return _of_fact(value, kinds)
    inner = next((get_args(one) for one in options if get_args(one)), ())
    if isinstance(value, Mapping):
        keys, members = _options(inner[0]), _options(inner[1])
        return [[_values(key, keys, kinds), _values(one, members, kinds)] for key, one in value.items()]
    parts = _parts(inner, len(value))
    return [_values(one, part, kinds) for one, part in zip(value, parts, strict=True)]


def _to_fact(kind: Any, values: Mapping[str, Any], kinds: _Kinds) -> Any:
    given = {}
    for name, options, needed in kinds.fields(kind):
        if name in values:
            given[name] = _to_value(values[name], options, kinds, (kind, name))
        elif needed:
            raise ValueError(f"{kind.__name__}.{name} is missing")
    return kind(**given)


def _to_value(values: Any, options: tuple[Any, ...], kinds: _Kinds, where: Place) -> Any:
    if type(values) is str:
        if str in options:
            return values
        for one in (Decimal, float):
            if one in options:
                return _from_text(values, one, where)
    elif isinstance(values, Mapping):
        return _from_names(values, options, kinds, where)
    elif isinstance(values, list):
        return _from_list(values, options, kinds, where)
    elif type(values) in options or (type(values) is int and float in options):
        return values
    if any(get_origin(one) is Literal and values in get_args(one) for one in options):
        return values
    raise ValueError(f"{_said(where)} cannot be {values!r}")


def _from_names(values: Mapping[str, Any], options: tuple[Any, ...], kinds: _Kinds, where: Place) -> Any:
    if Decimal in options and set(values) == {DECIMAL}:
        return _from_text(values[DECIMAL], Decimal, where)
    for kind in options:
        if is_dataclass(kind) and all(name in values for name, _, needed in kinds.fields(kind) if needed):
            return _to_fact(kind, values, kinds)
    raise ValueError(f"{_said(where)} cannot be made of {', '.join(map(str, values)) or 'nothing'}")


def _from_list(values: list[Any], options: tuple[Any, ...], kinds: _Kinds, where: Place) -> Any:
    for option in options:
        inner = get_args(option)
        if get_origin(option) is tuple:
            parts = _parts(inner, len(values), where)
            return tuple(_to_value(one, part, kinds, where) for one, part in zip(values, parts, strict=True))
        if get_origin(option) is Mapping and all(isinstance(pair, list) and len(pair) == 2 for pair in values):
            keys, members = _options(inner[0]), _options(inner[1])
            return {_to_value(k, keys, kinds, where): _to_value(v, members, kinds, where) for k, v in values}
    raise ValueError(f"{_said(where)} cannot be a list")


def _from_text(text: Any, kind: type, where: Place) -> Any:
    try:
        return kind(str(text))
    except (InvalidOperation, ValueError) as problem:
        raise ValueError(f"{_said(where)} cannot be {text!r}") from problem


def _options(hint: Any) -> tuple[Any, ...]:
    """The kinds a field may have: those of a union, else the one."""
    return get_args(hint) if get_origin(hint) in (Union, types.UnionType) else (hint,)


def _parts(inner: tuple[Any, ...], count: int, where: Place | None = None) -> Iterable[tuple[Any, ...]]:
    """The possible kinds of each member of a tuple of so many."""
    if len(inner) == 2 and inner[1] is Ellipsis:
        return repeat(_options(inner[0]), count)
    if len(inner) != count:
        raise ValueError(f"{_said(where)} holds {count} values, not {len(inner)}")
    return [_options(one) for one in inner]


def _said(where: Place | None) -> str:
    return "a field" if where is None else f"{where[0].__name__}.{where[1]}"
