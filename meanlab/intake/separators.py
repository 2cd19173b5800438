"""What parts the entries of a text: a tab, a semicolon, a bar, a comma, blanks, or only the ends of its lines."""

import re
from collections import Counter
from collections.abc import Sequence
from itertools import chain, pairwise
from typing import Any

from meanlab.intake.characters import one_spelling, shown
from meanlab.intake.heading import heading_of
from meanlab.intake.labels import take_apart
from meanlab.intake.lines import is_entry, sample
from meanlab.intake.table import parsed, sort_of_text

GAPS = re.compile(r"\s{2,}|\t")
_DIGIT = re.compile(r"\d")
_DECIMAL_COMMA = re.compile(r"\d,\d")
_COUNTED = re.compile(r"(\d{1,3}) \d{3}")
_IN_BRACKETS = re.compile(r"\[[^\[\]]*\]|\([^()]*\)")
_TWO_NUMBERS = re.compile(r"\d[^,]*[\s:±|][^,]*\d", re.ASCII)
_DECIMAL_WORD = re.compile(r"(?:^|\s)[(]?[-+<>≤≥±~]?\d+,\d+[*)%†]?(?=\s|$)", re.ASCII)
_CODE = re.compile(r"\d+[A-Za-z]", re.ASCII)
PAIRS = ",,"  # commas are both decimal signs and separators
_NUMBERS = ("number", "limit")


class ChoiceNeeded(Exception):
    """Something that can be read in several ways: the question, and what can be chosen."""

    def __init__(self, question: str, choices: Sequence[dict[str, Any]]) -> None:
        super().__init__(question)
        self.question, self.choices = question, tuple(choices)


def separator_of(lines: Sequence[str], decimal: str | None = None) -> str:
    r"""Return what parts the entries on the lines: "\t", ";", "|", ",", ", ", " ", PAIRS, or "" for one entry a line.

    Raises ChoiceNeeded where commas on a single line can be decimal signs or separators.

    >>> [separator_of([line]) for line in ("5,02", "5.02,5.04", "5,02, 5,04", "5,02 5,04", "12;14")]
    ['', ',', ', ', ' ', ';']
    """
    filled = [line.strip() for line in sample(lines) if line.strip()]
    if not filled:
        return ""
    if any("\t" in line for line in filled):
        return "\t"
    for mark in (";", "|"):
        if sum(mark in _IN_BRACKETS.sub("", line) for line in filled) * 2 >= len(filled):
            return mark
    entries = [line for line in filled if is_entry(line)]
    if any("," in line for line in filled):
        found = _comma(filled, decimal)
        if found:
            return found
    many = [line for line in filled if not is_entry(line) and _holds_numbers(line)]
    if many and len(many) >= len(entries) and _are_fields(filled, many):
        return " "
    return " " if len(entries) > 2 and _are_counted(entries) else ""


def _holds_numbers(line: str) -> bool:
    """Tell whether a line holds a number among other words, and is no slip of the keyboard."""
    fields = line.split()
    return len(fields) > 1 and not parsed(line).meant and any(sort_of_text(part) in _NUMBERS for part in fields)


def _are_fields(filled: list[str], many: list[str]) -> bool:
    """Tell whether blanks part the lines into fields of a table, and not a label from its entry or words of prose."""
    gaps = {len(GAPS.split(line)) for line in filled}
    if len(gaps) == 1 and max(gaps) > 1:
        return True
    labelled = [ways for line in many if (ways := take_apart(one_spelling(line)))]
    marked = [ways for ways in labelled if ways[0].sort in ("number", "stamp", "bullet")]
    several = _more_than_one_number(many)
    if len(marked) >= len(many) or (len(labelled) >= len(many) and not several):
        return False
    if all(sort_of_text(part) in (*_NUMBERS, "missing") for line in many for part in line.split()):
        return True
    return several and _of_one_width(many) and _end_in_numbers(many) and len(many[0]) < 2000


def _of_one_width(many: list[str]) -> bool:
    words = Counter(len(line.split()) for line in many)
    gaps = Counter(len(GAPS.split(line)) for line in many)
    return words.most_common(1)[0][1] * 2 > len(many) or (max(gaps) > 1 and gaps.most_common(1)[0][1] * 2 > len(many))


def _end_in_numbers(many: list[str]) -> bool:
    if len(many) < 2:
        return False
    last = [sort_of_text(line.split()[-1]) in (*_NUMBERS, "missing") for line in many]
    return sum(last) * 2 > len(many) or bool(GAPS.search(many[0]))


def _more_than_one_number(many: list[str]) -> bool:
    words = [[word for word in line.split() if not _CODE.fullmatch(word)] for line in many]
    counts = [sum(sort_of_text(word) in (*_NUMBERS, "stamp") for word in line) for line in words]
    return sum(count > 1 for count in counts) * 2 > len(many)


def _are_counted(entries: list[str]) -> bool:
    """Tell whether "1 234", "2 241", "3 228" are numbered lines and not thousands."""
    found = [_COUNTED.fullmatch(line) for line in entries]
    return [match[1] if match else "" for match in found] == [str(i) for i in range(1, len(found) + 1)]


def _comma(filled: list[str], decimal: str | None) -> str:
    """Return "," or ", " or PAIRS where commas part entries, "" where they belong to them."""
    data = [line for line in filled if _DIGIT.search(line)]
    several = [line for line in data if line.count(",") > 1 and ", " not in line]
    if several and sum(map(_breaks_numbers, several)) * 2 > len(several):
        return ""
    heading = _heading_fields(filled)
    is_quantity = len(heading) == 2 and heading_of(", ".join(heading)).unit in (heading[1], heading[1].strip("()"))
    under_heading = len(heading) > 1 and not is_quantity and not _is_comma_of_prose(filled, data)
    if len(filled) == 1 or (len(data) == 1 and not under_heading and data[0] == filled[-1]):
        return _comma_in_a_row(data[0] if data else filled[0], decimal)
    if any(_has_both_commas(line) for line in data) and not any(is_entry(line) for line in data):
        return ", "
    widths = Counter(line.count(",") + 1 for line in data)
    if under_heading:
        fitting = sum(times for width, times in widths.items() if width >= len(heading))
        if fitting * 2 >= len(data):
            return ","
    single = [line for line in data if line.count(",") == 1]
    if sum(_DECIMAL_WORD.search(line) is not None for line in single) * 2 > len(single) > 0:
        return ""
    return "," if _comma_by_rows(data) else ""


def _has_both_commas(line: str) -> bool:
    """Tell whether commas with and without a blank behind them stand on a line: "5,02, 5,04"."""
    return ", " in line and _DECIMAL_COMMA.search(line) is not None


def _is_comma_of_prose(filled: list[str], data: list[str]) -> bool:
    """Tell whether the comma of a heading belongs to its words: "Nitrat, gesamt [mg/l]" over "5,02"."""
    words = [line for line in filled if "," in line and line not in data and not _DIGIT.search(line)][-1:]
    words = words or [line for line in filled[:1] if not is_entry(line)]
    if not words or any(mark != ", " for mark in re.findall(r",\s?", words[0])) or any(", " in line for line in data):
        return False
    firsts = [line.split(",")[0].strip() for line in data if line not in words]
    return firsts != [str(i) for i in range(1, len(firsts) + 1)]


def _comma_by_rows(data: list[str]) -> bool:
    """Tell whether lines without a heading that says so hold several entries parted by commas."""
    commas = [line for line in data if "," in line]
    readable = sum(is_entry(line) for line in commas)
    if not commas or readable * 2 >= len(commas) or len(commas) * 2 < len(data):
        return False
    if sum(_is_list_by_blanks(line) for line in commas) * 2 > len(commas):
        return False
    most = Counter(line.count(",") for line in commas).most_common(1)[0][1]
    entries = all(sort_of_text(part.strip()) for line in commas for part in line.split(","))
    labelled = sum(bool(take_apart(one_spelling(line))) for line in commas)
    return (most * 2 >= len(commas) or entries) and labelled * 2 <= len(commas)


def _breaks_numbers(line: str) -> bool:
    """Tell whether commas cut a line through its numbers, so that they are decimal signs: "3,79  8,69  5,16"."""
    inner = line.split(",")[1:-1]
    return any(_TWO_NUMBERS.fullmatch(part) and sort_of_text(part.strip()) != "stamp" for part in inner)


def _is_list_by_blanks(line: str) -> bool:
    """Tell whether blanks part a line into entries with decimal commas: "1 5,02"."""
    parts = line.split()
    return len(parts) > 1 and all(is_entry(part) and part[-1] != "," for part in parts)


def _heading_fields(filled: list[str]) -> list[str]:
    """The fields of the line directly above the first line with numbers."""
    above: list[str] = []
    for line, following in pairwise(chain(filled, ("",))):
        fields = [part.strip() for part in line.split(",")]
        if any(sort_of_text(part) in _NUMBERS for part in fields):
            if above:
                return above
            continue
        above = fields if _DIGIT.search(following) else []
    return above


def _comma_in_a_row(line: str, decimal: str | None) -> str:
    """One line with commas: readings beside each other, decimal commas, or both."""
    if is_entry(line) or (line.count(",") == 1 and take_apart(one_spelling(line))):
        return ""
    if _is_list_by_blanks(line):
        return ""
    parts = [part.strip() for part in line.split(",")]
    if _has_both_commas(line):
        return ", " if all(is_entry(part) for part in line.split(", ")) or not all(map(is_entry, parts)) else ","
    numbers = [part for part in parts if sort_of_text(part) in _NUMBERS]
    whole = all(number.isdigit() for number in numbers) and ", " not in line
    if not whole or len(numbers) % 2 or decimal == ".":
        return "," if sum(sort_of_text(part) in (*_NUMBERS, "missing") for part in parts) > 1 else ""
    parts = numbers
    padded = any(len(part) > 1 and part[0] == "0" for part in parts[1::2])
    if decimal == "," or padded or (len(parts) > 2 and set(parts[::2]) == {"0"}):
        return PAIRS
    pairs = [f"{a},{b}" for a, b in zip(parts[::2], parts[1::2], strict=True)]
    raise ChoiceNeeded(
        f'The commas in "{shown(line)}" can be decimal signs or part whole numbers: choose the decimal sign.',
        [
            {"sheet": "", "column": "", "decimal": ",", "first": pairs[:3]},
            {"sheet": "", "column": "", "decimal": ".", "first": parts[:3]},
        ],
    )
