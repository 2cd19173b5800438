"""Workbooks of the older binary kind (.xls as written since 1997), read record by record.

Source: [MS-XLS] §2.4 (records); the record numbers below are those of that document.
"""

import struct
from collections.abc import Iterator

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.building import Room, SheetBuilder, place_name, shown_text
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.parts import DAMAGED, LOCKED
from meanlab.intake.styles import Styles

_BEGIN, _END, _CONTINUE = 0x0809, 0x000A, 0x003C
_LOCK, _SINCE_1904, _FONT, _FORMAT, _STYLE, _SHEET, _TEXTS = 0x2F, 0x22, 0x31, 0x41E, 0xE0, 0x85, 0xFC
_ROW, _COLUMNS, _MERGED, _OBJECT, _OBJECT_TEXT, _NOTE = 0x208, 0x7D, 0xE5, 0x5D, 0x1B6, 0x1C
_NUMBER, _SHORT_NUMBER, _SHORT_NUMBERS, _TEXT_NUMBER = 0x203, 0x27E, 0xBD, 0xFD
_TEXT, _RICH_TEXT, _TRUTH_OR_ERROR, _FORMULA, _FORMULA_TEXT = 0x204, 0xD6, 0x205, 0x06, 0x207
_ERRORS = {0: "#NULL!", 7: "#DIV/0!", 15: "#VALUE!", 23: "#REF!", 29: "#NAME?", 36: "#NUM!", 42: "#N/A"}
_VERSION = 0x0600
# length and kind of the token after the range: a function of several values, or the sum
_FUNCTIONS = ((4, 0x02), (4, 0x19))
_NO_RESULT = "= (a formula without a stored result)"

Record = tuple[int, list[bytes]]


def is_readable(stream: bytes) -> bool:
    """True where the stream is of the version this module reads; older ones begin otherwise."""
    return len(stream) >= 8 and struct.unpack_from("<H2xH", stream) == (_BEGIN, _VERSION)


def read_xls(stream: bytes) -> tuple[Sheet, ...]:
    """All sheets of the stream "Workbook", hidden ones included; raises IntakeComplaint when damaged or locked."""
    try:
        book = _Book(stream)
        room = Room()
        return tuple(
            _SheetRecords(SheetBuilder(name, room, hidden), book).read(stream, place)
            for name, place, hidden in book.sheets
        )
    except (struct.error, IndexError) as error:
        raise IntakeComplaint(DAMAGED) from error


def _records(stream: bytes, place: int) -> Iterator[Record]:
    """The records from a place to the end of their block with their continuations; charts inside are passed over."""
    depth = 0
    while place + 4 <= len(stream):
        kind, length = struct.unpack_from("<HH", stream, place)
        pieces = [stream[place + 4 : place + 4 + length]]
        place += 4 + length
        while stream[place : place + 2] == b"\x3c\x00" and kind != _BEGIN:
            length = struct.unpack_from("<H", stream, place + 2)[0]
            pieces.append(stream[place + 4 : place + 4 + length])
            place += 4 + length
        if place > len(stream):
            raise IntakeComplaint(DAMAGED)
        if kind == _BEGIN:
            depth += 1
        elif kind == _END:
            depth -= 1
            if depth <= 0:
                return
        elif depth == 1:
            yield kind, pieces
    raise IntakeComplaint(DAMAGED)


class _Book:
    """What belongs to the whole workbook: its sheets, texts and styles."""

    def __init__(self, stream: bytes) -> None:
        self.sheets: list[tuple[str, int, bool]] = []
        self.texts: list[str] = []
        self.styles = Styles()
        fonts = 0
        for kind, pieces in _records(stream, 0):
            content = pieces[0]
            if kind == _LOCK:
                raise IntakeComplaint(LOCKED)
            if kind == _SINCE_1904:
                self.styles.since_1904 = content[:1] == b"\x01"
            elif kind == _FONT:
                # the number 4 is left out in the numbering of fonts
                if content[2] & 0x08:
                    self.styles.struck_fonts.add(fonts if fonts < 4 else fonts + 1)
                fonts += 1
            elif kind == _FORMAT:
                self.styles.codes[struct.unpack_from("<H", content)[0]] = _Pieces([content], 2).text(2)
            elif kind == _STYLE:
                font, code = struct.unpack_from("<HH", content)
                self.styles.styles.append((code, font))
            elif kind == _SHEET and content[5] == 0:
                place, state = struct.unpack_from("<IB", content)
                self.sheets.append((_Pieces([content], 6).text(1), place, state & 3 != 0))
            elif kind == _TEXTS:
                self.texts = _Pieces(pieces, 8).texts(struct.unpack_from("<4xI", content)[0])


class _SheetRecords:
    """The records of one sheet on their way into the builder."""

    def __init__(self, builder: SheetBuilder, book: _Book) -> None:
        self._builder = builder
        self._texts = book.texts
        self._styles = book.styles
        self._waiting: tuple[int, int, int] | None = None
        self._without_result: list[tuple[int, int]] = []
        self._formulas_with_result = False
        self._object = 0
        self._object_texts: dict[int, str] = {}

    def read(self, stream: bytes, place: int) -> Sheet:
        for kind, pieces in _records(stream, place):
            self._take(kind, pieces[0], pieces)
        if not self._formulas_with_result:
            for row, column in self._without_result:
                self._builder.put(row, column, Cell(_NO_RESULT, "formula"))
        return self._builder.sheet()

    def _take(self, kind: int, content: bytes, pieces: list[bytes]) -> None:
        if kind == _NUMBER:
            self._put_number(content, struct.unpack_from("<d", content, 6)[0])
        elif kind == _SHORT_NUMBER:
            self._put_number(content, _short_number(content, 6))
        elif kind == _SHORT_NUMBERS:
            self._put_numbers(content)
        elif kind == _TEXT_NUMBER:
            self._put_text(content, self._texts[struct.unpack_from("<I", content, 6)[0]])
        elif kind in (_TEXT, _RICH_TEXT):
            self._put_text(content, _Pieces(pieces, 6).text(2))
        elif kind == _TRUTH_OR_ERROR:
            self._put_truth_or_error(content, content[6], bool(content[7]))
        elif kind == _FORMULA:
            self._put_formula(content)
        elif kind == _FORMULA_TEXT and self._waiting:
            self._put(*self._waiting, Cell(shown_text(_Pieces(pieces, 0).text(2))))
            self._waiting = None
        elif kind in (_ROW, _COLUMNS, _MERGED):
            self._take_layout(kind, content)
        elif kind in (_OBJECT, _OBJECT_TEXT, _NOTE):
            self._take_comment(kind, content, pieces)

    def _take_layout(self, kind: int, content: bytes) -> None:
        if kind == _ROW:
            row, options = struct.unpack_from("<H10xI", content)
            if options & 0x20:
                self._builder.hidden_row_ranges.add((row, row))
        elif kind == _COLUMNS:
            first, last, options = struct.unpack_from("<HH4xH", content)
            if options & 1:
                self._builder.hidden_columns.add((first, min(last, 255)))
        else:
            for at in range(2, min(len(content), 2 + 8 * struct.unpack_from("<H", content)[0]) - 7, 8):
                first_row, last_row, first_column, _ = struct.unpack_from("<4H", content, at)
                if last_row > first_row:
                    self._builder.merged.add((first_row, last_row, first_column))

    def _take_comment(self, kind: int, content: bytes, pieces: list[bytes]) -> None:
        """A comment is a drawn object with a text, and a note that names the object and the cell."""
        if kind == _OBJECT:
            self._object = struct.unpack_from("<6xH", content)[0]
        elif kind == _OBJECT_TEXT and len(pieces) > 1:
            length = struct.unpack_from("<10xH", content)[0]
            self._object_texts[self._object] = _Pieces(pieces[1:], 0).characters(length)
        elif kind == _NOTE:
            row, column, _, number = struct.unpack_from("<4H", content)
            text = shown_text(self._object_texts.get(number, ""))[:80].strip()
            self._builder.comments.append((place_name(row, column), text))

    def _put(self, row: int, column: int, style: int, cell: Cell) -> None:
        self._builder.put(row, column, cell)
        if cell.text and self._styles.struck(style):
            self._builder.struck.append(place_name(row, column))

    def _put_number(self, content: bytes, number: float) -> None:
        row, column, style = struct.unpack_from("<3H", content)
        finite = number - number == 0
        self._put(row, column, style, self._styles.cell(number, style) if finite else Cell("#NUM!", "error"))

    def _put_numbers(self, content: bytes) -> None:
        row, column = struct.unpack_from("<HH", content)
        for at in range(4, len(content) - 7, 6):
            style = struct.unpack_from("<H", content, at)[0]
            self._put(row, column, style, self._styles.cell(_short_number(content, at + 2), style))
            column += 1

    def _put_text(self, content: bytes, text: str) -> None:
        row, column, style = struct.unpack_from("<3H", content)
        self._put(row, column, style, Cell(shown_text(text)))

    def _put_truth_or_error(self, content: bytes, value: int, is_error: bool) -> None:
        cell = Cell(_ERRORS.get(value, "#ERROR"), "error") if is_error else Cell(str(bool(value)).upper(), "boolean")
        row, column, style = struct.unpack_from("<3H", content)
        self._put(row, column, style, cell)

    def _put_formula(self, content: bytes) -> None:
        """The stored result: a number, or a mark in its place for text (which follows), truth, error or nothing."""
        result = content[6:14]
        if result[6:8] != b"\xff\xff":
            self._formulas_with_result = True
            if _sums_up(content):
                self._builder.summaries.add(struct.unpack_from("<HH", content))
            return self._put_number(content, struct.unpack("<d", result)[0])
        row, column, style = struct.unpack_from("<3H", content)
        if result[0] == 3:
            self._without_result.append((row, column))
            return None
        self._formulas_with_result = True
        if result[0] == 0:
            self._waiting = (row, column, style)
            return None
        return self._put_truth_or_error(content, result[2], result[0] == 2)


def _sums_up(content: bytes) -> bool:
    """True for a formula that is one function of one range above it in its own column ([MS-XLS] §2.5.198)."""
    row, column = struct.unpack_from("<HH", content)
    length = struct.unpack_from("<H", content, 20)[0] if len(content) > 33 else 0
    tokens = content[22 : 22 + length]
    if len(tokens) < 10 or tokens[0] & 0x1F != 0x05 or (len(tokens) - 9, tokens[9] & 0x1F) not in _FUNCTIONS:
        return False
    _, last_row, first_column, last_column = struct.unpack_from("<4H", tokens, 1)
    return first_column & 0x3FFF == last_column & 0x3FFF == column and last_row < row


def _short_number(content: bytes, place: int) -> float:
    """A number in four bytes: whole, or the upper half of a double; perhaps in hundredths ([MS-XLS] §2.5.217)."""
    packed = struct.unpack_from("<i", content, place)[0]
    half = struct.pack("<ii", 0, packed & ~3)
    number = float(packed >> 2) if packed & 2 else struct.unpack("<d", half)[0]
    return float(number / 100 if packed & 1 else number)


class _Pieces:
    """Texts out of a record and its continuations; letters that go on in the next piece begin with a new mark there."""

    def __init__(self, pieces: list[bytes], place: int) -> None:
        self._pieces = pieces
        self._number = 0
        self._place = place

    def texts(self, count: int) -> list[str]:
        """So many texts, one after the other."""
        return [self.text(2) for _ in range(min(count, sum(map(len, self._pieces))))]

    def text(self, length_bytes: int) -> str:
        """One text with its length before it; its fonts and pronunciation are passed over."""
        length = int.from_bytes(self._take(length_bytes), "little")
        marks = self._take(1)[0]
        fonts = int.from_bytes(self._take(2), "little") if marks & 8 else 0
        sounds = int.from_bytes(self._take(4), "little") if marks & 4 else 0
        text = self._letters(length, marks)
        self._pass_over(4 * fonts + sounds)
        return text

    def characters(self, length: int) -> str:
        """So many letters with the mark before them."""
        return self._letters(length, self._take(1)[0])

    def _letters(self, length: int, marks: int) -> str:
        letters = ""
        while True:
            width = 2 if marks & 1 else 1
            piece = self._pieces[self._number][self._place : self._place + (length - len(letters)) * width]
            self._place += len(piece)
            letters += piece.decode("utf-16-le" if width == 2 else "latin-1", "replace")
            if len(letters) >= length:
                return letters
            self._next_piece()
            marks = self._take(1)[0]

    def _take(self, count: int) -> bytes:
        if self._place >= len(self._pieces[self._number]):
            self._next_piece()
        content = self._pieces[self._number][self._place : self._place + count]
        if len(content) < count:
            raise IntakeComplaint(DAMAGED)
        self._place += count
        return content

    def _pass_over(self, count: int) -> None:
        while count > 0:
            left = len(self._pieces[self._number]) - self._place
            step = min(left, count)
            self._place += step
            count -= step
            if count:
                self._next_piece()

    def _next_piece(self) -> None:
        self._number += 1
        self._place = 0
        if self._number >= len(self._pieces):
            raise IntakeComplaint(DAMAGED)
