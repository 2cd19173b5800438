"""A text as a table: its lines, what parts the entries on them, and what stands before them."""

import csv
import re
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import chain
from typing import Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.characters import one_spelling, signs_for_names
from meanlab.intake.labels import Labelled, common_style, take_apart
from meanlab.intake.long_column import long_column
from meanlab.intake.table import Table, parsed, sort_of_text
from meanlab.intake.units import is_qualified_unit
from meanlab.intake.words import ERROR_CELLS, is_summary, plain_word

_LINE_END = re.compile(r"[\n\r\x0b\x0c\x1c-\x1e\x85\u2028\u2029]")
_COMMENT = re.compile(r"(?:#(?!\d)|//|;\s|!\s|%\s|--\s[A-Za-z])")
_LIST_HASH = re.compile(r"#\s?\d{1,6}[.):]?\s+\S")
_RULER = re.compile(r"[\s|:+=_-]{5,}|(?:[-=_]{2,}[\s|+]+)+[-=_]{2,}|[|+][-=_:|+\s]+[|+]")
_GAPS = re.compile(r"\s{2,}|\t")
_DIGIT = re.compile(r"\d")
_DECIMAL_COMMA_LIST = re.compile(r"\d,\d.*,\s|,\s.*\d,\d")
SAMPLE = 400
_ENTRIES = frozenset({"number", "limit", "missing", "word", "stamp"})
_SINGLE = frozenset({"lost power", "formula", "width", "infinite"})  # one entry, though it cannot be read


class ChoiceNeeded(Exception):  # noqa: N818
    """A text that can be read in several ways: the question and what can be chosen."""

    def __init__(self, question: str, choices: Sequence[dict[str, Any]]) -> None:
        super().__init__(question)
        self.question, self.choices = question, tuple(choices)


@dataclass
class _Lines:
    """Lines that are neither blank nor comments, with their numbers, and what was said about the others."""

    texts: list[str]
    numbers: list[int]
    notes: list[str] = field(default_factory=list)
    remarks: list[str] = field(default_factory=list)


def table_of(text: str, decimal: str | None = None) -> Table:
    """Return a text as a table.

    Raises IntakeComplaint for a text that is no table of entries, ChoiceNeeded where its commas have two meanings.
    """
    if "&" in text:
        text = signs_for_names(text)
    column = long_column(text)
    if column is not None:
        return Table(column, range(1, len(column) + 1))
    if '"' in text:
        quoted = _quoted(text)
        if quoted is not None:
            return quoted
    lines = _lines_of(text)
    separator = _separator(lines.texts, decimal)
    if separator in ("\t", ";", ","):
        rows: list[list[str]] = [_stripped(line.split(separator)) for line in lines.texts]
    elif separator == ", ":
        rows = [_stripped(re.split(r",\s+|,$", line)) for line in lines.texts]
    elif separator == "|":
        rows = [_stripped(line.strip().strip("|").split("|")) for line in lines.texts]
    elif separator == " ":
        rows = _by_blanks(lines.texts)
    elif separator == ",,":
        rows = [_pairs(line) for line in lines.texts]
        lines.remarks.append("Commas are both decimal signs and separators: each pair was read as one number.")
    else:
        return _one_a_line(lines)
    return Table(rows, lines.numbers, None, separator.strip() or " ", tuple(lines.remarks), tuple(lines.notes))


def _stripped(cells: list[str]) -> list[str]:
    cells = [cell.strip() for cell in cells]
    while cells and not cells[-1]:
        cells.pop()
    return cells


def split_lines(text: str) -> list[str]:
    """Return the lines of a text, whatever ends them."""
    text = text.replace("\r\n", "\n")
    if "\r" not in text and text.isascii() and "\x0b" not in text and "\x0c" not in text and "\x1c" not in text:
        return text.split("\n")
    return _LINE_END.split(text)


def _lines_of(text: str) -> _Lines:
    raw = split_lines(text)
    found = _Lines(raw, list(range(1, len(raw) + 1)))
    if not any(mark in text for mark in ("#", "//", ";", "!", "%", "--", "==", "__")):
        return found
    numbered = sum(bool(_LIST_HASH.match(line.strip())) for line in raw[:SAMPLE])
    kept = [i for i, line in enumerate(raw) if not _is_comment(line.strip(), numbered > 1)]
    left = [i for i in set(range(len(raw))) - set(kept) if raw[i].strip() and not _RULER.fullmatch(raw[i].strip())]
    hidden = [i for i in left if sort_of_text(raw[i].strip().lstrip("#/;!% ")) in ("number", "limit")]
    found = _Lines([raw[i] for i in kept], [i + 1 for i in kept])
    if hidden:
        where = ", ".join(f'line {i + 1} "{raw[i].strip()[:40]}"' for i in sorted(hidden)[:5])
        found.remarks.append(f"Numbers behind a comment sign were not read: {where}.")
    elif left:
        found.notes.append(f"{len(left)} comment {'line was' if len(left) == 1 else 'lines were'} not read.")
    return found


def _is_comment(line: str, numbered: bool) -> bool:
    if not line:
        return False
    if _RULER.fullmatch(line) and not set(line) <= {"+"}:
        return True
    if line[0] == "#":
        if plain_word(line) in ERROR_CELLS or set(line) == {"#"} or "\t" in line:
            return False
        return not (numbered and _LIST_HASH.match(line))
    return bool(_COMMENT.match(line)) and not (line[0] == "%" and len(line) < 20 and ";" in line)


def _separator(lines: Sequence[str], decimal: str | None) -> str:
    """Return what parts the entries: a tab, semicolon, bar, comma, blank, or "" for one entry a line."""
    filled = [line.strip() for line in _sample(lines) if line.strip()]
    if not filled:
        return ""
    if any("\t" in line for line in filled):
        return "\t"
    for mark in (";", "|"):
        if sum(mark in line for line in filled) * 2 >= len(filled):
            return mark
    entries = [line for line in filled if _is_entry(line)]
    if any("," in line for line in filled):
        found = _comma(filled, entries, decimal)
        if found:
            return found
    labelled = [line for line in filled if not _is_entry(line) and take_apart(one_spelling(line))]
    many = [line for line in filled if not _is_entry(line) and _holds_numbers(line)]
    if many and len(many) >= len(entries) and _blank_table(filled, many, labelled, entries):
        return " "
    return " " if len(entries) > 2 and _counted_by_blank(entries) else ""


def _sample(lines: Sequence[str]) -> list[str]:
    if len(lines) <= 2 * SAMPLE:
        return list(lines)
    step = len(lines) // SAMPLE
    return [*lines[:SAMPLE], *lines[SAMPLE::step]]


def _is_entry(line: str) -> bool:
    """Tell whether a line is one entry as it stands."""
    return sort_of_text(line) in _ENTRIES or parsed(line).sort in _SINGLE


def _holds_numbers(line: str) -> bool:
    """Tell whether a line holds two numbers or more, or a number behind text, parted by blanks."""
    fields = line.split()
    return sum(sort_of_text(part) in ("number", "limit") for part in fields) >= 1 and len(fields) > 1


def _blank_table(filled: list[str], many: list[str], labelled: list[str], entries: list[str]) -> bool:
    numbered = [line for line in labelled if take_apart(one_spelling(line))[0].sort in ("number", "stamp", "bullet")]
    if len(numbered) >= len(many) or (len(labelled) >= len(many) and not _more_than_one_number(many)):
        return False
    widths = Counter(len(line.split()) for line in many)
    gaps = Counter(len(_GAPS.split(line)) for line in many)
    same = widths.most_common(1)[0][1] * 2 > len(many) or (max(gaps) > 1 and gaps.most_common(1)[0][1] * 2 > len(many))
    numbers = all(sort_of_text(part) in ("number", "limit", "missing") for line in many for part in line.split())
    return (same and _more_than_one_number(many) and len(many[0]) < 2000 and _tabular(many)) or numbers


def _tabular(many: list[str]) -> bool:
    """Tell whether lines are rows of a table and no sentences: a number in the same field of most of them."""
    if len(many) < 2:
        return False
    last = [sort_of_text(line.split()[-1]) in ("number", "limit", "missing") for line in many]
    return sum(last) * 2 > len(many) or bool(_GAPS.search(many[0]))


def _more_than_one_number(many: list[str]) -> bool:
    counts = [sum(sort_of_text(part) in ("number", "limit", "stamp") for part in line.split()) for line in many]
    return sum(count > 1 for count in counts) * 2 > len(many)


_COUNTED = re.compile(r"(\d{1,3}) \d{3}")


def _counted_by_blank(entries: list[str]) -> bool:
    """Tell whether "1 234", "2 241", "3 228" are numbered lines and not thousands."""
    found = [_COUNTED.fullmatch(line) for line in entries]
    return [match[1] if match else "" for match in found] == [str(i) for i in range(1, len(found) + 1)]


def _comma(filled: list[str], entries: list[str], decimal: str | None) -> str:
    """Return "," or ", " where commas part entries, "" where they belong to them."""
    data = [line for line in filled if _DIGIT.search(line)]
    if len(filled) == 1 or (data and len(data) == 1 and data[0] == filled[-1] and len(filled) < 3):
        return _comma_in_a_row(data[0] if data else filled[0], decimal)
    if any(_DECIMAL_COMMA_LIST.search(line) for line in data) and not any(_is_entry(line) for line in data):
        return ", "
    heading = _heading_fields(filled)
    counts = Counter(line.count(",") + 1 for line in data)
    if len(heading) > 1 and not (len(heading) == 2 and is_qualified_unit(heading[1])):
        fitting = sum(times for width, times in counts.items() if width >= len(heading))
        if fitting * 2 >= len(data):
            return ","
    commas = [line for line in data if "," in line]
    readable = [line for line in commas if _is_entry(line)]
    if commas and len(readable) * 2 < len(commas) and len(commas) * 2 >= len(data):
        most = Counter(line.count(",") for line in commas).most_common(1)[0][1]
        if most * 2 >= len(commas) or all(sort_of_text(part.strip()) for line in commas for part in line.split(",")):
            return "," if not _labelled_commas(commas) else ""
    return ""


def _labelled_commas(lines: list[str]) -> bool:
    """Tell whether each line is a label and one entry with a decimal comma: "Rep 1 5,01"."""
    return sum(bool(take_apart(one_spelling(line))) for line in lines) * 2 > len(lines)


def _heading_fields(filled: list[str]) -> list[str]:
    """The fields of the line directly above the first run of lines with numbers."""
    above: list[str] = []
    for line, following in zip(filled, chain(filled[1:], ("",)), strict=True):
        fields = [part.strip() for part in line.split(",")]
        if any(sort_of_text(part) in ("number", "limit") for part in fields):
            if above:
                return above
            continue
        above = fields if _DIGIT.search(following) else []
    return above


def _comma_in_a_row(line: str, decimal: str | None) -> str:
    """One line with commas: readings beside each other, decimal commas, or both."""
    if _is_entry(line) or take_apart(one_spelling(line)) and "," in line and line.count(",") == 1:
        return ""
    if all(_is_entry(part) for part in line.split()):
        return ""
    parts = [part.strip() for part in line.split(",")]
    if ", " in line and _DECIMAL_COMMA_LIST.search(line):
        return ", "
    whole = all(part.isdigit() for part in parts if part)
    if not whole or len(parts) % 2 or ", " in line or decimal == ".":
        return "," if sum(sort_of_text(part) in ("number", "limit", "missing") for part in parts) > 1 else ""
    if decimal == "," or any(len(part) > 1 and part[0] == "0" for part in parts[1::2]):
        return ",,"
    raise ChoiceNeeded(
        f'The commas in "{line[:40]}" can be decimal signs or part whole numbers: choose the decimal sign.',
        [
            {"sheet": "", "column": "", "decimal": ",", "first": [f"{a},{b}" for a, b in _in_twos(parts)][:3]},
            {"sheet": "", "column": "", "decimal": ".", "first": parts[:3]},
        ],
    )


def _in_twos(parts: list[str]) -> list[tuple[str, str]]:
    return list(zip(parts[::2], parts[1::2], strict=True))


def _pairs(line: str) -> list[str]:
    parts = [part.strip() for part in line.split(",")]
    return [f"{whole},{rest}" for whole, rest in _in_twos(parts)] if len(parts) % 2 == 0 else parts


def _by_blanks(lines: Sequence[str]) -> list[list[str]]:
    """Fields parted by blanks, by wide gaps, or by gutters that run through all lines."""
    filled = [line for line in lines if line.strip()]
    plain = Counter(len(line.split()) for line in filled)
    if len(plain) == 1:
        return [line.split() for line in lines]
    gaps = Counter(len(_GAPS.split(line.strip())) for line in filled)
    if len(gaps) == 1 and max(gaps) > 1:
        return [_GAPS.split(line.strip()) if line.strip() else [] for line in lines]
    cuts = _gutters(filled)
    if cuts:
        return [
            _stripped([line[a:b] for a, b in zip([0, *cuts], [*cuts, len(line)], strict=True)]) if line.strip() else []
            for line in lines
        ]
    return [line.split() for line in lines]


def _gutters(lines: list[str]) -> list[int]:
    """Places where at least two blanks stand in every line; [] where the lines have none in common."""
    wide = max(map(len, lines))
    if wide > 2000 or len(lines) < 2:
        return []
    blank = [all(len(line) <= place or line[place] == " " for line in lines) for place in range(wide)]
    cuts = [place for place in range(1, wide - 1) if blank[place] and not blank[place + 1] and blank[place - 1]]
    return cuts if any(not all(blank[:cut]) for cut in cuts) else []


def _one_a_line(lines: _Lines) -> Table:
    """One entry a line, perhaps with a list number, a time or a sample code before it."""
    texts = [line.strip() for line in lines.texts]
    sample = [text for text in dict.fromkeys(_sample(texts)) if text]
    apart: dict[str, list[Labelled]] = {
        text: take_apart(one_spelling(text)) for text in sample if not _is_entry(text) or text[0] in "([#*•"
    }
    plain = sum(_is_entry(text) for text in sample) - sum(map(bool, apart.values()))
    style = common_style(list(apart.values()), max(plain, 0))
    summary = any(way.sort == "summary" for ways in apart.values() for way in ways)
    rows = [[text] if text else [] for text in texts]
    labels: dict[int, str] = {}
    if style or summary:
        for row, text in enumerate(texts):
            way = _way(text, style)
            if way is not None:
                labels[row] = way.label
                rows[row] = [way.label, way.entry] if way.sort == "summary" else [way.entry]
    notes = list(lines.notes)
    if style:
        notes.append(_STYLES[style])
    return Table(rows, lines.numbers, None, "", tuple(lines.remarks), tuple(notes), labels)


_STYLES = {
    "number": "The numbers at the beginning of the lines were taken for list numbers.",
    "stamp": "The times at the beginning of the lines were taken for the order of the readings, not for readings.",
    "label": "The words before the readings were taken for labels.",
    "bullet": "The marks at the beginning of the lines were taken for list marks.",
}


def _way(text: str, style: str) -> Labelled | None:
    if not text or (_is_entry(text) and text[0] not in "([#*•"):
        return None
    for way in take_apart(one_spelling(text)):
        if way.sort in (style, "summary"):
            return way
    return None


def _quoted(text: str) -> Table | None:
    """A text with quoted fields; None where the quotes are no quotes of fields."""
    flat = re.sub(r'"(?:[^"]|"")*"', '"Q"', text)
    sample = [line for line in _sample(split_lines(flat)) if line.strip()]
    marks = {mark: sum(mark in line for line in sample) for mark in ("\t", ";", ",")}
    separator = next((mark for mark in marks if marks[mark] * 2 >= len(sample)), "")
    starts = re.compile(r'(?:^|[\n\r\t;,])\s*"')
    if not starts.search(text):
        return None
    try:
        reader = csv.reader(_terminated(text), delimiter=separator or "\t", skipinitialspace=True)
        rows, numbers = [], []
        line = 1
        for cells in reader:
            rows.append(_stripped(cells))
            numbers.append(line)
            line = reader.line_num + 1
    except csv.Error as error:
        raise IntakeComplaint("The text has a quotation mark that is never closed, or a field too long to be read.") from error
    if any(cell.count("\n") > 8 for cells in rows for cell in cells):
        return None
    if not separator and all(len(cells) < 2 for cells in rows):
        return _one_a_line(_Lines([cells[0] if cells else "" for cells in rows], numbers))
    return Table(rows, numbers, None, separator)


def _terminated(text: str) -> list[str]:
    return [line + "\n" for line in split_lines(text)]
