"""Processes that save entries are killed at a random moment (SIGKILL); what they reported as saved must be there.

python tests/benchmarks/notebook_kill.py [rounds] [seed]     (POSIX; 200 rounds by default, about a minute)

In every second round two processes write at once. Every tenth round begins a new file, so that the making of the
tables is hit too. Ends with 1 where an entry is lost or the notebook is not whole.
"""

import os
import random
import signal
import sys
import tempfile
import time
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
sys.path[:0] = [str(ROOT), str(ROOT / "tests" / "wording")]

from built_analyses import built  # noqa: E402

from meanlab.notebook import Notebook  # noqa: E402

LONGEST_LIFE = 0.25  # seconds
ROUNDS_OF_A_FILE = 10


def writer(url: str, analysis) -> tuple[int, int]:
    """Start a process that saves entries and reports each once it is saved; returns its id and the end to read from."""
    reports, pipe = os.pipe()
    child = os.fork()
    if child:
        os.close(pipe)
        return child, reports
    book = Notebook(url)
    while True:
        entry = book.add(analysis, title="kept?", by="bench 3")
        os.write(pipe, f"{entry.number} {entry.key} {entry.digest}\n".encode())


def killed_round(url: str, analysis, writers: int, life: float) -> list[tuple[str, str]]:
    """Let processes write, kill them, and return key and digest of every entry they reported."""
    started = [writer(url, analysis) for _ in range(writers)]
    time.sleep(life)
    reported = []
    for child, _ in started:
        os.kill(child, signal.SIGKILL)
    for child, reports in started:
        os.waitpid(child, 0)
        with os.fdopen(reports) as lines:
            reported += [tuple(line.split()[1:]) for line in lines.read().splitlines()]
    return reported


def main() -> int:
    """Kill, look, and say what was found."""
    rounds = int(sys.argv[1]) if len(sys.argv) > 1 else 200
    seed = int(sys.argv[2]) if len(sys.argv) > 2 else 1
    chance, analysis = random.Random(seed), built()
    saved = lost = broken = empty = 0
    with tempfile.TemporaryDirectory() as folder:
        reported: list[tuple[str, str]] = []
        for number in range(rounds):
            if number % ROUNDS_OF_A_FILE == 0:
                reported = []
            url = f"sqlite:///{Path(folder) / f'{number // ROUNDS_OF_A_FILE}.db'}"
            news = killed_round(url, analysis, 1 + number % 2, chance.uniform(0, LONGEST_LIFE))
            reported += news
            saved += len(news)
            empty += not news
            book = Notebook(url)
            digests = {line.key: book.entry(line.key).digest for line in book.entries()}
            lost += sum(digests.get(key) != digest for key, digest in reported)
            broken += bool(book.verify())
            book.close()
    print(
        f"{rounds} kills, {saved} entries reported as saved, {lost} lost, {broken} times not whole "
        f"({empty} killed before the first)"
    )
    return 1 if lost or broken else 0


if __name__ == "__main__":
    raise SystemExit(main())
