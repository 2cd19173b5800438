"""Readings and questions drawn at random: decimals, ties, far values, few and many, near and far from the target."""

import os
from dataclasses import dataclass
from decimal import Decimal

from hypothesis import settings
from hypothesis import strategies as st

from meanlab import Question

ALTERNATIVES = ("two-sided", "greater", "less")
PROCEDURES = ("z", "t", "guarded_t", "signed_rank", "sign")
CONTINUOUS = ("z", "t", "guarded_t")
LEVELS = ("0.001", "0.01", "0.05", "0.1", "0.25", "0.45")
MIRROR = {"two-sided": "two-sided", "greater": "less", "less": "greater"}

# the same examples at every run; a larger number in the environment looks for others, at random
EXAMPLES = int(os.environ.get("MEANLAB_EXAMPLES", "0"))
STEADY = settings(max_examples=EXAMPLES or 80, deadline=None, derandomize=not EXAMPLES, database=None)
FEWER = settings(STEADY, max_examples=EXAMPLES or 40)


@dataclass(frozen=True)
class Drawn:
    """Whole steps of one size about an offset, with a target on the same grid or between its steps."""

    steps: tuple[int, ...]
    offset: int
    places: int
    doubled_target: int
    sigma_steps: int = 3
    limit_steps: int = 4

    def text(self, doubled_step: int) -> str:
        """Return half of a whole number of steps from the offset, as a decimal text."""
        return f"{Decimal(2 * self.offset + doubled_step) / 2 * Decimal(10) ** -self.places:f}"

    @property
    def readings(self) -> list[str]:
        """The readings as typed."""
        return [f"{Decimal(self.offset + step) * Decimal(10) ** -self.places:f}" for step in self.steps]

    @property
    def target(self) -> str:
        """The target as typed."""
        return self.text(self.doubled_target)

    def size(self, steps: float) -> str:
        """Return a magnitude of so many steps."""
        return f"{Decimal(steps) * Decimal(10) ** -self.places:f}"

    @property
    def scatters(self) -> bool:
        """Whether not all readings are equal."""
        return len(set(self.steps)) > 1

    def question(
        self, procedure: str = "rule", alternative: str = "two-sided", level: str = "0.05", **more
    ) -> Question:
        """Return the question of the target, with a known σ where the procedure needs it."""
        known = {"sigma": self.size(self.sigma_steps), "sigma_origin": "records"} if procedure == "z" else {}
        return Question(self.target, alternative, level, procedure, **(known | more))


@st.composite
def drawn_readings(draw, fewest: int = 2, most: int = 24, scattering: bool = True) -> Drawn:
    """Draw readings: the smaller the spread, the more ties; sometimes skewed, sometimes with one far value."""
    spread = draw(st.sampled_from([1, 2, 5, 30, 1000]))
    steps = draw(st.lists(st.integers(-spread, spread), min_size=fewest, max_size=most))
    shape = draw(st.sampled_from(["plain", "plain", "skewed", "far"]))
    if shape == "skewed":
        steps = [step * abs(step) * 2 if step > 0 else step for step in steps]
    if shape == "far":
        steps[draw(st.integers(0, len(steps) - 1))] += 12 * spread
    if scattering and len(set(steps)) == 1:
        steps[0] += 1
    near = draw(st.sampled_from([2, 2 * spread, 6 * spread]))
    return Drawn(
        steps=tuple(steps),
        offset=draw(st.sampled_from([0, 3, 500, 10**9, -(10**12)])),
        places=draw(st.sampled_from([0, 1, 3, 7])),
        doubled_target=draw(st.integers(-near, near)),
        sigma_steps=draw(st.sampled_from([1, spread, 4 * spread])),
        limit_steps=draw(st.sampled_from([1, spread, 3 * spread])),
    )


def least_readings(procedure: str) -> int:
    """Return how many readings a procedure needs."""
    return 3 if procedure == "guarded_t" else 2


def close_to_level(p: float, level: str) -> bool:
    """Tell whether p is equal to α to 12 digits, where the last rounding decides."""
    return abs(p - float(level)) < 1e-12 * float(level)
