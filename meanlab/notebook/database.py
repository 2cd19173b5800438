"""One opened database of the notebook: transactions that read or write, and every failure as a sentence."""

from collections.abc import Iterator
from contextlib import AbstractContextManager, contextmanager, nullcontext
from threading import RLock

from sqlalchemy import Connection, StaticPool

from meanlab.notebook.place import FAILURES, cannot_keep, database_url, open_engine, place_in_words, writing
from meanlab.notebook.schema import prepare


class Database:
    """The database of a URL, by default that of MEANLAB_DATABASE_URL.

    Every method raises NotebookComplaint, with a sentence, where the database cannot be read or written.
    """

    def __init__(self, url: str | None = None) -> None:
        self.url = url or database_url()
        self._engine = open_engine(self.url)
        in_memory = isinstance(self._engine.pool, StaticPool)  # its threads share one connection
        self._turn: AbstractContextManager[object] = RLock() if in_memory else nullcontext()
        try:
            with self._said_plainly():
                prepare(self._engine)
        except BaseException:
            self._engine.dispose()
            raise

    @property
    def place(self) -> str:
        """Where it lies, for the technician to read."""
        return place_in_words(self.url)

    def close(self) -> None:
        """Let go of the database."""
        self._engine.dispose()

    @contextmanager
    def _reading(self) -> Iterator[Connection]:
        with self._turn, self._said_plainly(), self._engine.begin() as connection:
            yield connection

    @contextmanager
    def _writing(self) -> Iterator[Connection]:
        with self._turn, self._said_plainly(), writing(self._engine) as connection:
            yield connection

    @contextmanager
    def _said_plainly(self) -> Iterator[None]:
        try:
            yield
        except FAILURES as problem:
            raise cannot_keep(self.url, problem) from problem
