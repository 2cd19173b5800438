"""The columns that remain when nothing is chosen: without counters, times, labels and computed figures."""

from collections import Counter
from collections.abc import Sequence
from typing import Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.blocks import Block
from meanlab.intake.characters import shown
from meanlab.intake.numerals import under
from meanlab.intake.picked import NothingToRead, Picked
from meanlab.intake.roles import MOST_COLUMNS, Role, is_count, listed, replicates, sample_of
from meanlab.intake.separators import ChoiceNeeded
from meanlab.intake.table import parsed

MOST_CHOICES = 200
MOST_POOLED = 400
SPREAD = 1.25  # columns of one quantity, typed into a few lines, have medians within this factor


def remaining(block: Block, rows: Sequence[int], roles: list[Role], filtered: bool) -> Picked:
    """Return the one column of readings, or the readings beside each other.

    Raises NothingToRead where there is none, ChoiceNeeded where there are several.
    """
    if block.width > MOST_COLUMNS:
        raise IntakeComplaint(
            f"The table has {block.width:,} columns; at most {MOST_COLUMNS:,} are looked at. Choose one by its heading."
        )
    filled = [i for i, role in enumerate(roles) if role.role != "empty"]
    hidden = block.table.sheet.hidden_columns if block.table.sheet else frozenset()
    readings = [i for i, role in enumerate(roles) if role.role == "readings"]
    readings = [i for i in readings if i not in hidden] or readings or _last_resort(block, roles, filled)
    if len(readings) == 1:
        _ask_for_rows(block, rows, roles, readings[0], filtered)
        return Picked(block, rows, readings)
    across = replicates(block, roles)
    if across and across == readings and len(rows) == 1:
        return Picked(block, rows, across, notes=["The columns were read across the row as replicates."])
    if _is_pool(block, rows, readings, filled):
        note = f"{len(rows)} lines of numbers without a heading were read line by line as one set."
        return Picked(block, rows, readings, notes=[note], is_pool=True)
    raise _question(block, rows, roles, readings, across)


def _last_resort(block: Block, roles: list[Role], filled: list[int]) -> list[int]:
    """A lone column is read whatever it looks like; several counters and labels are asked for."""
    numeric = [i for i, role in enumerate(roles) if role.numbers]
    if len(filled) == 1 or (len(numeric) == 1 and roles[numeric[0]].role == "summary"):
        return numeric
    if any(roles[i].role in ("counter", "label", "summary", "preparation") for i in numeric):
        raise ChoiceNeeded(
            "No column is clearly the one with the readings: choose it.",
            [column.to_dict() for column in listed(block, roles) if column.count],
        )
    return []


def _is_pool(block: Block, rows: Sequence[int], readings: list[int], filled: list[int]) -> bool:
    """Tell whether bare numbers of one kind were typed into a few lines, to be read line by line."""
    table = block.table
    if (
        block.heading is not None
        or readings != filled
        or table.sheet is not None
        or table.separator not in (" ", ",", ";")
    ):
        return False
    cells = [(column, table.text(row, column)) for row in rows for column in readings if table.text(row, column)]
    if not 1 < len(readings) <= len(cells) <= MOST_POOLED:
        return False
    found = [(column, parsed(text)) for column, text in cells]
    if any(one.kind != "reading" or one.power for _, one in found) or _first_counts(block, rows):
        return False
    places = {len(one.numeral.replace(",", ".").partition(".")[2]) for _, one in found}
    middles = []
    for column in readings:
        sizes = sorted(
            float(under(one.numeral, ".") or under(one.numeral, ",") or 0) for c, one in found if c == column
        )
        middles.append(sizes[len(sizes) // 2])
    whole = places == {0} and table.separator != " "
    padded = any(one.numeral[0] == "0" and one.numeral[1:2].isdigit() for _, one in found)
    return len(places) == 1 and not whole and not padded and 0 < max(middles) <= SPREAD * min(middles)


def _first_counts(block: Block, rows: Sequence[int]) -> bool:
    texts = [block.table.text(row, 0) for row in rows]
    return all(text.isdigit() and text.isascii() for text in texts) and is_count(texts)


def _ask_for_rows(block: Block, rows: Sequence[int], roles: list[Role], column: int, filtered: bool) -> None:
    """Different analytes, or samples with replicates each, in one column are asked for, not pooled."""
    for index, role in enumerate(roles):
        if filtered or role.role not in ("analyte", "label") or index == column:
            continue
        counts = Counter(block.table.text(row, index) for row in sample_of(rows))
        groups = [text for text in counts if text]
        if len(groups) > 1 and (role.role == "analyte" or max(counts.values()) > 1):
            heading = block.heading_text(index)
            base = next(one.to_dict() for one in listed(block, roles) if one.column_index == column)
            raise ChoiceNeeded(
                f'The rows belong to {len(groups)} different entries under "{shown(heading)}": choose one.',
                [{**base, "where": {heading: text}, "rows": counts[text]} for text in groups[:MOST_CHOICES]],
            )


def _question(
    block: Block, rows: Sequence[int], roles: list[Role], readings: list[int], across: list[int]
) -> Exception:
    if not readings:
        return NothingToRead("No column holds readings: paste the readings, one a line, or choose another file.")
    choices = [column.to_dict() for column in listed(block, roles, rows) if column.column_index in readings]
    choices += _choices_across(block, rows, roles, across)
    if block.heading is None and len(rows) > 1 and max(len(readings), 1) <= MOST_CHOICES:
        choices.append({"sheet": block.table.name, "column": "", "columns": readings})
    names = ", ".join(f'"{shown(choice["column"])}"' for choice in choices[:6] if choice["column"])
    return ChoiceNeeded(
        f"{len(readings)} columns hold numbers{f' ({names})' if names else ''}: choose the one with the readings.",
        choices,
    )


def _choices_across(block: Block, rows: Sequence[int], roles: list[Role], across: list[int]) -> list[dict[str, Any]]:
    """Replicates across the row: one choice for each row, by its label."""
    label = next((i for i, role in enumerate(roles) if role.role in ("label", "text", "analyte", "counter")), None)
    if not across or label is None:
        return []
    columns, heading = [block.heading_text(i) for i in across], block.heading_text(label)
    return [
        {"sheet": block.table.name, "column": "", "columns": columns, "where": {heading: block.table.text(row, label)}}
        for row in rows[:MOST_CHOICES]
    ]
