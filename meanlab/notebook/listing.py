"""The list of entries: read from the database piece by piece, so that a long one opens as fast as a short one."""

import re
import unicodedata
from collections.abc import Callable, Iterator, Mapping, Sequence
from typing import Any, overload

from sqlalchemy import Connection, RowMapping, Select, func, or_, select

from meanlab.notebook.entry import Listed
from meanlab.notebook.schema import ENTRY

PIECE = 200
_FINGERPRINT = re.compile("[0-9a-f]{12,64}")
_NUMBER = re.compile("[0-9]{1,9}")
NO_SIGN = "\x00"  # some databases keep no text with it
SEARCHED = 4_000  # characters of a single text that a search looks through


class EntryList(Sequence[Listed]):
    """The entries in order, the oldest first; what is asked for is read, and no more."""

    def __init__(self, ask: Callable[[Select[Any]], list[RowMapping]], length: int, last: int) -> None:
        self._ask = ask
        self._length = length
        self._without_gaps = last == length

    def __len__(self) -> int:
        return self._length

    @overload
    def __getitem__(self, place: int) -> Listed: ...
    @overload
    def __getitem__(self, place: slice) -> list[Listed]: ...
    def __getitem__(self, place: int | slice) -> Listed | list[Listed]:
        if isinstance(place, slice):
            places = range(*place.indices(self._length))
            first = min(places, default=0)
            found = self._piece(first, len(places) and max(places) - first + 1)
            return [found[one - first] for one in places if one - first < len(found)]
        if not -self._length <= place < self._length:
            raise IndexError(place)
        return self._piece(place % self._length, 1)[0]

    def __iter__(self) -> Iterator[Listed]:
        for start in range(0, self._length, PIECE):
            yield from self._piece(start, min(PIECE, self._length - start))

    def _piece(self, start: int, count: int) -> list[Listed]:
        if count < 1:
            return []
        query = lines().limit(count)
        query = query.where(ENTRY.c.number > start) if self._without_gaps else query.offset(start)
        return [listed(row) for row in self._ask(query)]


def lines() -> Select[Any]:
    """Return the query for the lines of the list, in order."""
    before, later = ENTRY.alias("amended"), ENTRY.alias("amending")
    amends = select(before.c.number).where(before.c.key == ENTRY.c.amends).scalar_subquery()
    amended_by = select(func.max(later.c.number)).where(later.c.amends == ENTRY.c.key).scalar_subquery()
    names = ("number", "key", "time", "title", "material", "verdict", "sentence")
    columns = [ENTRY.c[name] for name in names]
    return select(*columns, amends.label("amends"), amended_by.label("amended_by")).order_by(ENTRY.c.number)


def listed(row: RowMapping) -> Listed:
    """Return one line of the list."""
    return Listed(**row)


def line_values(values: Mapping[str, Any], digest: str) -> dict[str, Any]:
    """Return what stands in the list of an entry, by column: all of it follows from the entry's exact values."""
    analysis = values["analysis"]
    texts = {
        "title": values["title"],
        "material": analysis["question"]["material"],
        "verdict": analysis["verdict"],
        "sentence": analysis["conclusion"],
        "words": words_of(values),
    }
    return {
        **{name: text.replace(NO_SIGN, "") for name, text in texts.items()},
        "number": values["number"],
        "key": values["key"],
        "time": values["time"],
        "amends": values["amends"],
        "fingerprint": analysis["provenance"]["fingerprint"],
        "digest": digest,
    }


def words_of(values: Mapping[str, Any]) -> str:
    """Return the text that a search looks through: what was written about the entry, and what was found."""
    analysis, question = values["analysis"], values["analysis"]["question"]
    texts = (
        *(values[name] for name in ("title", "by", "note", "instrument", "method", "reason")),
        *(question[name] for name in ("quantity", "material", "unit")),
        analysis["readings"]["name"],
        analysis["verdict"],
        analysis["conclusion"],
        values["source"]["file_name"],
    )
    return "\n".join(searchable(text[:SEARCHED]) for text in texts if text)


def searchable(text: str) -> str:
    """Return a text without the difference of capital and small letters or of one sign written in two ways.

    >>> searchable("Straße ½ ﬁne")
    'strasse 1⁄2 fine'
    """
    return unicodedata.normalize("NFKC", text).casefold()


def matching(text: str) -> Select[Any]:
    """Return the query for the lines in which every word is found; also by number, or by the start of a fingerprint."""
    bare = "".join(text.split()).lower()
    if _FINGERPRINT.fullmatch(bare):
        return lines().where(ENTRY.c.fingerprint.startswith(bare))
    query = lines()
    for word in searchable(text).split():
        found = ENTRY.c.words.contains(word, autoescape=True)
        query = query.where(or_(found, ENTRY.c.number == int(word)) if _NUMBER.fullmatch(word) else found)
    return query


def extent_of(connection: Connection) -> tuple[int, int]:
    """Return how many entries there are, and the number of the last (0 where there is none)."""
    count = connection.execute(select(func.count()).select_from(ENTRY)).scalar_one()
    last = connection.execute(select(func.max(ENTRY.c.number))).scalar()
    return count, last or 0
