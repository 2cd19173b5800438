"""How often the whole procedure, route included, raises a false alarm: shapes × numbers of readings, as Markdown.

    python tests/benchmarks/rule_behaviour.py [samples a cell, 20000] [random number seed, 20261201]

Samples lie along the first axis. The route is vectorised here from the package's own pieces (checks.normality,
mean_tests, signed_rank); on a subsample of every cell route and p are held against ``analyse`` itself. Prints false
alarms (two-sided and in each tail, at 5 % and 1 %), coverage of the 95 % interval, what the rule chose, the bounds that
an implementation must keep, and the power lost against t on normal readings.
"""

import sys
import time
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import UTC, datetime
from math import exp, sqrt

import numpy as np

from meanlab import Question, ReadingSet
from meanlab.analysis import decide
from meanlab.checks.normality import shapiro_wilk, skewness, skewness_test
from meanlab.procedures.decision import p_value
from meanlab.procedures.distributions import t_critical
from meanlab.procedures.mean_tests import guarded_critical, guarded_tails, t_tails
from meanlab.procedures.signed_rank import Null
from meanlab.route import PRETEST

SIZES = (3, 4, 5, 6, 7, 8, 10, 12, 15, 20, 30, 50, 100)
SHOWN_SIZES = (5, 8, 10, 15, 20, 30, 50, 100)
LEVELS = (0.05, 0.01)
WHOLE = 10**9  # readings are whole numbers of 1e-9 σ, so that analyse sees the very same numbers
HELD_AGAINST_ANALYSE = 40
PROCEDURES = ("t", "guarded_t", "signed_rank")

Draw = Callable[[np.random.Generator, tuple[int, int]], np.ndarray]


@dataclass(frozen=True)
class Shape:
    """A shape with standard deviation about 1, its true mean, and the step of its readings (0: none known)."""

    draw: Draw
    mean: float
    step: float = 0.0


def _lognormal(width: float) -> Shape:
    return Shape(lambda generator, size: np.exp(width * generator.standard_normal(size)), exp(width**2 / 2))


SHAPES: Mapping[str, Shape] = {
    "normal": Shape(lambda generator, size: generator.standard_normal(size), 0.0),
    "uniform": Shape(lambda generator, size: generator.uniform(-1, 1, size), 0.0),
    "t, 5 df": Shape(lambda generator, size: generator.standard_t(5, size), 0.0),
    "t, 3 df": Shape(lambda generator, size: generator.standard_t(3, size), 0.0),
    "Laplace": Shape(lambda generator, size: generator.laplace(0, 1, size), 0.0),
    "lognormal 0.25": _lognormal(0.25),
    "lognormal 0.5": _lognormal(0.5),
    "lognormal 1": _lognormal(1.0),
    "gamma 4": Shape(lambda generator, size: generator.gamma(4, 1, size), 4.0),
    "exponential": Shape(lambda generator, size: generator.exponential(1, size), 1.0),
    # the true mean lies off the grid of the step, as a target mostly does
    "normal, step 0.5 σ": Shape(lambda generator, size: 0.2 + generator.standard_normal(size), 0.2, 0.5),
    "normal, step σ": Shape(lambda generator, size: 0.2 + generator.standard_normal(size), 0.2, 1.0),
}


def whole_numbers(shape: Shape, generator: np.random.Generator, samples: int, n: int) -> np.ndarray:
    """Return samples as whole numbers of 1e-9, rounded to the step of the shape, shape (samples, n)."""
    x = shape.draw(generator, (samples, n))
    if shape.step:
        return (np.rint(x / shape.step) * round(shape.step * WHOLE)).astype(np.int64)
    return np.rint(x * WHOLE).astype(np.int64)


@dataclass(frozen=True)
class Judged:
    """What the rule did with each sample: place in PROCEDURES (−1: none), both one-sided p, those of t, coverage."""

    chosen: np.ndarray
    greater: np.ndarray
    less: np.ndarray
    plain_greater: np.ndarray
    plain_less: np.ndarray
    covered: np.ndarray

    def false_alarms(self, alternative: str, level: float) -> float:
        """Share of samples that reject."""
        return float(np.mean(p_value(alternative, self.greater, self.less) < level))

    def plain_false_alarms(self, alternative: str, level: float) -> float:
        """The same for Student's t alone."""
        return float(np.mean(p_value(alternative, self.plain_greater, self.plain_less) < level))

    @property
    def worse_tail(self) -> float:
        """False alarms of the one-sided question with more of them, 5 %."""
        return max(self.false_alarms(side, 0.05) for side in ("greater", "less"))

    def share(self, procedure: str) -> float:
        """Share of samples judged by a procedure."""
        return float(np.mean(self.chosen == PROCEDURES.index(procedure)))


def judge(whole: np.ndarray, target: int, step: float) -> Judged:
    """Return the rule's judgement of samples against a target, at the two-sided level 5 % for the guard of row 11."""
    samples, n = whole.shape
    x = (whole - target) / WHOLE
    s = x.std(axis=1, ddof=1)
    testable = np.ptp(whole, axis=1) > 0
    ratio = np.zeros(samples)
    ratio[testable] = x[testable].mean(axis=1) / (s[testable] / sqrt(n))
    chosen = np.where(testable, 0, -1)
    if n >= 8:
        chosen[testable] = _chosen(x[testable], s[testable], step)
    greater, less = t_tails(ratio, n - 1)
    greater, less = np.where(testable, greater, 1.0), np.where(testable, less, 1.0)
    plain = greater.copy(), less.copy()
    half = float(t_critical(0.025, n - 1))
    covered = ~testable | (np.abs(ratio) <= half)
    guarded = chosen == 1
    if guarded.any():
        a = skewness(x[guarded]) / (3 * sqrt(n))
        greater[guarded], less[guarded] = guarded_tails(ratio[guarded], a, n - 1)
        lower, upper = guarded_critical(a, n - 1, 0.025)
        covered[guarded] = (lower <= ratio[guarded]) & (ratio[guarded] <= upper)
    null = Null()
    for place in np.flatnonzero(chosen == 2):
        greater[place], less[place] = null.tails(whole[place] - target)
        covered[place] = min(greater[place], less[place]) >= 0.025
    return Judged(chosen, greater, less, *plain, covered)


def _chosen(x: np.ndarray, s: np.ndarray, step: float) -> np.ndarray:
    """Return the place in PROCEDURES that rows 8 to 12 of the rule pick for samples of n ≥ 8."""
    n = x.shape[1]
    coarse = step / s > (0.3 if n <= 30 else 0.2 if n <= 60 else 0.1)
    _, p = shapiro_wilk(x)
    as_t = coarse | (p > PRETEST) | (n >= 28 + 25 * skewness(x) ** 2)
    symmetric = skewness_test(x) > PRETEST
    can_reject = 2.0 * 0.5 ** np.count_nonzero(x, axis=1) < 0.05
    return np.where(as_t | (symmetric & ~can_reject), 0, np.where(symmetric, 2, 1))


def hold_against_analyse(whole: np.ndarray, target: int, step: float, judged: Judged) -> int:
    """Compare route and p of some samples with the package's own decision; return how many were compared."""
    others = np.flatnonzero(judged.chosen > 0)[: HELD_AGAINST_ANALYSE // 2]
    places = [*others, *range(HELD_AGAINST_ANALYSE - len(others))]
    question = Question(f"{target}e-9", resolution=step or None)
    for place in places:
        texts = tuple(f"{value}e-9" for value in whole[place].tolist())
        found = decide(ReadingSet(texts, computed=not step), question)
        expected = None if judged.chosen[place] < 0 else PROCEDURES[judged.chosen[place]]
        assert found.route.procedure == expected, (found.route, expected)
        if found.test is not None:
            tails = found.test.p_greater, found.test.p_less
            assert np.allclose(tails, (judged.greater[place], judged.less[place]), rtol=1e-9, atol=0), tails
    return len(places)


Cells = dict[tuple[str, int], Judged]


def run(samples: int, seed: int) -> tuple[Cells, int]:
    """Judge every shape at every number of readings; each cell has its own random numbers."""
    cells, compared = {}, 0
    for place, (name, shape) in enumerate(SHAPES.items()):
        for n in SIZES:
            generator = np.random.default_rng([seed, place, n])
            whole = whole_numbers(shape, generator, samples, n)
            target = round(shape.mean * WHOLE)
            judged = judge(whole, target, shape.step)
            compared += hold_against_analyse(whole, target, shape.step, judged)
            cells[name, n] = judged
    return cells, compared


SYMMETRIC = ("uniform", "t, 5 df", "t, 3 df", "Laplace")


def bounds(cells: Cells) -> list[tuple[str, float, float, float]]:
    """Return (what, found, lowest allowed, highest allowed) for every bound the rule must keep."""
    found: list[tuple[str, float, float, float]] = []
    for (name, n), judged in cells.items():
        two = judged.false_alarms("two-sided", 0.05)
        what = f"{name}, n = {n}"
        if name == "normal":
            for side in ("two-sided", "greater", "less"):
                found.append((f"{what}, {side}, 5 %", judged.false_alarms(side, 0.05), 0.045, 0.055))
                found.append((f"{what}, {side}, 1 %", judged.false_alarms(side, 0.01), 0.008, 0.012))
            found.append((f"{what}, sent away from t", 1 - judged.share("t"), 0.0, 0.060))
        elif name in SYMMETRIC and n >= 8:
            found.append((what, two, 0.030, 0.056))
        elif name in ("lognormal 0.25", "gamma 4") and n >= 8:
            found.append((what, two, 0.0, 0.062 if n >= 15 else 0.070))
        elif name == "lognormal 0.5" and n >= 15:
            found.append((what, two, *((0.042, 0.056) if n >= 30 else (0.0, 0.070))))
        elif name == "exponential" and n >= 15:
            found.append((what, two, *((0.035, 0.058) if n >= 20 else (0.0, 0.066))))
            if n >= 20:
                found.append((f"{what}, worse tail", judged.worse_tail, 0.0, 0.081))
        elif name == "lognormal 1" and n >= 20:
            plain = judged.plain_false_alarms("two-sided", 0.05)
            found.append((f"{what}, t alone {plain:.3f}", two, 0.0, min(0.080, plain)))
        elif name.startswith("normal, step") and n >= 5:
            found.append((what, two, 0.030, 0.065))
    return found


def power_lost(samples: int, seed: int) -> list[tuple[int, float, float]]:
    """Return (n, power of t, power lost by the whole rule) on normal readings with a difference found with 80 %."""
    lost = []
    for n in (8, 10, 15, 20, 50):
        generator = np.random.default_rng([seed, 99, n])
        whole = whole_numbers(SHAPES["normal"], generator, samples, n)
        shift = (float(t_critical(0.025, n - 1)) + 0.84) / sqrt(n)
        judged = judge(whole, -round(shift * WHOLE), 0.0)
        plain = judged.plain_false_alarms("two-sided", 0.05)
        lost.append((n, plain, plain - judged.false_alarms("two-sided", 0.05)))
    return lost


def rate(value: float) -> str:
    """Return a rate as .050.

    >>> rate(0.05)
    '.050'
    """
    return f"{value:.3f}".removeprefix("0")


def table_of_alarms(cells: Cells, sizes: tuple[int, ...] = SHOWN_SIZES) -> str:
    """Return two-sided false alarms / those of the worse tail, at 5 %."""
    lines = [f"| two-sided / worse tail | {' | '.join(f'n = {n}' for n in sizes)} |", "|---" * (len(sizes) + 1) + "|"]
    for name in SHAPES:
        row = [cells[name, n] for n in sizes]
        rates = [f"{rate(one.false_alarms('two-sided', 0.05))} / {rate(one.worse_tail)}" for one in row]
        lines.append(f"| {name} | {' | '.join(rates)} |")
    return "\n".join(lines)


def table_in_full(cells: Cells) -> str:
    """Return every cell: false alarms at 5 % and 1 %, coverage, what the rule chose, and t alone."""
    head = "| shape | n | 5 % two | > | < | 1 % two | > | < | 95 % covers | t | guarded t | signed rank | t alone |"
    lines = [head, "|---" * 13 + "|"]
    for (name, n), judged in cells.items():
        alarms = [judged.false_alarms(side, level) for level in LEVELS for side in ("two-sided", "greater", "less")]
        shares = [judged.share(procedure) for procedure in PROCEDURES]
        figures = [*alarms, float(np.mean(judged.covered)), *shares, judged.plain_false_alarms("two-sided", 0.05)]
        lines.append(f"| {name} | {n} | {' | '.join(map(rate, figures))} |")
    return "\n".join(lines)


def main() -> None:
    """Print everything; end with 1 where a bound is passed by more than two standard errors."""
    samples = int(sys.argv[1]) if len(sys.argv) > 1 else 20_000
    seed = int(sys.argv[2]) if len(sys.argv) > 2 else 20261201
    start = time.perf_counter()
    cells, compared = run(samples, seed)
    print(
        f"{samples:,} samples a cell, seed {seed}, {datetime.now(UTC):%Y-%m-%d}; {compared:,} held against analyse.\n"
    )
    print(table_of_alarms(cells), end="\n\n")
    print(table_in_full(cells), end="\n\n")
    passed = 0
    for what, found, low, high in bounds(cells):
        error = 2 * sqrt(max(found, 0.001) * (1 - found) / samples)
        if not low <= found <= high:
            beyond = not low - error <= found <= high + error
            passed += beyond
            print(f"{'BEYOND' if beyond else 'within error'}: {what}: {found:.4f} (allowed {low:.3f} to {high:.3f})")
    print(f"\n{len(bounds(cells))} bounds, {passed} passed by more than two standard errors.")
    for n, power, lost in power_lost(samples, seed):
        print(f"normal, n = {n}: power of t {power:.3f}, lost by the rule {lost:.4f} (allowed 0.02)")
        passed += lost > 0.02
    print(f"{time.perf_counter() - start:.0f} s")
    sys.exit(1 if passed else 0)


if __name__ == "__main__":
    main()
