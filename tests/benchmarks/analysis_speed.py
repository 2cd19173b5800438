"""How long an analysis takes beside the scipy calls it replaces: ratios measured in one run.

    python tests/benchmarks/analysis_speed.py

An analysis with everything (rule, five procedures, intervals, checks, agreement, power, sentence) against scipy's
shapiro, skewtest, anderson, ttest_1samp with its interval, wilcoxon (exact) and binomtest alone; both on readings that
have been read. With ties scipy enumerates permutations (PermutationMethod) for the signed rank. A million readings are
held against ``sorted`` on the same numbers.
Prints a Markdown table; ends with 1 where a ratio is above its bound.
"""

import platform
import sys
import time
import warnings
from collections.abc import Callable
from datetime import UTC, datetime

import numpy as np
import scipy
from scipy import stats

from meanlab import Question, ReadingSet, analyse

SEED = 20261201
REPEATS = 7
LEAST_SECONDS = 0.15
QUESTION = {"equivalence_limit": "0.5", "difference_that_matters": "0.5"}


def best_time(call: Callable[[], object]) -> float:
    """Return the shortest time of one call, seconds: least of several rounds, each long enough to be measured."""
    call()
    start = time.perf_counter()
    call()
    rounds = max(1, round(LEAST_SECONDS / REPEATS / max(time.perf_counter() - start, 1e-7)))
    times = []
    for _ in range(REPEATS):
        start = time.perf_counter()
        for _ in range(rounds):
            call()
        times.append((time.perf_counter() - start) / rounds)
    return min(times)


def scipy_calls(x: np.ndarray, target: float, method: object = "exact") -> None:
    """Run the library calls that an analysis takes the place of."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        stats.shapiro(x)
        if len(x) >= 8:
            stats.skewtest(x)
        stats.anderson(x)
        stats.ttest_1samp(x, target).confidence_interval(0.95)
        stats.wilcoxon(x - target, method=method)
        above, counted = int(np.sum(x > target)), int(np.sum(x != target))
        stats.binomtest(above, counted, 0.5)


def readings(n: int, places: int) -> tuple[str, ...]:
    """Return normal readings about 5 with s = 0.5, as typed with so many decimals."""
    values = np.random.default_rng([SEED, n, places]).normal(5, 0.5, n)
    return tuple(f"{value:.{places}f}" for value in values)


def compared(n: int, places: int, method: object = "exact") -> tuple[float, float]:
    """Return seconds of one analysis, and of the library calls."""
    typed = readings(n, places)
    read, question = ReadingSet(typed), Question("5.0", **QUESTION)
    x = np.array(typed, dtype=float)
    return best_time(lambda: analyse(read, question)), best_time(lambda: scipy_calls(x, 5.0, method))


def million() -> tuple[float, float]:
    """Return seconds of an analysis of 1,000,000 readings that have been read, and of sorting them."""
    typed, question, times = readings(1_000_000, 3), Question("5.0"), []
    for _ in range(3):
        read = ReadingSet(typed)
        start = time.perf_counter()
        analyse(read, question)
        times.append(time.perf_counter() - start)
    numbers = [float(value) for value in read.values]
    return min(times), best_time(lambda: sorted(numbers))


def main() -> None:
    """Print the table of ratios."""
    enumerated = stats.PermutationMethod(n_resamples=np.inf)
    rows = [
        ("n = 5, no ties", *compared(5, 6), 3.0),
        ("n = 12, no ties", *compared(12, 6), 3.0),
        ("n = 30, no ties", *compared(30, 6), 3.0),
        ("n = 100, no ties", *compared(100, 6), 10.0),
        ("n = 12, ties, against enumeration", *compared(12, 1, enumerated), 0.1),
        ("n = 1,000,000, against sorted()", *million(), 10.0),
    ]
    print(f"{datetime.now(UTC):%Y-%m-%d}, Python {platform.python_version()}, scipy {scipy.__version__}\n")
    print("| readings | analysis, ms | compared with, ms | ratio | bound |\n|---|---|---|---|---|")
    for name, own, other, bound in rows:
        print(f"| {name} | {1e3 * own:.2f} | {1e3 * other:.2f} | {own / other:.2f} | {bound:g} |")
    sys.exit(any(own / other > bound for _, own, other, bound in rows))


if __name__ == "__main__":
    main()
