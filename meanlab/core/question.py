"""The question a technician asks of the readings."""

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from functools import cached_property
from math import inf, isfinite, isnan
from typing import Any, Literal

from meanlab.core.complaints import QuestionComplaint
from meanlab.core.numbers import as_typed, exact_setting
from meanlab.core.plain import plain

Number = str | float | Decimal
Alternative = Literal["two-sided", "greater", "less"]

ALTERNATIVES = ("two-sided", "greater", "less")
PROCEDURES = ("z", "t", "guarded_t", "signed_rank", "sign")
PARAMETERS = ("mean", "median")
MOST_DEGREES = 1e9  # above, t and the normal distribution are the same to nine digits
TARGET_KINDS = ("certified value", "nominal value", "upper limit", "lower limit", "historical level", "zero (blank)")
MIRROR: Mapping[str, Alternative] = {"two-sided": "two-sided", "greater": "less", "less": "greater"}
AFTERTHOUGHTS = ("alternative", "target", "equivalence limit", "difference that matters", "left-out readings")


@dataclass(frozen=True)
class Question:
    """What the mean is held against, which way, at which risk, and what else is known.

    target                   number or number text; the sentence repeats it as typed
    alternative              "two-sided", "greater" or "less": true value against target
    significance             α, the risk of a false alarm, 0 < α < 0.5
    procedure                "rule", or the one a written method fixes: "z", "t", "guarded_t", "signed_rank", "sign"
    parameter                "mean" or "median"
    sigma, sigma_df          known standard deviation of one unit and its degrees of freedom (infinite: exactly known)
    sigma_origin             where the known σ comes from; must be given with it
    target_uncertainty, …_df standard uncertainty u of the target (certificate U divided by k), its degrees of freedom
    measurement_uncertainty  the laboratory's own standard uncertainty from its budget
    equivalence_limit        E > 0: agreement is claimed only where the mean is shown to lie within target ± E
    difference_that_matters  smallest true difference that must not be missed (a magnitude)
    planning_s               standard deviation for planning, where it is not that of the readings
    resolution               step of the readings, where it is declared
    run_order                True where the readings are in the order of measurement
    units_are                what one reading (or preparation) is a replicate of, in words
    quantity, unit, material what was measured, in which unit, of what
    target_kind              one of TARGET_KINDS, for the sentence
    set_after                parts of the question that were set after the readings were seen, of AFTERTHOUGHTS
    look                     which look on this question it is; from the second on the sentence says so

    Raises QuestionComplaint for a question that contradicts itself.
    """

    target: Number
    alternative: Alternative = "two-sided"
    significance: Number = 0.05
    procedure: str = "rule"
    parameter: str = "mean"
    sigma: Number | None = None
    sigma_df: float = inf
    sigma_origin: str = ""
    target_uncertainty: Number = 0.0
    target_uncertainty_df: float = inf
    measurement_uncertainty: Number = 0.0
    equivalence_limit: Number | None = None
    difference_that_matters: Number | None = None
    planning_s: Number | None = None
    resolution: Number | None = None
    run_order: bool = False
    units_are: str = ""
    quantity: str = ""
    unit: str = ""
    material: str = ""
    target_kind: str = "nominal value"
    set_after: tuple[str, ...] = ()
    look: int = 1

    def __post_init__(self) -> None:
        _one_of(self.alternative, ALTERNATIVES, "alternative")
        _one_of(self.procedure, ("rule", *PROCEDURES), "procedure")
        _one_of(self.parameter, PARAMETERS, "parameter")
        exact_setting(self.target, "target", "target")
        alpha = float(exact_setting(self.significance, "significance level", "significance"))
        if not 0 < alpha < 0.5:
            raise QuestionComplaint(
                f"The significance level is {as_typed(self.significance)}; "
                "it must lie between 0 and 0.5 (5 % is 0.05).",
                "significance",
            )
        for field, name in _POSITIVE.items():
            self._require(field, name, above_zero=True)
        for field, name in _NOT_NEGATIVE.items():
            self._require(field, name, above_zero=False)
        for field in ("sigma_df", "target_uncertainty_df"):
            degrees = getattr(self, field)
            if isinstance(degrees, str) or isnan(degrees) or degrees < 1:
                raise QuestionComplaint(f"Degrees of freedom must be at least 1, not {degrees}.", field)
            if degrees > MOST_DEGREES:
                object.__setattr__(self, field, inf)
        if self.sigma is not None and not self.sigma_origin.strip():
            raise QuestionComplaint(
                "A known σ needs its origin (records of how many results, which period): write where it comes from.",
                "sigma_origin",
            )
        if self.procedure == "z" and self.sigma is None:
            raise QuestionComplaint("Procedure z needs a known σ: give σ and its origin, or use t.", "sigma")
        object.__setattr__(self, "set_after", tuple(self.set_after))

    def _require(self, field: str, name: str, above_zero: bool) -> None:
        given = getattr(self, field)
        if given is None:
            return
        value = exact_setting(given, name, field)
        if value < 0 or (above_zero and value == 0):
            bound = "more than 0" if above_zero else "0 or more"
            raise QuestionComplaint(f"The {name} is {as_typed(given)}; it must be {bound}.", field)

    @cached_property
    def exact_target(self) -> Decimal:
        """The target as an exact decimal."""
        return exact_setting(self.target, "target", "target")

    @cached_property
    def alpha(self) -> float:
        """The significance level as a double."""
        return float(exact_setting(self.significance, "significance level", "significance"))

    def number(self, field: str) -> float | None:
        """Return a setting ("sigma", "equivalence_limit", …) as a double, None where it is not given."""
        given = getattr(self, field)
        return None if given is None else float(exact_setting(given, field.replace("_", " "), field))

    def exact_number(self, field: str) -> Decimal | None:
        """Return a setting as an exact decimal, None where it is not given."""
        given = getattr(self, field)
        return None if given is None else exact_setting(given, field.replace("_", " "), field)

    @property
    def target_as_typed(self) -> str:
        """The target as the technician typed it."""
        return as_typed(self.target).strip()

    def to_dict(self) -> dict[str, Any]:
        """Return the question as plain JSON values; numbers as numbers, the target's text as ``target_as_typed``."""
        facts = plain(self)
        for field in ("target", "significance", *_POSITIVE, *_NOT_NEGATIVE):
            facts[field] = self.number(field)
        return facts | {"target_as_typed": self.target_as_typed}


_POSITIVE = {
    "sigma": "known σ",
    "equivalence_limit": "equivalence limit E",
    "difference_that_matters": "difference that matters",
    "planning_s": "standard deviation for planning",
    "resolution": "resolution",
}
_NOT_NEGATIVE = {
    "target_uncertainty": "standard uncertainty of the target",
    "measurement_uncertainty": "laboratory's own standard uncertainty",
}


def _one_of(given: Any, allowed: tuple[str, ...], field: str) -> None:
    if given not in allowed:
        raise QuestionComplaint(f'The {field} is "{given}"; it must be one of {", ".join(allowed)}.', field)


def degrees_or_none(degrees: float) -> float | None:
    """Return degrees of freedom, None where they are infinite."""
    return degrees if isfinite(degrees) else None
