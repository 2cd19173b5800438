"""Workbooks written as one XML text: the spreadsheet XML of 2003 (named .xls or .xml) and flat OpenDocument (.fods).

Source of the first: the schema urn:schemas-microsoft-com:office:spreadsheet; of the second: OpenDocument 1.3, part 3,
§3.1.2 (a document in a single XML file).
"""

from meanlab.intake.building import LAST_COLUMN, LAST_ROW, Room, SheetBuilder, place_name, shown_text
from meanlab.intake.grid import Cell, Sheet
from meanlab.intake.markup import Attributes, Walker, walk
from meanlab.intake.number_formats import GENERAL, NumberFormat
from meanlab.intake.ods import read_flat_ods

_SPREADSHEET_2003 = b"urn:schemas-microsoft-com:office:spreadsheet"
_FLAT_ODS = b"application/vnd.oasis.opendocument.spreadsheet"
_NAMED_FORMATS = {
    "Fixed": "0.00",
    "Standard": "#,##0.00",
    "Percent": "0.00%",
    "Scientific": "0.00E+00",
    "General Number": GENERAL,
}


def is_xml_workbook(data: bytes) -> bool:
    """True where the bytes begin like one of the two."""
    start = data[:8192]
    return start.lstrip(b"\xef\xbb\xbf \r\n\t").startswith(b"<") and (_SPREADSHEET_2003 in start or _FLAT_ODS in start)


def read_xml_workbook(data: bytes) -> tuple[Sheet, ...]:
    """All sheets of a workbook in one XML text; raises IntakeComplaint when it is damaged or too large."""
    if _FLAT_ODS in data[:8192]:
        return read_flat_ods(data)
    book = _Book()
    walk([data], book)
    return tuple(book.sheets)


class _Book(Walker):
    def __init__(self) -> None:
        self.sheets: list[Sheet] = []
        self._room = Room()
        self._builder: SheetBuilder | None = None
        self._formats: dict[str, NumberFormat] = {"": NumberFormat(GENERAL)}
        self._struck: set[str] = set()
        self._style = ""
        self._row = self._column = -1
        self._attributes: Attributes = {}
        self._kind = "String"
        self._pieces: dict[str, list[str]] = {}
        self._inside = ""

    def start(self, name: str, attributes: Attributes) -> None:
        plain = {key.rpartition(":")[2]: value for key, value in attributes.items()}
        if name == "Cell":
            self._column = _index(plain, self._column, LAST_COLUMN)
            self._attributes, self._kind, self._pieces = plain, "", {}
        elif name in ("Data", "Comment"):
            self._kind = plain.get("Type", "String") if name == "Data" else self._kind
            self._inside = name
            self._pieces[name] = []
        elif name == "Row":
            self._begin_row(plain)
        elif name == "Column" and self._builder:
            self._take_column(plain)
        elif name == "Worksheet":
            self._builder = SheetBuilder(plain.get("Name", ""), self._room)
            self._row = self._column = -1
        elif name == "Visible" or name in ("Style", "NumberFormat", "Font"):
            self._take_style(name, plain)

    def text(self, text: str) -> None:
        if self._inside:
            self._pieces[self._inside].append(text)

    def end(self, name: str) -> None:
        if name in ("Data", "Comment"):
            self._inside = ""
        elif name == "Cell" and self._builder:
            self._end_cell(self._builder)
        elif name == "Row":
            self._column = -1
        elif name == "Worksheet" and self._builder:
            self.sheets.append(self._builder.sheet())
            self._builder = None

    def _begin_row(self, attributes: Attributes) -> None:
        self._row = _index(attributes, self._row, LAST_ROW)
        self._column = -1
        if attributes.get("Hidden") == "1" and self._builder:
            self._builder.hidden_row_ranges.add((self._row, self._row))

    def _take_column(self, attributes: Attributes) -> None:
        self._column = _index(attributes, self._column, LAST_COLUMN)
        last = self._column + _count(attributes, "Span")
        if attributes.get("Hidden") == "1" and self._builder:
            self._builder.hidden_columns.add((self._column, last))
        self._column = last

    def _take_style(self, name: str, attributes: Attributes) -> None:
        if name == "Style":
            self._style = attributes.get("ID", "")
        elif name == "NumberFormat":
            code = attributes.get("Format", GENERAL)
            self._formats[self._style] = NumberFormat(_NAMED_FORMATS.get(code, code))
        elif name == "Font" and attributes.get("StrikeThrough") == "1":
            self._struck.add(self._style)

    def _end_cell(self, builder: SheetBuilder) -> None:
        cell = self._cell()
        style = self._attributes.get("StyleID", "")
        builder.put(self._row, self._column, cell)
        if cell.text and style in self._struck:
            builder.struck.append(place_name(self._row, self._column))
        if "Comment" in self._pieces:
            comment = shown_text("".join(self._pieces["Comment"]))[:80].strip()
            builder.comments.append((place_name(self._row, self._column), comment))
        down = _count(self._attributes, "MergeDown")
        if down:
            builder.merged.add((self._row, self._row + down, self._column))
        self._column += _count(self._attributes, "MergeAcross")

    def _cell(self) -> Cell:
        value = "".join(self._pieces.get("Data", ()))
        if not value and "Formula" in self._attributes:
            return Cell(shown_text(self._attributes["Formula"])[:60], "formula")
        if self._kind == "Number":
            return self._number(value)
        if self._kind == "DateTime":
            return Cell(shown_text(value.replace("T", " ").removesuffix(" 00:00:00.000")), "date")
        if self._kind == "Boolean":
            return Cell("TRUE" if value == "1" else "FALSE", "boolean")
        return Cell(shown_text(value), "error" if self._kind == "Error" else "text")

    def _number(self, value: str) -> Cell:
        try:
            number = float(value)
        except ValueError:
            return Cell(shown_text(value))
        if number - number != 0:
            return Cell(shown_text(value), "error")
        shown = self._formats.get(self._attributes.get("StyleID", ""), self._formats[""])
        return shown.cell(number)


def _index(attributes: Attributes, before: int, most: int) -> int:
    """Places count from 1 and are only written where one was left out."""
    return min(_count(attributes, "Index") - 1, most) if "Index" in attributes else before + 1


def _count(attributes: Attributes, name: str) -> int:
    text = attributes.get(name, "0")
    return int(text) if text.isascii() and text.isdigit() and len(text) < 8 else 0
