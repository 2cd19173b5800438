"""The rule that picks the procedure, written as one table of rows: the first row that fits decides.

Both pre-test levels are 0.05, fixed, never tied to the significance level. The alternative changes the route only
through the guard of row 11 (can the signed rank reject at all?). How the rule behaves is in DEVELOPERS.md.
"""

from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from meanlab.checks.normality import shapiro_wilk, skewness_test
from meanlab.core.question import Question
from meanlab.core.results import Route
from meanlab.procedures.sample import Sample
from meanlab.wording.names import IN_TWO_UNITS, PROCEDURE_NAMES
from meanlab.wording.numbers import decimal_text, p_text

PRETEST = 0.05
MOST_FOR_SHAPIRO_WILK = 5000
ONE_PREPARATION = -1  # with IN_TWO_UNITS before the rows of the rule: nothing can be compared
PARAMETERS = {"z": "mean", "t": "mean", "guarded_t": "mean", "signed_rank": "centre of symmetry", "sign": "median"}


@dataclass(frozen=True)
class Look:
    """What the rule may look at: the question and the units, nothing else.

    sample     the units, None where any is censored
    n          independent units
    censored   how many of them are below- or above-limit units
    resolution step r of the units in their unit, None where unknown
    one_preparation  True where all readings come from a single preparation
    noun       what a unit is called: "readings" or "preparations"
    in_two_units  unit of the readings and unit of the target where they are not the same, else None
    """

    question: Question
    sample: Sample | None
    n: int
    censored: int
    resolution: float | None
    one_preparation: bool = False
    decimal_sign: str = "."
    noun: str = "readings"
    in_two_units: tuple[str, str] | None = None

    @property
    def s(self) -> float:
        """Experimental standard deviation; 0 where the units are identical."""
        return self._plain.s

    @property
    def g1(self) -> float:
        """Skewness g₁ (divisor n)."""
        return self._plain.skewness

    @property
    def needed(self) -> float:
        """How many units make t safe for this skewness: 28 + 25 g₁² (after Cochran; Sugden, Smith & Jones 2000)."""
        return 28 + 25 * self.g1**2

    @property
    def coarse(self) -> bool:
        """Whether the step of the readings makes the pre-test meaningless."""
        if self.resolution is None or self.s == 0:
            return False
        limit = 0.3 if self.n <= 30 else 0.2 if self.n <= 60 else 0.1
        return self.resolution / self.s > limit

    @cached_property
    def shapiro_wilk(self) -> tuple[float, float]:
        """W and p of Shapiro–Wilk."""
        W, p = shapiro_wilk(self._plain.shifted[np.newaxis, :])
        return float(W[0]), float(p[0])

    @cached_property
    def skewness_p(self) -> float:
        """p of D'Agostino's skewness test."""
        return float(np.ravel(skewness_test(self._plain.shifted[np.newaxis, :]))[0])

    @property
    def signed_rank_can_reject(self) -> bool:
        """Whether the signed rank could reject with the units that are not equal to the target."""
        counted = int(np.count_nonzero(self._plain.differences))
        sides = 2.0 if self.question.alternative == "two-sided" else 1.0
        return bool(sides * 0.5**counted < self.question.alpha)

    @property
    def target_is_uncertain(self) -> bool:
        """Whether the target has a standard uncertainty."""
        return bool(self.question.number("target_uncertainty"))

    @property
    def _plain(self) -> Sample:
        assert self.sample is not None, "rows below 0 see plain readings only"
        return self.sample

    def text(self, value: float, places: int = 2) -> str:
        """Return a figure with the decimal sign of the readings."""
        return decimal_text(value, places, self.decimal_sign)

    def p(self, value: float) -> str:
        """Return a p-value as text."""
        return p_text(value, PRETEST, self.decimal_sign)


@dataclass(frozen=True)
class Row:
    """One row of the rule: its number, when it fits, the procedure it picks and what it says."""

    number: int
    when: Callable[[Look], bool]
    procedure: Callable[[Look], str | None]
    says: Callable[[Look], str]


def _pick(name: str | None) -> Callable[[Look], str | None]:
    return lambda look: name


def _or_t(name: str) -> Callable[[Look], str | None]:
    return lambda look: "t" if look.target_is_uncertain else name


RULE: tuple[Row, ...] = (
    Row(0, lambda look: look.censored > 0, _pick("sign"), lambda look: _says_censored(look)),
    # row 1, the procedure fixed by the written method, is route_of itself
    Row(2, lambda look: look.question.sigma is not None, _pick("z"), lambda look: _says_sigma(look)),
    Row(3, lambda look: look.n == 1, _pick(None), lambda look: "one reading without a known σ cannot be tested"),
    Row(4, lambda look: look.s == 0, _pick(None), lambda look: _says_identical(look)),
    Row(5, lambda look: look.question.parameter == "median", _pick("sign"), lambda look: _MEDIAN),
    Row(6, lambda look: look.n == 2, _pick("t"), lambda look: _TWO),
    Row(7, lambda look: look.n <= 7, _pick("t"), lambda look: _says_few(look)),
    Row(8, lambda look: look.coarse, _pick("t"), lambda look: _says_coarse(look)),
    Row(9, lambda look: look.n <= MOST_FOR_SHAPIRO_WILK and look.shapiro_wilk[1] > PRETEST, _pick("t"),
        lambda look: f"{look.n} {look.noun}, no evidence against normality ({_says_w(look)})"),
    Row(10, lambda look: look.n >= look.needed, _pick("t"), lambda look: _says_large(look)),
    Row(11, lambda look: look.skewness_p > PRETEST,
        lambda look: _or_t("signed_rank")(look) if look.signed_rank_can_reject else "t",
        lambda look: _says_symmetric(look)),
    Row(12, lambda look: True, _or_t("guarded_t"), lambda look: _says_skewed(look)),
)  # fmt: skip


def route_of(look: Look) -> Route:
    """Return the procedure that the rule picks, with its reasons and everything it looked at.

    Row 1: a procedure fixed by the written method is used where it can run; where it cannot, nothing is tested and
    the reason names the rule's own choice.
    """
    if look.in_two_units is not None:
        of_readings, of_target = look.in_two_units
        reason = f'the readings are in "{of_readings}" and the target in "{of_target}": bring both to one unit'
        return Route(None, PARAMETERS.get(look.question.procedure, "mean"), (reason,), False, IN_TWO_UNITS)
    if look.one_preparation:
        reason = "all readings come from one preparation: the scatter between preparations is unknown"
        return Route(None, PARAMETERS.get(look.question.procedure, "mean"), (reason,), False, ONE_PREPARATION)
    chosen = by_rule(look)
    fixed = look.question.procedure
    if fixed == "rule":
        return chosen
    obstacle = cannot_run(fixed, look)
    name, own = PROCEDURE_NAMES[fixed], PROCEDURE_NAMES.get(chosen.procedure or "", "none")
    if obstacle:
        reasons = (f"{name} is set by the written method, but cannot be run: {obstacle}", f"the rule's choice: {own}")
        return Route(None, PARAMETERS[fixed], reasons, True, 1, chosen.looked_at)
    reasons = (f"{name} is set by the written method", f"the rule's choice: {own} ({chosen.reasons[0]})")
    return Route(fixed, PARAMETERS[fixed], reasons, True, 1, chosen.looked_at)


def by_rule(look: Look) -> Route:
    """Return the route of the rule itself, whatever the written method says."""
    row = next(row for row in RULE if row.when(look))
    procedure = row.procedure(look)
    parameter = PARAMETERS.get(procedure or "", look.question.parameter)
    reasons = [row.says(look)]
    if row.number in (11, 12) and look.target_is_uncertain:
        reasons.append("t, because only z and t take the uncertainty of the target in")
    elif row.number == 11 and procedure == "t":
        reasons.append("t, because with so few readings the signed rank cannot reject at this level")
    return Route(procedure, parameter, tuple(reasons), False, row.number, _looked_at(look, row.number))


def nothing_compares(look: Look) -> str:
    """Return why no procedure at all can compare these units with the target, "" where one might."""
    if look.in_two_units is not None:
        return "readings and target are in different units"
    return "the readings come from one preparation" if look.one_preparation else ""


def cannot_run(procedure: str, look: Look) -> str:
    """Return why a procedure cannot be run on these units, "" where it can."""
    if procedure != "sign" and look.censored:
        return "it takes no below- or above-limit readings"
    if procedure == "z":
        return "" if look.question.sigma is not None else "it needs a known σ"
    least = {"t": 2, "guarded_t": 3}.get(procedure, 1)
    if look.n < least:
        return f"it needs at least {least} readings"
    if not look.censored and look.s == 0:
        return "one reading does not scatter" if look.n == 1 else "the readings do not scatter"
    return ""


def _looked_at(look: Look, row: int) -> dict[str, float]:
    """Return the figures that the rows up to the deciding one looked at."""
    seen: dict[str, float] = {"n": look.n}
    if look.sample is None:
        return seen | {"below- or above-limit readings": look.censored}
    seen["s"] = look.s
    if look.resolution is not None and look.s > 0 and row >= 8:
        seen["r/s"] = look.resolution / look.s
    if row >= 9 and look.n <= MOST_FOR_SHAPIRO_WILK:
        seen["Shapiro–Wilk W"], seen["Shapiro–Wilk p"] = look.shapiro_wilk
    if row >= 10:
        seen["skewness g₁"], seen["28 + 25 g₁²"] = look.g1, look.needed
    if row >= 11:
        seen["skewness p"] = look.skewness_p
    return seen


_MEDIAN = "the median is asked for; the mean is not tested"
_TWO = "two readings: their shape cannot be examined, and t(1) is wide (12.7 standard errors at 5 %)"


def _says_censored(look: Look) -> str:
    some = "1 reading lies" if look.censored == 1 else f"{look.censored} readings lie"
    return (
        f"{some} below or above a limit, so there is no mean; putting 0, L/2 or L in place of a below-limit "
        "reading is not harmless (40 % of 20 replaced by L/2: false alarms 18 % instead of 5 %)"
    )


def _says_sigma(look: Look) -> str:
    return f"σ of one reading is known ({look.question.sigma_origin.strip()})"


def _says_identical(look: Look) -> str:
    return f"the {look.n} {look.noun} are identical: they do not scatter at their resolution"


def _says_few(look: Look) -> str:
    return (
        f"{look.n} {look.noun}: normality cannot be verified with so few; "
        "for skewed readings a risk of 5 % can really be 11 to 12 %"
    )


def _says_coarse(look: Look) -> str:
    ratio = look.text((look.resolution or 0) / look.s)
    return (
        f"{look.n} {look.noun} with a step of {ratio} s: rounding makes a test of normality meaningless, while t is "
        "fine"
    )


def _says_w(look: Look) -> str:
    W, p = look.shapiro_wilk
    return f"Shapiro–Wilk W = {look.text(W, 3)}, {look.p(p)}"


def _says_shape(look: Look) -> str:
    if look.n > MOST_FOR_SHAPIRO_WILK:
        return f"{look.n} {look.noun} (Shapiro–Wilk is not computed above {MOST_FOR_SHAPIRO_WILK})"
    return f"{look.n} {look.noun}, not normal ({_says_w(look)})"


def _says_large(look: Look) -> str:
    return (
        f"{_says_shape(look)}, but enough of them for this skewness "
        f"(g₁ = {look.text(look.g1)}, needs {int(np.ceil(look.needed))})"
    )


def _says_symmetric(look: Look) -> str:
    return (
        f"{_says_shape(look)}, no evidence of skewness ({look.p(look.skewness_p)}): "
        "the centre of symmetry is the mean only if the shape is symmetric"
    )


def _says_skewed(look: Look) -> str:
    return (
        f"{_says_shape(look)}, skewed (g₁ = {look.text(look.g1)}, {look.p(look.skewness_p)}): "
        "compared by two methods, the more cautious is reported"
    )
