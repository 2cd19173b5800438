"""What an analysis finds: frozen facts, each with its unit and meaning; none of them prints itself."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from meanlab.core.plain import Facts
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.summary import Preparation, Summary

__all__ = [
    "Analysis",
    "Bound",
    "CensoredFit",
    "Check",
    "Component",
    "Difference",
    "Equivalence",
    "Interval",
    "NotApplicable",
    "Outcome",
    "Plan",
    "Power",
    "Preparation",
    "Provenance",
    "Route",
    "Summary",
    "Test",
    "Uncertainty",
    "Verdict",
    "Without",
]

Outcome = Literal["clear", "note", "caution", "stop"]
Verdict = Literal["differs", "differs, within the limit", "agrees", "cannot tell", "not testable"]


@dataclass(frozen=True)
class Route(Facts):
    """The procedure the rule picks, with its reasons.

    procedure  one of the five keys, None where nothing can be tested
    parameter  what it speaks of: "mean", "median" or "centre of symmetry"
    reasons    sentences, the deciding one first
    fixed      True where the written method set the procedure
    row        the row of the rule that decided (0–12)
    looked_at  the figures the rule looked at, by name
    """

    procedure: str | None
    parameter: str
    reasons: tuple[str, ...]
    fixed: bool
    row: int
    looked_at: Mapping[str, float] = field(default_factory=dict)


@dataclass(frozen=True)
class Interval(Facts):
    """A confidence interval in the unit of the readings; None for an end that does not exist.

    ``level`` is the nominal confidence level, ``attained`` the one the discrete procedure really has.
    """

    low: float | None
    high: float | None
    level: float
    attained: float


@dataclass(frozen=True)
class Test(Facts):
    """One procedure on the readings.

    procedure, parameter, alternative, significance   what was done; keys as in Question
    n            independent units; n_used those the statistic counts (signed rank: not equal to the target;
                 sign: above or below it)
    statistic    t, z, guarded t: sign of mean − target; signed rank: W⁺; sign: the number above
    df           degrees of freedom; None for z with exactly known σ and for counting procedures
    p_value      for the alternative; one-sided p of both sides in p_greater and p_less
    critical     largest lower and smallest upper value of the statistic that reject; None where there is none
    reject       p < α, unrounded
    estimate     mean, Hodges–Lehmann or median; None where not defined
    standard_error   of the estimate, all components; None for counting procedures
    interval     one-sided for a one-sided alternative
    smallest_p   smallest p-value the procedure could attain here; 0 for continuous ones
    approximate  True for a normal approximation of the null distribution
    offsets      estimate, low and high end minus the target, each rounded once
    null_ranks   signed rank, exact: doubled midranks of the differences that are not 0
    null_variance  signed rank: variance of W⁺ under the null hypothesis
    skew_term    guarded t: a = g₁/(3√n)
    p_range      sign with undecided entries: smallest and largest p over what they may be
    p_ties_against  sign with readings equal to the target: p with them counted against rejection
    decided      False where the counts leave the decision open (censored or tied readings)
    notes        sentences that belong to this procedure on these readings
    """

    __test__ = False  # not a test case for pytest

    procedure: str
    parameter: str
    alternative: str
    significance: float
    n: int
    n_used: int
    statistic: float
    df: float | None
    p_value: float
    p_greater: float
    p_less: float
    critical: tuple[float | None, float | None]
    reject: bool
    estimate: float | None
    standard_error: float | None
    interval: Interval
    smallest_p: float
    approximate: bool = False
    offsets: tuple[float | None, float | None, float | None] = (None, None, None)
    null_ranks: tuple[int, ...] = ()
    null_variance: float | None = None
    skew_term: float | None = None
    p_range: tuple[float, float] | None = None
    p_ties_against: float | None = None
    decided: bool = True
    notes: tuple[str, ...] = ()


@dataclass(frozen=True)
class NotApplicable(Facts):
    """A procedure that cannot be run on these readings, and why."""

    procedure: str
    not_applicable: str


@dataclass(frozen=True)
class Difference(Facts):
    """Estimate minus target with its interval, in the unit of the readings; ``percent`` of |target|, None at 0."""

    value: float
    low: float | None
    high: float | None
    percent: float | None


@dataclass(frozen=True)
class Check(Facts):
    """One check of the readings: it adds cautions and never changes the route.

    name       "normality", "far readings", "run order", "resolution", "enough readings", "units" or "sigma"
    outcome    "clear", "note", "caution" or "stop"
    statistic, p_value   the leading figure of the check and its p-value, None where there is none
    message    one sentence: what was seen, and what the check can and cannot see at this n
    figures    further figures by name
    entries    places of the readings concerned, among all entries read
    """

    name: str
    outcome: Outcome
    statistic: float | None
    p_value: float | None
    message: str
    figures: Mapping[str, float] = field(default_factory=dict)
    entries: tuple[int, ...] = ()


@dataclass(frozen=True)
class Equivalence(Facts):
    """Agreement within the limit, by the procedure in force (Schuirmann 1987).

    limit     E in the unit of the readings; 0 for a one-sided question without one
    low, high the interval held against target ± E: two-sided 1 − 2α; one-sided the (1 − α) bound alone
    level     its confidence level
    p_value   p_E, the larger of the two one-sided p-values at target ± E (one-sided question: the opposite one)
    within    p_E < α
    """

    limit: float
    low: float | None
    high: float | None
    level: float
    p_value: float
    within: bool


@dataclass(frozen=True)
class Power(Facts):
    """What n readings with this scatter can show.

    difference_that_matters  as asked, unit of the readings; None where not given
    power, missed            probability to find it, and the type II risk 1 − power
    smallest_detectable, …_90  true difference found with 80 % and 90 %; None where out of reach
    readings_needed          n that finds the difference that matters with 80 %; None where none up to 10,000 does
    smallest_detectable_cautious  the same as smallest_detectable with s at its one-sided 80 % upper limit
    planning_s               standard deviation of one unit used here
    kind                     "exact", "approximate" (signed rank) or "upper bound" (guarded t)
    message                  a sentence where something had to be said, else ""
    """

    difference_that_matters: float | None
    power: float | None
    missed: float | None
    smallest_detectable: float | None
    smallest_detectable_90: float | None
    readings_needed: int | None
    smallest_detectable_cautious: float | None = None
    planning_s: float | None = None
    kind: str = "exact"
    message: str = ""


@dataclass(frozen=True)
class Component(Facts):
    """One component of uncertainty: u in the unit of the readings, df (None: infinite), share of u²."""

    name: str
    u: float
    df: float | None
    share: float


@dataclass(frozen=True)
class Bound(Facts):
    """A further comparison |difference| > bound, shown beside the test; it never decides."""

    name: str
    bound: float
    rejects: bool
    message: str


@dataclass(frozen=True)
class Uncertainty(Facts):
    """Uncertainty of the difference from the target.

    components    scatter, target, the laboratory's own
    combined, df  combined standard uncertainty and its effective degrees of freedom (Welch–Satterthwaite, GUM G.4)
    k, expanded   coverage factor for the two-sided confidence level at these df, and U = k · combined
    of_mean       expanded uncertainty of the measured value alone (scatter and the laboratory's own)
    of_mean_k, of_mean_df  its coverage factor and effective degrees of freedom
    scatter_only  the test without the further components; None where there are none
    bounds        the stricter bound at n ≤ 5 and the k = 2 comparison, where the target has an uncertainty
    """

    components: tuple[Component, ...]
    combined: float
    df: float | None
    k: float
    expanded: float
    of_mean: float
    of_mean_k: float
    of_mean_df: float | None
    scatter_only: Test | None = None
    bounds: tuple[Bound, ...] = ()


@dataclass(frozen=True)
class CensoredFit(Facts):
    """Normal model fitted to readings with below- or above-limit entries by maximum likelihood.

    mean, s in the unit of the readings (s with divisor n), ``interval`` by profile likelihood for the mean,
    ``p_value`` of the likelihood ratio against the target (two-sided, chi-squared with 1 degree of freedom),
    ``censored`` how many of ``n`` were censored.
    """

    mean: float
    s: float
    interval: Interval
    p_value: float
    n: int
    censored: int


@dataclass(frozen=True)
class Without(Facts):
    """The same question with other readings: "without the far reading", "with the readings left out"."""

    label: str
    entries: tuple[int, ...]
    test: Test | None
    verdict: Verdict
    sentence: str


@dataclass(frozen=True)
class Provenance(Facts):
    """What made the result: versions by package, time in UTC (ISO 8601), fingerprint (SHA-256, hexadecimal)."""

    versions: Mapping[str, str]
    time: str
    fingerprint: str


@dataclass(frozen=True)
class Analysis(Facts):
    """Everything found about one question on one set of readings; see the parts.

    others     every other procedure on the same readings, in fixed order
    withouts   with and without far or left-out readings, side by side
    verdict    one of the five outcomes
    conclusion the sentence for the report
    cautions   sentences that belong beside it
    """

    readings: ReadingSet
    question: Question
    route: Route
    summary: Summary
    test: Test | None
    difference: Difference | None
    others: tuple[Test | NotApplicable, ...]
    checks: tuple[Check, ...]
    equivalence: Equivalence | None
    power: Power
    verdict: Verdict
    conclusion: str
    cautions: tuple[str, ...]
    provenance: Provenance
    uncertainty: Uncertainty | None = None
    censored_fit: CensoredFit | None = None
    withouts: tuple[Without, ...] = ()

    def check(self, name: str) -> Check | None:
        """Return the check of that name, None where it was not made."""
        return next((check for check in self.checks if check.name == name), None)


@dataclass(frozen=True)
class Plan(Facts):
    """How many readings.

    readings  whole number ≥ 2, None where no number up to 10,000 will do
    achieved  power (or half-width in the unit of the readings) with that many; None where there is none
    curve     ((n or true difference, power), …): the course of the power
    reason    the sentence that says why there is none, or how it was computed
    """

    readings: int | None
    achieved: float | None
    curve: tuple[tuple[float, float], ...]
    reason: str
