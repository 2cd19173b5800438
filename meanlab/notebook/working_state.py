"""The page as it was left: readings, question and choices, kept at every change under a key that nobody can guess."""

import json
import secrets
from collections.abc import Collection, Mapping
from dataclasses import dataclass
from datetime import UTC, datetime
from hashlib import sha256
from typing import Any

from sqlalchemy import delete, insert, select, update

from meanlab.core.complaints import NotebookComplaint
from meanlab.notebook.database import Database
from meanlab.notebook.schema import WORKING_FILE, WORKING_STATE

KEY_BYTES = 24


@dataclass(frozen=True)
class Kept:
    """A working state as it was kept, and when (UTC)."""

    state: Mapping[str, Any]
    saved: datetime


class WorkingStates(Database):
    """The working states of one database."""

    @staticmethod
    def new_key() -> str:
        """Return a key that nobody can guess (192 random bits)."""
        return secrets.token_urlsafe(KEY_BYTES)

    def keep(self, key: str, state: Mapping[str, Any], digests: Collection[str] = ()) -> datetime:
        """Keep a state under its key in place of the one before; files not among ``digests`` are let go.

        Returns the time at which it was kept, in UTC.
        """
        now = datetime.now(UTC)
        row = {"saved": now.isoformat(timespec="microseconds"), "state": json.dumps(state, ensure_ascii=False)}
        with self._writing() as connection:
            done = connection.execute(update(WORKING_STATE).where(WORKING_STATE.c.notebook == key).values(**row))
            if done.rowcount == 0:
                connection.execute(insert(WORKING_STATE).values(notebook=key, **row))
            connection.execute(
                delete(WORKING_FILE).where(WORKING_FILE.c.notebook == key, WORKING_FILE.c.digest.not_in(list(digests)))
            )
        return now

    def load(self, key: str) -> Kept | None:
        """Return the state kept under a key, None where there is none."""
        query = select(WORKING_STATE.c.state, WORKING_STATE.c.saved).where(WORKING_STATE.c.notebook == key)
        with self._reading() as connection:
            row = connection.execute(query).one_or_none()
        if row is None:
            return None
        try:
            return Kept(json.loads(row.state), datetime.fromisoformat(row.saved))
        except ValueError as problem:
            raise NotebookComplaint(
                f"What is kept at {self.place} under this address cannot be read any more; the page starts empty."
            ) from problem

    def keep_file(self, key: str, content: bytes) -> str:
        """Keep the bytes of an uploaded file beside the state of a key; returns their SHA-256 (hexadecimal)."""
        digest = sha256(content).hexdigest()
        there = select(WORKING_FILE.c.digest).where(WORKING_FILE.c.notebook == key, WORKING_FILE.c.digest == digest)
        with self._writing() as connection:
            if connection.execute(there).one_or_none() is None:
                connection.execute(insert(WORKING_FILE).values(notebook=key, digest=digest, content=content))
        return digest

    def load_file(self, key: str, digest: str) -> bytes | None:
        """Return the bytes of a file kept beside the state of a key, None where there are none."""
        query = select(WORKING_FILE.c.content).where(WORKING_FILE.c.notebook == key, WORKING_FILE.c.digest == digest)
        with self._reading() as connection:
            return connection.execute(query).scalar()

    def find_file(self, digest: str) -> bytes | None:
        """Return the bytes of a file that any page of this bench still keeps, by its SHA-256; None where none does."""
        query = select(WORKING_FILE.c.content).where(WORKING_FILE.c.digest == digest).limit(1)
        with self._reading() as connection:
            return connection.execute(query).scalar()

    def latest_key(self) -> str | None:
        """Return the key of the state that was kept last, None where nothing is kept."""
        query = select(WORKING_STATE.c.notebook).order_by(WORKING_STATE.c.saved.desc()).limit(1)
        with self._reading() as connection:
            return connection.execute(query).scalar()
