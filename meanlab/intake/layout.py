"""A text as a table: its lines cut into fields, or one entry a line with what stands before it taken off."""

import csv
import re
from collections import Counter
from collections.abc import Sequence

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.characters import one_spelling, shown, signs_for_names
from meanlab.intake.groups import without_group_lines
from meanlab.intake.labels import Labelled, common_style, quickly_apart, take_apart
from meanlab.intake.lines import Lines, is_entry, lines_of, sample, split_lines
from meanlab.intake.long_column import OneColumn, long_column
from meanlab.intake.roles import is_label_word
from meanlab.intake.separators import GAPS, PAIRS, separator_of
from meanlab.intake.table import Table, parsed

_FIELD_IN_QUOTES = re.compile(r'"(?:[^"]|"")*"')
_QUOTE_BEGINS_FIELD = re.compile(r'(?:^|[\n\r\t;,])\s*"')
_STYLES = {
    "number": "The numbers at the beginning of the lines were taken for list numbers.",
    "stamp": "The times at the beginning of the lines were taken for the order of the readings, not for readings.",
    "label": "The words before the readings were taken for labels.",
    "dash": "The numbers at the beginning of the lines were taken for list numbers.",
    "bullet": "The marks at the beginning of the lines were taken for list marks.",
}
_NAME_OF_LIST = re.compile(
    r"([^\W\d_][^:=,;\t\d]{0,40}?(?:\([^()]*\)|\[[^\[\]]*\])?)\s*(?:[:=]|<-)\s*(?=[-+<>≤≥−]?\s?[.\d]|c?[\[({])"
)
_BRACKETS = re.compile(r"c?[\[({]([^\[\](){}±]*)[\])}];?")
_AND = re.compile(r",?\s+(?:and|und|et|&|/)\s+")
_RUNNING_MARK = re.compile(r"[\s_.#:-]*\d*[A-Za-z]?$")
MOST_WIDTH = 2000
MOST_LIST = 1_000_000


def table_of(text: str, decimal: str | None = None) -> Table:
    """Return a text as a table.

    Raises IntakeComplaint for a text that is no table of entries, ChoiceNeeded where its commas have two meanings.
    """
    if "&" in text:
        text = signs_for_names(text)
    column = long_column(text)
    if column is not None:
        return Table(column, range(1, len(column) + 1))
    if text.count('"') > 1 and text.count('"') % 2 == 0 and _QUOTE_BEGINS_FIELD.search(text):
        quoted = _quoted(text)
        if quoted is not None:
            return quoted
    text, named = _list_on_one_line(text)
    lines = lines_of(text)
    separator = separator_of(lines.texts, decimal)
    if not separator:
        return _one_a_line(lines)
    if separator == PAIRS:
        lines.remarks.append("Commas are both decimal signs and separators: each pair was read as one number.")
    rows = _by_blanks(lines.texts) if separator == " " else [_fields(line, separator) for line in lines.texts]
    rows = [_without_labels(rows[0])] if len(rows) == 1 else rows
    mark = "," if separator in (", ", PAIRS) else separator
    return Table(rows, lines.numbers, None, mark, tuple(lines.remarks), tuple(lines.notes), named)


def _list_on_one_line(text: str) -> tuple[str, str]:
    """Return a list on one line without its brackets and its name: "Nitrate: 5.02, 5.04", "x = [5.02, 5.04]"."""
    bare = text.strip()
    if "\n" in bare or "\r" in bare or len(bare) > MOST_LIST:
        return text, ""
    name = _NAME_OF_LIST.match(bare)
    inside = bare[name.end() :] if name else bare
    brackets = _BRACKETS.fullmatch(inside)
    inside = brackets[1] if brackets else inside
    if not name and not brackets and _AND.search(inside):
        listed = _AND.sub(", ", inside)
        return (listed, "") if all(is_entry(part.strip()) for part in listed.split(", ")) else (text, "")
    if (not name and not brackets) or not any(mark in inside.strip() for mark in ",; \t|"):
        return text, ""
    return (inside, name[1].strip() if name else "") if separator_of([inside], ".") else (text, "")


def _without_labels(cells: list[str]) -> list[str]:
    """Entries beside each other without the labels before them: "Rep1=5.02", "Rep2=5.04"."""
    apart = [[] if not cell or is_entry(cell) else take_apart(one_spelling(cell)) for cell in cells]
    labelled = sum(bool(ways) and ways[0].sort in ("label", "number") for ways in apart)
    if not labelled or labelled + sum(map(is_entry, cells)) < len(list(filter(None, cells))):
        return cells
    if labelled == 1 and apart[0]:
        return [apart[0][0].label, apart[0][0].entry, *cells[1:]]
    return [ways[0].entry if ways else cell for cell, ways in zip(cells, apart, strict=True)]


def _fields(line: str, separator: str) -> list[str]:
    if separator == ", ":
        return [cell.strip() for cell in re.split(r",\s+|,$", line)]
    if separator == PAIRS:
        return _in_pairs([cell.strip() for cell in line.split(",")])
    return [cell.strip() for cell in (line.strip().strip("|") if separator == "|" else line).split(separator)]


def _in_pairs(parts: list[str]) -> list[str]:
    """Whole numbers two by two as numbers with a decimal comma; what is no number stays."""
    found: list[str] = []
    open_half = False
    for part in parts:
        joins = open_half and part.isdigit()
        if joins:
            found[-1] += f",{part}"
        else:
            found.append(part)
        open_half = part.isdigit() and not joins
    return found


def _by_blanks(lines: Sequence[str]) -> list[list[str]]:
    """Fields parted by single blanks, by wide gaps, or by gutters that run through all lines."""
    filled = [line for line in lines if line.strip()]
    gaps = Counter(len(GAPS.split(line.strip())) for line in filled)
    by_gaps = len(gaps) == 1 and max(gaps) > 1
    if len({len(line.split()) for line in filled}) == 1 and not (by_gaps and _has_phrases(filled)):
        return [line.split() for line in lines]
    if by_gaps:
        return [GAPS.split(line.strip()) if line.strip() else [] for line in lines]
    cuts = _gutters(filled)
    if not cuts:
        return [line.split() for line in lines]
    return [[line[a:b].strip() for a, b in zip([0, *cuts], [*cuts, None], strict=True)] for line in lines]


def _has_phrases(lines: list[str]) -> bool:
    """Tell whether wide gaps part fields of several words, "QC 2  5.02"."""
    fields = [field for line in sample(lines) for field in GAPS.split(line.strip())]
    return any(" " in field and not all(is_entry(word) for word in field.split()) for field in fields)


def _gutters(lines: list[str]) -> list[int]:
    """Places where fields of a fixed width begin: behind blanks that run through all lines."""
    wide = max(map(len, lines))
    if wide > MOST_WIDTH or not 2 <= len(lines) <= 20_000:
        return []
    blank = [all(len(line) <= place or line[place] == " " for line in lines) for place in range(wide)]
    return [place for place in range(1, wide - 1) if blank[place] and not blank[place + 1] and not all(blank[:place])]


def _one_a_line(lines: Lines) -> Table:
    """One entry a line, perhaps with a list number, a time or a sample code before it."""
    lines, preparations = without_group_lines(lines)
    texts = [line.strip() for line in lines.texts]
    looked_at = [text for text in dict.fromkeys(sample(texts)) if text]
    apart: dict[str, list[Labelled]] = {text: take_apart(one_spelling(text)) for text in looked_at if _may_begin(text)}
    plain = sum(is_entry(text) and not apart.get(text) for text in looked_at)
    style = common_style(list(apart.values()), plain)
    names: set[str] = set()
    rows: Sequence[Sequence[str]] = OneColumn(texts)
    if style or any(way.sort == "summary" for ways in apart.values() for way in ways):
        rows, names = _taken_apart(texts, style)
    name = next(iter(names)) if len(names) == 1 else ""
    if style == "label" and len({_stem(label) for label in names}) > 1:
        some = ", ".join(f'"{shown(label)}"' for label in sorted(names)[:5])
        lines.remarks.append(f"The readings carry different names ({some}): be sure that they are of one quantity.")
    notes = [*lines.notes, *([_STYLES[style]] if style and not name else [])]
    return Table(rows, lines.numbers, None, "", tuple(lines.remarks), tuple(notes), name, preparations)


def _taken_apart(texts: list[str], style: str) -> tuple[list[list[str]], set[str]]:
    """Rows without what stands before the entries, and the names that stand there."""
    names: set[str] = set()
    rows: list[list[str]] = []
    for text in texts:
        way = _way(text, style)
        rows.append([text] if text and way is None else [])
        if way is not None:
            rows[-1] = [way.label, way.entry] if way.sort == "summary" else [way.entry]
            names |= {way.label} if way.sort == "label" else set()
    if style == "label" and rows:
        rows[0] = _without_label_word(rows[0])
    return rows, names


def _stem(label: str) -> str:
    """A label without its running number or letter: "QC-1" and "QC-2" have one stem, "pH" and "Temp" have two."""
    return _RUNNING_MARK.sub("", label).casefold()


def _without_label_word(cells: list[str]) -> list[str]:
    """The heading over labelled readings without the heading of the labels: "Sample Nitrate" over "QC-1 5.02"."""
    words = cells[0].split() if cells else []
    return [" ".join(words[1:])] if len(words) > 1 and is_label_word(words[0]) else cells


def _may_begin(text: str) -> bool:
    """Tell whether something may stand before the entry of a line."""
    return text[0] in "([#*•" or not is_entry(text) or parsed(text).sort == "span"


def _way(text: str, style: str) -> Labelled | None:
    quick = quickly_apart(text, style)
    if quick is not None or not text:
        return quick
    if not _may_begin(text):
        return None
    return next((way for way in take_apart(one_spelling(text)) if way.sort in (style, "summary")), None)


def _quoted(text: str) -> Table | None:
    """A text with quoted fields; None where the quotes are no quotes of fields."""
    flat = [line for line in sample(split_lines(_FIELD_IN_QUOTES.sub('"Q"', text))) if line.strip()]
    separator = next((mark for mark in "\t;," if sum(mark in line for line in flat) * 2 >= len(flat)), "")
    reader = csv.reader([line + "\n" for line in split_lines(text)], delimiter=separator or "\t", skipinitialspace=True)
    rows: list[list[str]] = []
    numbers: list[int] = []
    line = 1
    try:
        for cells in reader:
            rows.append([cell.strip() for cell in cells])
            numbers.append(line)
            line = reader.line_num + 1
    except csv.Error as error:
        raise IntakeComplaint(
            f"Line {line}: the text between two quotation marks is too long to be one entry. Take the marks away."
        ) from error
    if any(cell.count("\n") > 8 for cells in rows for cell in cells):
        return None
    if not separator and all(len(cells) < 2 for cells in rows):
        return _one_a_line(Lines([cells[0] if cells else "" for cells in rows], numbers))
    return Table(rows, numbers, None, separator)
