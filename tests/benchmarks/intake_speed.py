"""How fast a million readings are read, as a ratio to pandas.read_csv of the same column in the same run.

    python tests/benchmarks/intake_speed.py [--readings 1000000]

Goal: at most 20 times. The time counts up to the list of values. Also printed: the same column under a heading in a
file, with a decimal comma, with entries below a limit, and beside a column of times. Medians of three runs; ends with
code 1 where the goal is missed.
"""

import argparse
import io
import random
import sys
import time
from collections.abc import Callable
from pathlib import Path
from statistics import median

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

import pandas

import meanlab
import meanlab.intake

GOAL = 20.0
RUNS = 3


def main() -> int:
    """Measure, print, and return 1 where the goal is missed."""
    asked = argparse.ArgumentParser()
    asked.add_argument("--readings", type=int, default=1_000_000)
    count = asked.parse_args().readings
    draw = random.Random(1)
    numbers = [f"{draw.gauss(0.5, 0.1):.3f}" for _ in range(count)]
    column = "\n".join(numbers)
    timed = "\n".join(
        f"2026-03-04 {i // 3600 % 24:02d}:{i // 60 % 60:02d}:{i % 60:02d},{n}" for i, n in enumerate(numbers)
    )
    reference = _seconds(lambda: pandas.read_csv(io.StringIO(column), header=None))
    print(f"pandas.read_csv: {reference:.3f} s for {count:,} readings")
    cases: dict[str, str | bytes] = {
        "pasted": column,
        "a file with a heading": f"Turbidity (NTU)\n{column}\n".encode(),
        "decimal comma": column.replace(".", ","),
        "with limits and gaps": f"{column}\n<0.05\nNA\n",
        "beside times": f"Time,Turbidity (NTU)\n{timed}\n".encode(),
    }
    ratios = {}
    for name, source in cases.items():
        seconds = _seconds(lambda source=source: _values(source, count))  # type: ignore[misc]
        ratios[name] = seconds / reference
        print(f"{name}: {seconds:.3f} s, {ratios[name]:.1f} times")
    return 0 if ratios["pasted"] <= GOAL else 1


def _values(source: str | bytes, count: int) -> None:
    found = meanlab.read(source, "readings.csv" if isinstance(source, bytes) else None)
    assert len(found.values) == count, found.reason


def _seconds(call: Callable[[], object]) -> float:
    def once() -> float:
        started = time.perf_counter()
        call()
        return time.perf_counter() - started

    return median(once() for _ in range(RUNS))


if __name__ == "__main__":
    sys.exit(main())
