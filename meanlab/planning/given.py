"""What a planning question may contain; everything else is a complaint that says what to do."""

from math import isfinite
from typing import Any

from meanlab.core.complaints import PlanComplaint
from meanlab.core.numbers import as_typed, exact
from meanlab.core.question import ALTERNATIVES


def number(given: Any, name: str, where: str) -> float:
    """Return a number or number text as a double, or complain."""
    if isinstance(given, bool) or given is None or (isinstance(given, float) and not isfinite(given)):
        raise PlanComplaint(f"The {name} is {as_typed(given)}; it must be a finite number.", where)
    return float(exact(given, f"The {name}", PlanComplaint, where))


def positive(given: Any, name: str, where: str) -> float:
    """Return a number above 0, or complain."""
    value = number(given, name, where)
    if value <= 0:
        raise PlanComplaint(f"The {name} is {as_typed(given)}; it must be more than 0.", where)
    return value


def not_negative(given: Any, name: str, where: str) -> float:
    """Return a number of 0 or more, or complain."""
    value = number(given, name, where)
    if value < 0:
        raise PlanComplaint(f"The {name} is {as_typed(given)}; it must be 0 or more.", where)
    return value


def between(given: Any, name: str, where: str, low: float, high: float, example: str) -> float:
    """Return a number strictly between two bounds, or complain."""
    value = number(given, name, where)
    if not low < value < high:
        raise PlanComplaint(
            f"The {name} is {as_typed(given)}; it must lie between {low:g} and {high:g} ({example}).", where
        )
    return value


def level(given: Any) -> float:
    """Return the significance level, 0 < α < 0.5."""
    return between(given, "significance level", "significance", 0, 0.5, "5 % is 0.05")


def probability(given: Any) -> float:
    """Return the power asked for, between 0 and 1."""
    return between(given, "power", "power", 0, 1, "80 % is 0.8")


def side(given: Any) -> str:
    """Return the alternative."""
    if given not in ALTERNATIVES:
        raise PlanComplaint(
            f'The alternative is "{given}"; it must be one of {", ".join(ALTERNATIVES)}.', "alternative"
        )
    return str(given)


def count(given: Any, least: int) -> int:
    """Return a whole number of readings of at least ``least``."""
    value = number(given, "number of readings", "readings")
    if not value.is_integer() or value < least:
        raise PlanComplaint(
            f"The number of readings is {as_typed(given)}; it must be a whole number of {least} or more.", "readings"
        )
    return int(value)
