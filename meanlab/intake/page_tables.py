"""Tables in a web page: what some instruments and spreadsheets write under a name that ends in .xls."""

import re
from html.parser import HTMLParser

from meanlab.intake.building import Room, SheetBuilder, shown_text
from meanlab.intake.grid import Cell, Sheet

_CHARACTERS = re.compile(rb"charset\s*=\s*[\"']?([A-Za-z0-9_-]{3,20})")
_UNSEEN = ("script", "style", "title", "comment")
# the limits of the HTML standard (§4.9.11, attributes of td and th)
_MOST_ROWS = 65_534
_MOST_COLUMNS = 1_000
_BLANKS = re.compile(r"\s+")


def is_page(data: bytes) -> bool:
    """True where the bytes begin like a web page with a table.

    >>> is_page(b"<html><table><tr><td>5.02</table>"), is_page(b"<0.05")
    (True, False)
    """
    start = data[:4096].lstrip(b"\xef\xbb\xbf \r\n\t").lower()
    return start.startswith((b"<!doctype html", b"<html", b"<table", b"<meta", b"<!--")) and b"<table" in data.lower()


def read_page(data: bytes) -> tuple[Sheet, ...]:
    """One sheet for each table of a web page."""
    page = _Page()
    page.feed(_decoded(data))
    page.close()
    return tuple(page.finished())


def _decoded(data: bytes) -> str:
    named = _CHARACTERS.search(data[:4096])
    for encoding in ([named[1].decode("ascii")] if named else []) + ["utf-8-sig"]:
        try:
            return data.decode(encoding)
        except (UnicodeDecodeError, LookupError):
            continue
    return data.decode("cp1252", "replace")


class _Table:
    """One table under construction; cells that span rows keep their place in the rows below."""

    def __init__(self, builder: SheetBuilder) -> None:
        self.builder = builder
        self.row = -1
        self.column = 0
        self.pieces: list[str] | None = None
        self.spans = (1, 1)
        # first column of a cell that spans rows: the row and the column after it
        self._taken: dict[int, tuple[int, int]] = {}

    def begin_row(self) -> None:
        self.row += 1
        self.column = 0

    def begin_cell(self, rows: int, columns: int) -> None:
        if self.row < 0:
            self.begin_row()
        while self._taken.get(self.column, (0, 0))[0] > self.row:
            self.column = self._taken[self.column][1]
        self.pieces, self.spans = [], (rows, columns)

    def end_cell(self) -> None:
        if self.pieces is None:
            return
        text = shown_text(_BLANKS.sub(" ", "".join(self.pieces)).strip())
        rows, columns = self.spans
        self.builder.put(self.row, self.column, Cell(text))
        if rows > 1:
            self._taken[self.column] = (self.row + rows, self.column + columns)
            if not text[:1].isdigit():
                self.builder.merged.add((self.row, self.row + rows - 1, self.column))
        self.column += columns
        self.pieces = None


class _Page(HTMLParser):
    def __init__(self) -> None:
        super().__init__(convert_charrefs=True)
        self._room = Room()
        self._tables: list[_Table] = []
        self._open: list[_Table] = []
        self._unseen = 0

    def handle_starttag(self, tag: str, attributes: list[tuple[str, str | None]]) -> None:
        if tag in _UNSEEN:
            self._unseen += 1
        elif tag == "table":
            self._open.append(_Table(SheetBuilder(f"table {len(self._tables) + 1}", self._room)))
            self._tables.append(self._open[-1])
        elif not self._open:
            return
        elif tag == "tr":
            self._open[-1].end_cell()
            self._open[-1].begin_row()
        elif tag in ("td", "th"):
            self._open[-1].end_cell()
            given = dict(attributes)
            rows, columns = _span(given.get("rowspan"), _MOST_ROWS), _span(given.get("colspan"), _MOST_COLUMNS)
            self._open[-1].begin_cell(rows, columns)
        elif tag in ("br", "p", "div"):
            self.handle_data(" ")

    def handle_endtag(self, tag: str) -> None:
        if tag in _UNSEEN:
            self._unseen = max(0, self._unseen - 1)
        elif self._open and tag in ("td", "th", "tr", "table"):
            self._open[-1].end_cell()
            if tag == "table":
                self._open.pop()

    def handle_data(self, data: str) -> None:
        if self._open and self._open[-1].pieces is not None and not self._unseen:
            self._open[-1].pieces.append(data)

    def finished(self) -> list[Sheet]:
        for table in self._open:
            table.end_cell()
        sheets = [table.builder.sheet() for table in self._tables]
        return [sheet for sheet in sheets if sheet.rows]


def _span(text: str | None, most: int) -> int:
    return min(max(int(text), 1), most) if text and text.isascii() and text.isdigit() and len(text) < 8 else 1
