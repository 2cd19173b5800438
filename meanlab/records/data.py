"""One result as a record file (JSON): everything, so that the notebook opens it and every number comes out again."""

from meanlab.core.exact_values import exact_values
from meanlab.core.record_file import record_file
from meanlab.core.results import Analysis
from meanlab.core.source import Source, entries_of
from meanlab.core.written import Written


def result_file(analysis: Analysis, source: Source | None = None, written: Written | None = None) -> bytes:
    """Return a result with where its readings came from and what was written about it; the same each time.

    ``source`` is by default the readings as typed. Number and digest of a saved entry stay in the notebook.
    """
    written = written or Written()
    unsaved = Written(
        written.title, written.by, written.note, written.instrument, written.method, dict(written.set_times)
    )
    return record_file(
        "result",
        {
            "analysis": exact_values(analysis),
            "source": exact_values(source or Source(entries=entries_of(analysis.readings))),
            "written": exact_values(unsaved),
        },
    )
