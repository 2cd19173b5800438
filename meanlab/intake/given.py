"""A column of entries before and after it is read."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field

from meanlab.intake.found import Special
from meanlab.intake.numerals import DecimalSign, Sign

_CODES = ("-9", "-99", "-999", "-9999", "-99999", "-999.9", "-999.99", "-999.0", "-9999.0", "9999", "99999")


@dataclass(frozen=True)
class Given:
    """A column before it is read.

    texts       each entry as it stands in the text or cell
    kinds       the kind of each cell, None where all are text (`grid.Cell`)
    computed    places of stored numbers with more digits than an instrument shows
    qualifiers  "<", ">" or "" for each entry, from a column of their own
    decimal     the sign that was chosen, ``hint`` the one that other columns show
    place_of    the place of an entry in words
    plain       "." or "," where all entries are known to be bare numbers with no other decimal sign
    """

    texts: Sequence[str]
    place_of: Callable[[int], str]
    kinds: Sequence[str] | None = None
    computed: frozenset[int] = frozenset()
    qualifiers: Sequence[str] | None = None
    decimal: Sign | None = None
    hint: Sign | None = None
    heading_unit: str | None = None
    plain: str = ""


@dataclass
class Read:
    """What a column came to; ``refusal`` is the reason why nothing may be computed.

    ``unread`` are the sentences about entries that could not be read, ``warnings`` the further ones.
    """

    numbers: list[str] = field(default_factory=list)
    special: dict[int, Special] = field(default_factory=dict)
    sign: DecimalSign = field(default_factory=lambda: DecimalSign("."))
    unit: str | None = None
    unread: list[str] = field(default_factory=list)
    warnings: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)
    refusal: str = ""
    computed: bool = False


def codes_among(numbers: Sequence[str]) -> list[str]:
    """Return numbers such as −999 that programs write for "no value", where they stand far from the others.

    >>> codes_among(["5.02", "-999", "4.98"]), codes_among(["-9", "-8"])
    (['-999'], [])
    """
    text = "\n".join(("", "\n".join(numbers), ""))
    codes = [code for code in _CODES if f"\n{code}\n" in text] if "\n-9" in text or "\n9999" in text else []
    if not codes:
        return []
    largest = max((abs(float(number)) for number in set(numbers) if number not in _CODES), default=None)
    return [code for code in codes if largest is not None and abs(float(code)) > 5 * largest]
