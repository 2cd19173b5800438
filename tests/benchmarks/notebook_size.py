"""Opening the list and saving an entry, in a notebook of 100 and of 10,000 entries: prints times and their ratios.

python tests/benchmarks/notebook_size.py [entries]     (about two minutes; the longer notebook is built first)
"""

import statistics
import sys
import tempfile
import time
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
sys.path[:0] = [str(ROOT), str(ROOT / "tests" / "wording")]

from built_analyses import built  # noqa: E402

from meanlab.notebook import Notebook  # noqa: E402

FEW = 100
ROUNDS = 41


def opened(url: str) -> float:
    """Seconds to open the notebook and read the hundred lines that a list shows first, the latest."""
    start = time.perf_counter()
    book = Notebook(url)
    lines = book.entries()[-FEW:]
    taken = time.perf_counter() - start
    assert len(lines) == FEW
    book.close()
    return taken


def saved(book: Notebook) -> float:
    """Seconds to save one entry."""
    analysis = built()
    start = time.perf_counter()
    book.add(analysis, title="one more", by="bench 3")
    return time.perf_counter() - start


def main() -> None:
    """Measure in turns, so that both notebooks meet the same moments of the machine."""
    many = int(sys.argv[1]) if len(sys.argv) > 1 else 10_000
    with tempfile.TemporaryDirectory() as folder:
        urls = {count: f"sqlite:///{Path(folder) / f'{count}.db'}" for count in (FEW, many)}
        books = {count: Notebook(url) for count, url in urls.items()}
        analysis = built()
        for count, book in books.items():
            for place in range(count):
                book.add(analysis, title=f"Nitrate, run {place}", by="bench 3", note="invented")
        opening = {count: [] for count in urls}
        saving = {count: [] for count in urls}
        for _ in range(ROUNDS):
            for count, url in urls.items():
                opening[count].append(opened(url))
                saving[count].append(saved(books[count]))
        for what, times in (("open the list", opening), ("save an entry", saving)):
            few, more = (1000 * statistics.median(times[count]) for count in (FEW, many))
            print(f"{what}: {few:.2f} ms of {FEW}, {more:.2f} ms of {many:,}; ratio {more / few:.2f}")
        start = time.perf_counter()
        problems = books[many].verify()
        print(f"verify {many:,}: {time.perf_counter() - start:.1f} s, {len(problems)} problems")
        start = time.perf_counter()
        found = books[many].search("nitrate 999")
        print(f"search {many:,}: {time.perf_counter() - start:.2f} s, {len(found)} found")


if __name__ == "__main__":
    main()
