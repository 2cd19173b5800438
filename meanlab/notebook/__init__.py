"""What is kept between two visits: the page as it was left, and the entries. SQLAlchemy is imported here alone."""

from meanlab.core.source import Source, SourceEntry, source_of
from meanlab.notebook.entry import Entry, Listed
from meanlab.notebook.notebook import Notebook
from meanlab.notebook.recomputing import Changed, recompute
from meanlab.notebook.working_state import Kept, WorkingStates

__all__ = [
    "Changed",
    "Entry",
    "Kept",
    "Listed",
    "Notebook",
    "Source",
    "SourceEntry",
    "WorkingStates",
    "recompute",
    "source_of",
]
