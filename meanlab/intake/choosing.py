"""Which cells are meant: the block, the rows and the columns that were chosen, or that remain."""

import unicodedata
from collections.abc import Mapping, Sequence
from typing import Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.beside import with_what_stands_beside
from meanlab.intake.blocks import Block
from meanlab.intake.characters import one_spelling, shown
from meanlab.intake.picked import Picked
from meanlab.intake.remaining import remaining
from meanlab.intake.roles import listed, roles_of, sample_of
from meanlab.intake.separators import ChoiceNeeded
from meanlab.intake.table import filled_width

MOST_NAMED = 12
_MARKS = {",": "comma", ";": "semicolon", "\t": "tab", " ": "blank"}


def pick(blocks: Sequence[Block], selection: Mapping[str, Any]) -> Picked:
    """Return the cells that a selection means, or that remain when nothing is chosen.

    Raises IntakeComplaint where nothing fits, ChoiceNeeded where several columns remain.
    """
    block = _block(blocks, selection)
    rows = _rows(block, selection.get("where") or {})
    _refuse_misaligned(block, rows)
    roles = roles_of(block, rows)
    if selection.get("columns"):
        picked = Picked(block, rows, [find(block, wanted) for wanted in selection["columns"]])
    elif selection.get("column") is not None or selection.get("column_index") is not None:
        picked = Picked(block, rows, [_chosen(block, selection)])
    else:
        picked = remaining(block, rows, roles, bool(selection.get("where")))
    picked.warnings[:0] = _other_blocks(blocks, block)
    if selection.get("qualifier_column") is not None:
        picked.qualifier = find(block, selection["qualifier_column"])
    if selection.get("preparation") is not None:
        picked.preparation, picked.is_chosen = find(block, selection["preparation"]), True
    picked.roles = roles
    return with_what_stands_beside(picked, roles)


def _key(text: str) -> str:
    return "".join(unicodedata.normalize("NFKC", one_spelling(text)).split()).casefold()


def _same(one: str, other: str) -> bool:
    return _key(one) == _key(other)


def find(block: Block, wanted: Any) -> int:
    """Return the place of the column with this heading, or with this number (from 0).

    Raises IntakeComplaint where there is none, or more than one.
    """
    if isinstance(wanted, int):
        if 0 <= wanted < block.width:
            return wanted
        raise IntakeComplaint(f"There is no column number {wanted}: the table has {block.width}, counted from 0.")
    wanted = str(wanted)
    places = range(block.width)
    found = [i for i in places if block.heading_text(i).strip() == wanted.strip()]
    found = found or [i for i in places if block.heading_text(i) and _same(block.heading_text(i), wanted)]
    found = found or [i for i in places if (name := block.heading_at(i).name) and _same(name, wanted)]
    if len(found) == 1:
        return found[0]
    if found:
        raise IntakeComplaint(f'{len(found)} columns have the heading "{shown(wanted)}": choose one by its place.')
    named = [f'"{shown(text)}"' for i in range(min(block.width, 60)) if (text := block.heading_text(i))]
    there = f"there are {', '.join(named[:MOST_NAMED])}" if named else "the table has no headings"
    raise IntakeComplaint(f'There is no column "{shown(wanted)}"; {there}.')


def _chosen(block: Block, selection: Mapping[str, Any]) -> int:
    heading, index = selection.get("column"), selection.get("column_index")
    if index is None:
        return find(block, heading)
    if not isinstance(index, int) or not 0 <= index < block.width:
        raise IntakeComplaint(f"There is no column number {index}: the table has {block.width}, counted from 0.")
    if heading and block.heading is not None and not _same(block.heading_text(index), str(heading)):
        return find(block, heading)
    return index


def _block(blocks: Sequence[Block], selection: Mapping[str, Any]) -> Block:
    """The block whose headings a selection names; otherwise the only one that is no list of facts."""
    named = [selection.get("column"), *(selection.get("columns") or ()), *(selection.get("where") or {})]
    wanted = [text for text in named if isinstance(text, str)]
    for block in reversed(blocks):
        if wanted and all(_has(block, text) for text in wanted):
            return block
    tables = [block for block in blocks if not _is_list_of_facts(block)] or list(blocks)
    most = max(len(block.data) for block in tables)
    large = [block for block in tables if len(block.data) * 2 >= most and len(block.data) > 1] or tables[-1:]
    if len(large) > 1 and not wanted and selection.get("column_index") is None:
        raise ChoiceNeeded(
            f"There are {len(large)} tables, one below the other: choose the column with the readings.",
            [
                {**column.to_dict(), "place": block.table.place(block.data[0], column.column_index)}
                for block in large
                for column in listed(block, roles_of(block))
                if column.role == "readings"
            ],
        )
    return large[-1]


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
    where = ", ".join(block.table.place(block.data[0], 0) for block in others[:3])
    return [f"A further table, from {where} on, was not read: choose its column to read it."] if others else []


def _rows(block: Block, where: Mapping[str, Any]) -> Sequence[int]:
    rows = block.data
    for heading, value in where.items():
        column, wanted = find(block, heading), _key(str(value))
        rows = [row for row in rows if _key(block.table.text(row, column)) == wanted]
        if not rows:
            there = list(dict.fromkeys(block.table.text(row, column) for row in block.data[:1000]))
            named = ", ".join(f'"{shown(text)}"' for text in there[:MOST_NAMED])
            raise IntakeComplaint(f'No row has "{shown(str(value))}" under "{shown(str(heading))}"; there are {named}.')
    return rows


def _refuse_misaligned(block: Block, rows: Sequence[int]) -> None:
    """Rows with more fields than headings cannot be put under them: a comma as separator and decimal sign."""
    table = block.table
    if block.heading is None or table.separator not in _MARKS or table.turned:
        return
    headings = filled_width(table.rows[block.heading])
    looked_at = sample_of(rows)
    longer = [row for row in looked_at if filled_width(table.rows[row]) > headings]
    if headings < 2 or len(longer) * 2 < len(looked_at):
        return
    row, mark = longer[0], _MARKS[table.separator]
    why = " The comma may be both the separator and the decimal sign." if mark == "comma" else ""
    count = filled_width(table.rows[row])
    raise IntakeComplaint(
        f"The heading names {headings} columns, but {table.place(row, 0)} has {count} fields parted by a {mark}, "
        f"so no reading can be told for sure.{why} Export it again with tabs or semicolons."
    )
