"""How long a table of many samples takes: ratios measured in one run.

    python tests/benchmarks/many_speed.py

1,000 samples of 8 readings (three decimals, ties) against a loop of the scipy calls a script would make: shapiro,
ttest_1samp with its interval, wilcoxon and binomtest; 100,000 samples of 10 against ``pandas.read_csv`` of the same
table; twice the samples against once; the peak of the memory taken against the size of the table.
The best of several rounds counts. Prints a Markdown table; ends with 1 where a ratio is beyond its bound.
"""

import io
import platform
import sys
import time
import tracemalloc
import warnings
from collections.abc import Callable
from datetime import UTC, datetime

import numpy as np
import pandas as pd
import scipy
from scipy import stats

from meanlab import Question, analyse_many

SEED = 20261207
ROUNDS = 7
PART = 10  # the loop of scipy calls goes through a tenth of the samples; it takes a minute for all
QUESTION = Question("5.000")
LEAST_AGAINST_SCIPY, MOST_AGAINST_READING, MOST_FOR_TWICE, MOST_MEMORY = 100.0, 12.0, 2.4, 6.0


def table_of(samples: int, n: int, spread: float = 0.05) -> pd.DataFrame:
    """Return invented readings about 5 with three decimals, one a row; a small spread makes ties."""
    generator = np.random.default_rng(SEED)
    return pd.DataFrame(
        {
            "lot": np.repeat(np.arange(samples), n),
            "value": generator.normal(5.004, spread, samples * n).round(3),
        }
    )


def best_times(*calls: Callable[[], object], rounds: int = ROUNDS) -> list[float]:
    """Return the shortest time of each call, seconds; the calls take turns, so that a busy moment hits all of them."""
    best = [float("inf")] * len(calls)
    for _ in range(rounds):
        for place, call in enumerate(calls):
            start = time.perf_counter()
            call()
            best[place] = min(best[place], time.perf_counter() - start)
    return best


def judged(table: pd.DataFrame) -> pd.DataFrame:
    """Return the result of a table."""
    return analyse_many(table, "value", "lot", QUESTION)


def scipy_loop(table: pd.DataFrame, target: float = 5.0) -> None:
    """Go through the samples with the library calls a script would make."""
    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        for _, sample in table.groupby("lot")["value"]:
            x = sample.to_numpy()
            stats.shapiro(x)
            stats.ttest_1samp(x, target).confidence_interval(0.95)
            stats.wilcoxon(x - target)
            stats.binomtest(int(np.sum(x > target)), int(np.sum(x != target)), 0.5)


def peak_of(call: Callable[[], object]) -> int:
    """Return the most memory taken at a time during a call, bytes."""
    tracemalloc.start()
    try:
        call()
        return tracemalloc.get_traced_memory()[1]
    finally:
        tracemalloc.stop()


def rows() -> list[tuple[str, str, str, float, str, bool]]:
    """Return the lines of the table: what, its time, against, ratio, bound, whether it is kept."""
    small, large, twice = table_of(1_000, 8, 0.004), table_of(100_000, 10), table_of(200_000, 10)
    text = large.to_csv(index=False)
    judged(small)
    own = best_times(lambda: judged(small))[0]
    loop = best_times(lambda: scipy_loop(small[: len(small) // PART]), rounds=3)[0] * PART
    reading, once, double = best_times(
        lambda: pd.read_csv(io.StringIO(text)), lambda: judged(large), lambda: judged(twice)
    )
    memory, size = peak_of(lambda: judged(large)), int(large.memory_usage(deep=True).sum())
    return [
        ("1,000 samples of 8", f"{own * 1e3:.1f} ms", "a loop of scipy calls", loop / own,
         f"≥ {LEAST_AGAINST_SCIPY:g}", loop / own >= LEAST_AGAINST_SCIPY),
        ("100,000 samples of 10", f"{once:.2f} s", "read_csv of the same table", once / reading,
         f"≤ {MOST_AGAINST_READING:g}", once / reading <= MOST_AGAINST_READING),
        ("200,000 samples of 10", f"{double:.2f} s", "100,000 samples", double / once,
         f"≤ {MOST_FOR_TWICE:g}", double / once <= MOST_FOR_TWICE),
        ("100,000 samples of 10, memory", f"{memory / 1e6:.0f} MB", f"the table, {size / 1e6:.0f} MB", memory / size,
         f"≤ {MOST_MEMORY:g}", memory / size <= MOST_MEMORY),
    ]  # fmt: skip


def main() -> int:
    """Measure, print, and tell whether every bound is kept."""
    found = rows()
    print(
        f"{datetime.now(UTC):%Y-%m-%d}, Python {platform.python_version()}, numpy {np.__version__}, scipy "
        f"{scipy.__version__}, pandas {pd.__version__}, seed {SEED}\n"
    )
    print("| what | takes | against | ratio | bound | kept |\n|---|---|---|---|---|---|")
    for what, takes, against, ratio, bound, kept in found:
        print(f"| {what} | {takes} | {against} | {ratio:.3g} | {bound} | {'yes' if kept else 'NO'} |")
    return 0 if all(row[-1] for row in found) else 1


if __name__ == "__main__":
    sys.exit(main())
