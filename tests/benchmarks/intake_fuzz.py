"""Nothing but an Intake or a Complaint comes back, whatever is pasted or uploaded.

    python tests/benchmarks/intake_fuzz.py [--texts 200000] [--files 20000] [--seed 1]

Reads made-up texts and damaged files, asks for every fact of what was read, and prints how many were tried, the worst
time of one and the largest memory of the process; ends with code 1 where anything else comes back. An input that does
so is printed with its seed.
"""

import argparse
import random
import resource
import sys
import time
import traceback
from collections import Counter
from collections.abc import Callable
from contextlib import suppress
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
sys.path[:0] = [str(ROOT), str(ROOT / "tests" / "intake")]

from made_texts import made_selection, made_text  # noqa: E402
from mutations import mutated  # noqa: E402

import meanlab  # noqa: E402
from meanlab.core.complaints import Complaint  # noqa: E402
from meanlab.intake import Intake, columns, read_number  # noqa: E402

FILES = sorted((ROOT / "tests" / "intake" / "files").iterdir())
SLOW = 5.0  # seconds


def main() -> int:
    """Read what is made up, print the counts, and return 1 where something else than an Intake came back."""
    asked = argparse.ArgumentParser()
    asked.add_argument("--texts", type=int, default=200_000)
    asked.add_argument("--files", type=int, default=20_000)
    asked.add_argument("--seed", type=int, default=1)
    given = asked.parse_args()
    tally: Counter[str] = Counter()
    worst = (0.0, "")
    started = time.perf_counter()
    for kind, count in (("text", given.texts), ("file", given.files)):
        for number in range(count):
            seed = f"{kind} {given.seed} {number}"
            took, outcome = _one(kind, seed)
            tally[f"{kind}: {outcome}"] += 1
            worst = max(worst, (took, seed))
            if number % 20_000 == 19_999:
                print(f"{kind} {number + 1}: worst {worst[0]:.2f} s ({worst[1]})", flush=True)
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    for outcome, times in sorted(tally.items()):
        print(f"{times:9,} {outcome}")
    faults = sum(times for outcome, times in tally.items() if outcome.endswith("FAULT"))
    print(
        f"{sum(tally.values()):,} inputs, {faults} faults; worst time {worst[0]:.2f} s ({worst[1]}); largest memory "
        f"{memory:,.0f} MB; {time.perf_counter() - started:,.0f} s in all"
    )
    return 1 if faults or worst[0] > SLOW else 0


def made(kind: str, seed: str) -> tuple[str | bytes, str | None, dict[str, object] | None]:
    """Return the input of a seed: what is pasted or uploaded, the name of the file, what is chosen."""
    draw = random.Random(seed)
    if kind == "text" or draw.random() < 0.5:
        text = made_text(draw)
        if kind == "text":
            return text, None, made_selection(draw)
        data = text.encode(draw.choice(("utf-8", "utf-8-sig", "utf-16", "cp1252")), "replace")
    else:
        data = draw.choice(FILES).read_bytes()
    return mutated(data, draw) if draw.random() < 0.9 else data, "readings.csv", made_selection(draw)


def _one(kind: str, seed: str) -> tuple[float, str]:
    source, filename, selection = made(kind, seed)
    started = time.perf_counter()
    try:
        outcome = _read(source, filename, selection)
    except Exception:
        print(f"\n{seed}: {source[:200]!r} {selection}", flush=True)
        traceback.print_exc()
        outcome = "FAULT"
    return time.perf_counter() - started, outcome


def _read(source: str | bytes, filename: str | None, selection: dict[str, object] | None) -> str:
    found = meanlab.read(source, filename, selection)
    assert isinstance(found, Intake)
    facts = found.to_dict()
    assert len(facts["values"]) + len(facts["censored"]) + facts["missing"] + len(facts["rejected"]) == len(
        found.entries
    )
    assert found.counts_line()
    assert all(entry.place and entry.role for entry in found.entries)
    if isinstance(source, str):
        _quietly(read_number, source[:40])
    _quietly(columns, source, filename)
    if found.refused or found.needs_choice:
        assert found.reason
        assert not found.has_readings
        return "refused" if found.refused else "asked"
    _quietly(found.reading_set)
    return "read"


def _quietly(call: Callable[..., object], *given: object) -> None:
    with suppress(Complaint):
        call(*given)


if __name__ == "__main__":
    sys.exit(main())
