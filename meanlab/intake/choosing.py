"""Which cells are meant: the sheet, the column, the rows and the columns across that were chosen or remain."""

import unicodedata
from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.characters import one_spelling, shown
from meanlab.intake.separators import ChoiceNeeded
from meanlab.intake.roles import Role, is_count, listed, replicates, roles_of, sample_of
from meanlab.intake.table import Block, parsed, sort_of
from meanlab.intake.units import same_unit

MOST_CHOICES = 200


class NothingToRead(IntakeComplaint):
    """No column of the table holds a reading."""


@dataclass
class Picked:
    """The cells to be read, in reading order, and what goes with them."""

    block: Block
    rows: Sequence[int]
    columns: list[int]
    name: str | None = None
    unit: str | None = None
    qualifier: int | None = None
    preparation: int | None = None
    warnings: list[str] = field(default_factory=list)
    notes: list[str] = field(default_factory=list)


def pick(blocks: Sequence[Block], selection: Mapping[str, Any]) -> Picked:
    """Return the cells that a selection means, or that remain when nothing is chosen.

    Raises IntakeComplaint where nothing fits, ChoiceNeeded where several columns remain.
    """
    block = _block(blocks, selection)
    warnings = _other_blocks(blocks, block)
    rows = _rows(block, selection.get("where") or {})
    roles = roles_of(block, rows)
    _refuse_misaligned(block, rows, roles)
    if selection.get("columns"):
        columns = [find(block, wanted) for wanted in selection["columns"]]
        picked = Picked(block, rows, columns)
    elif selection.get("column") is not None or selection.get("column_index") is not None:
        picked = Picked(block, rows, [_chosen(block, selection)])
    else:
        picked = _remaining(block, rows, roles, bool(selection.get("where")))
    picked.warnings = [*warnings, *picked.warnings]
    _name_and_unit(picked, roles)
    _qualify(picked, roles, selection)
    if selection.get("preparation") is not None:
        picked.preparation = find(block, selection["preparation"])
    return picked


def _same(one: str, other: str) -> bool:
    return _key(one) == _key(other)


def _key(text: str) -> str:
    return "".join(unicodedata.normalize("NFKC", one_spelling(text)).split()).casefold()


def find(block: Block, wanted: str | int) -> int:
    """Return the place of the column with this heading, or with this number.

    Raises IntakeComplaint where there is none, or more than one.
    """
    if isinstance(wanted, int):
        if 0 <= wanted < block.width:
            return wanted
        raise IntakeComplaint(f"There is no column number {wanted + 1}: the table has {block.width} columns.")
    exact = [i for i in range(block.width) if block.heading_text(i).strip() == wanted.strip()]
    found = exact or [i for i in range(block.width) if block.heading_text(i) and _same(block.heading_text(i), wanted)]
    found = found or [i for i in range(block.width) if (name := block.heading_at(i).name) and _same(name, wanted)]
    if len(found) == 1:
        return found[0]
    if found:
        raise IntakeComplaint(
            f'{len(found)} columns have the heading "{shown(wanted)}": choose one by its place in the table.'
        )
    named = [f'"{shown(text)}"' for i in range(min(block.width, 60)) if (text := block.heading_text(i))]
    there = f"there are {', '.join(named[:12])}" if named else "the table has no headings"
    raise IntakeComplaint(f'There is no column "{shown(wanted)}"; {there}.')


def _chosen(block: Block, selection: Mapping[str, Any]) -> int:
    heading, index = selection.get("column"), selection.get("column_index")
    if index is None:
        return find(block, heading)
    if not isinstance(index, int) or not 0 <= index < block.width:
        raise IntakeComplaint(f"There is no column number {index}: the table has {block.width} columns, from 0 on.")
    if heading and block.heading is not None and not _same(block.heading_text(index), str(heading)):
        return find(block, heading)
    return index


def _block(blocks: Sequence[Block], selection: Mapping[str, Any]) -> Block:
    heading = selection.get("column")
    wanted = [heading, *(selection.get("columns") or ()), *(selection.get("where") or {})]
    wanted = [text for text in wanted if isinstance(text, str)]
    for block in reversed(blocks):
        if wanted and all(_has(block, text) for text in wanted):
            return block
    tables = [block for block in blocks if not _is_list_of_facts(block)] or list(blocks)
    most = max(len(block.data) for block in tables)
    return next(block for block in reversed(tables) if len(block.data) * 2 >= most)


def _has(block: Block, wanted: str) -> bool:
    return any(
        _same(block.heading_text(i), wanted) or _same(block.heading_at(i).name or "", wanted)
        for i in range(min(block.width, 5000))
        if block.heading_text(i)
    )


def _is_list_of_facts(block: Block) -> bool:
    """Tell whether a block is a preamble: each row a name and one fact, "Cell length (mm), 10"."""
    rows = [block.table.rows[row] for row in block.data[:50]]
    names = [cells[0] for cells in rows if cells]
    return (
        all(len([cell for cell in cells if cell]) == 2 and len(cells) == 2 for cells in rows)
        and len(set(names)) == len(names)
        and all(name[:1].isalpha() and not name[-1:].isdigit() for name in names)
    )


def _other_blocks(blocks: Sequence[Block], used: Block) -> list[str]:
    others = [block for block in blocks if block is not used and not _is_list_of_facts(block) and len(block.data) > 1]
    if not others:
        return []
    where = ", ".join(f"{block.table.place(block.data[0], 0)}" for block in others[:3])
    return [f"A further table from {where} on was not read: choose its column to read it."]


def _rows(block: Block, where: Mapping[str, Any]) -> Sequence[int]:
    rows = block.data
    for heading, value in where.items():
        column = find(block, heading)
        wanted = _key(str(value))
        rows = [row for row in rows if _key(block.table.text(row, column)) == wanted]
        if not rows:
            there = list(dict.fromkeys(block.table.text(row, column) for row in block.data[:1000]))[:8]
            raise IntakeComplaint(
                f'No row has "{shown(str(value))}" under "{shown(str(heading))}"; there are '
                + ", ".join(f'"{shown(text)}"' for text in there)
                + "."
            )
    return rows


def _refuse_misaligned(block: Block, rows: Sequence[int], roles: Sequence[Role]) -> None:
    """Rows with more fields than headings cannot be put under them: a comma as separator and decimal sign."""
    if block.heading is None or block.table.separator not in (",", ";", "\t", " "):
        return
    headings = len(block.table.rows[block.heading])
    sample = sample_of(rows)
    longer = [row for row in sample if len(block.table.rows[row]) > headings]
    if headings < 2 or len(longer) * 2 < len(sample):
        return
    row = longer[0]
    mark = {",": "comma", ";": "semicolon", "\t": "tab", " ": "blank"}[block.table.separator]
    why = " The comma may be both the separator and the decimal sign." if mark == "comma" else ""
    raise IntakeComplaint(
        f"The heading names {headings} columns, but {block.table.place(row, 0)} has {len(block.table.rows[row])} fields "
        f"parted by a {mark}, so no reading can be told for sure.{why} Export it again with tabs or semicolons."
    )


def _remaining(block: Block, rows: Sequence[int], roles: list[Role], filtered: bool) -> Picked:
    """The one column that remains when counters, times, labels and computed figures are taken away."""
    readings = [i for i, role in enumerate(roles) if role.role == "readings"]
    hidden = block.table.sheet.hidden_columns if block.table.sheet else frozenset()
    readings = [i for i in readings if i not in hidden] or readings
    filled = [i for i, role in enumerate(roles) if role.role != "empty"]
    if not readings:
        readings = _last_resort(block, roles, filled)
    if len(rows) == 1 and len(readings) > 1 and (block.heading is None or len(replicates(block, roles)) > 1):
        return _one_row(block, rows, readings, roles)
    if len(readings) == 1:
        _ask_for_rows(block, rows, roles, readings[0], filtered)
        return Picked(block, rows, readings)
    across = replicates(block, roles)
    if across == readings and filtered and len(rows) == 1:
        return Picked(block, rows, across, notes=["The columns were read across the row as replicates."])
    pooled = _pooled(block, rows, roles, readings, filled)
    if pooled:
        return pooled
    raise _ask(block, rows, roles, readings, across)


def _last_resort(block: Block, roles: list[Role], filled: list[int]) -> list[int]:
    """A lone column is read whatever it looks like; counters beside labels are not."""
    numeric = [i for i, role in enumerate(roles) if role.numbers]
    if len(filled) == 1 and numeric and roles[filled[0]].role in ("counter", "summary", "label", "readings", "time"):
        return numeric
    if len(numeric) == 1 and roles[numeric[0]].role == "summary":
        return numeric
    if numeric and any(roles[i].role in ("counter", "label", "summary") for i in numeric):
        raise ChoiceNeeded(
            "No column is clearly the one with the readings: choose it.",
            [column.to_dict() for column in listed(block, roles) if column.count],
        )
    return numeric if len(filled) == 1 else []


def _one_row(block: Block, rows: Sequence[int], readings: list[int], roles: list[Role]) -> Picked:
    """Readings beside each other on one row, perhaps behind the name of their quantity."""
    table, row = block.table, rows[0]
    sorts = [sort_of(table, row, column) for column in range(block.width)]
    named = sorts[0] == "text" and all(sort != "text" for sort in sorts[1 : readings[0]])
    picked = Picked(block, rows, [i for i, sort in enumerate(sorts) if sort and not (named and i == 0)])
    if named:
        picked.name = table.text(row, 0)
    return picked


def _pooled(
    block: Block, rows: Sequence[int], roles: list[Role], readings: list[int], filled: list[int]
) -> Picked | None:
    """A block of bare numbers of one kind, as somebody types them into a few lines, is read line by line."""
    if block.heading is not None or readings != filled or len(readings) < 2 or block.table.separator not in (" ", ","):
        return None
    cells = [(row, column) for row in rows for column in readings if block.table.text(row, column)]
    if len(cells) > 400 or block.table.sheet is not None:
        return None
    found = [parsed(block.table.text(row, column)) for row, column in cells]
    if any(one.kind != "reading" for one in found):
        return None
    places = {len(one.numeral.replace(",", ".").partition(".")[2]) for one in found}
    sizes = [sorted(float(_rough(one.numeral)) for (_, c), one in zip(cells, found, strict=True) if c == column) for column in readings]
    middles = [group[len(group) // 2] for group in sizes]
    if len(places) > 1 or min(middles) <= 0 or max(middles) > 1.25 * min(middles) or _first_counts(block, rows):
        return None
    return Picked(
        block, rows, readings, notes=[f"{len(rows)} lines of numbers without a heading were read line by line as one set."]
    )


def _rough(numeral: str) -> str:
    return "".join(one for one in numeral.replace(",", ".") if one.isdigit() or one == ".") if numeral.count(".") + numeral.count(",") < 2 else "0"


def _first_counts(block: Block, rows: Sequence[int]) -> bool:
    texts = [block.table.text(row, 0) for row in rows]
    return all(text.isdigit() for text in texts) and is_count(texts)


def _ask_for_rows(block: Block, rows: Sequence[int], roles: list[Role], column: int, filtered: bool) -> None:
    """Different analytes, or samples with replicates each, in one column are asked for, not pooled."""
    if filtered:
        return
    for index, role in enumerate(roles):
        if role.role not in ("analyte", "label") or index == column:
            continue
        counts = Counter(block.table.text(row, index) for row in sample_of(rows, 1))
        groups = [text for text in counts if text]
        repeated = max(counts.values()) > 1
        if len(groups) > 1 and (role.role == "analyte" or repeated):
            heading = block.heading_text(index)
            raise ChoiceNeeded(
                f'The rows belong to {len(groups)} different entries under "{shown(heading)}": choose one.',
                [
                    {**_choice(block, roles, column), "where": {heading: text}, "rows": counts[text]}
                    for text in groups[:MOST_CHOICES]
                ],
            )


def _choice(block: Block, roles: list[Role], column: int) -> dict[str, Any]:
    return next(one.to_dict() for one in listed(block, roles) if one.column_index == column)


def _ask(
    block: Block, rows: Sequence[int], roles: list[Role], readings: list[int], across: list[int]
) -> Exception:
    if not readings:
        return NothingToRead("No column holds readings: paste the readings, one a line, or choose another file.")
    choices = [column.to_dict() for column in listed(block, roles, rows) if column.column_index in readings]
    if across:
        label = next((i for i, role in enumerate(roles) if role.role in ("label", "text", "analyte")), None)
        headings = [block.heading_text(i) for i in across]
        for row in rows[:MOST_CHOICES] if label is not None else ():
            where = {block.heading_text(label or 0): block.table.text(row, label or 0)}
            choices.append({"sheet": block.table.name, "column": "", "columns": headings, "where": where})
    names = ", ".join(f'"{shown(choice["column"])}"' for choice in choices[:6] if choice["column"])
    return ChoiceNeeded(
        f"{len(readings)} columns hold numbers{f' ({names})' if names else ''}: choose the one with the readings.",
        choices[: MOST_CHOICES * 2],
    )


def _name_and_unit(picked: Picked, roles: Sequence[Role]) -> None:
    block = picked.block
    if len(picked.columns) == 1:
        heading = block.heading_at(picked.columns[0])
        picked.name, picked.unit = heading.name, heading.unit
    elif picked.name is not None:
        from meanlab.intake.heading import heading_of

        heading = heading_of(picked.name)
        picked.name, picked.unit = heading.name, heading.unit
    else:
        units = {block.heading_at(i).unit for i in picked.columns}
        picked.unit = units.pop() if len(units) == 1 else None
    _unit_column(picked, roles)


def _unit_column(picked: Picked, roles: Sequence[Role]) -> None:
    """The unit that stands in a column of its own; two units in the rows that are read stop the reading."""
    columns = [i for i, role in enumerate(roles) if role.role == "unit" and i not in picked.columns]
    if not columns:
        return
    behind = [i for i in columns if i > picked.columns[-1]]
    column = behind[0] if behind else columns[-1]
    texts = dict.fromkeys(picked.block.table.text(row, column) for row in picked.rows)
    units = [text for text in texts if text]
    if picked.unit:
        units.insert(0, picked.unit)
    odd = next((unit for unit in units if not same_unit(unit, units[0])), None)
    if odd:
        raise IntakeComplaint(
            f'Two units in the rows that are read: "{shown(units[0])}" and "{shown(odd)}". '
            "Choose rows of one unit, or write all readings in one unit."
        )
    picked.unit = picked.unit or (units[0] if units else None)


def _qualify(picked: Picked, roles: Sequence[Role], selection: Mapping[str, Any]) -> None:
    wanted = selection.get("qualifier_column")
    if wanted is not None:
        picked.qualifier = find(picked.block, wanted)
        return
    column = picked.columns[0]
    beside = [i for i, role in enumerate(roles) if role.role == "qualifier" and abs(i - column) <= 2]
    if len(picked.columns) == 1 and beside:
        picked.qualifier = min(beside, key=lambda i: abs(i - column))
        heading = picked.block.heading_text(picked.qualifier) or f"column {picked.qualifier + 1}"
        picked.warnings.append(
            f'The signs under "{shown(heading)}" were taken for the qualifiers of the readings: "<" makes a limit of one.'
        )
