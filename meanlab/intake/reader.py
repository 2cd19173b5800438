"""The door of the intake: a pasted text or the bytes of a file in, an Intake out."""

from collections.abc import Mapping, Sequence
from dataclasses import replace
from typing import Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake import sayings
from meanlab.intake.blocks import Block, blocks_of
from meanlab.intake.characters import shown
from meanlab.intake.choosing import pick
from meanlab.intake.column import read_column
from meanlab.intake.doubts import doubts_about
from meanlab.intake.found import Column, Intake
from meanlab.intake.gathering import gathered
from meanlab.intake.given import Given, Read
from meanlab.intake.numerals import Sign, decimal_sign
from meanlab.intake.overlooked import overlooked
from meanlab.intake.picked import NothingToRead, Picked
from meanlab.intake.roles import listed, roles_of, sample_of
from meanlab.intake.separators import ChoiceNeeded
from meanlab.intake.sources import tables_of
from meanlab.intake.table import Table, parsed
from meanlab.intake.words import is_summary

FEW_UNREAD = 3
_KEYS = frozenset(("sheet", "column", "column_index", "columns", "where", "qualifier_column", "decimal", "preparation"))


def read(source: str | bytes, filename: str | None = None, selection: Mapping[str, Any] | None = None) -> Intake:
    """Return what was read from a pasted text or the bytes of a file.

    ``selection`` may hold sheet, column (heading), column_index (from 0), columns (replicates across the row), where
    {column: value}, qualifier_column, decimal ("." or ","), preparation (heading of the labels). Content that cannot be
    used comes back as an Intake that is refused with a reason, never as an exception.
    Raises IntakeComplaint for arguments of a wrong type.

    >>> read("Nitrate (mg/L)\\n5.02\\n<0.05\\n4.98").counts_line()
    '2 read · 1 below a limit · 0 refused · decimal point · 2 places'
    """
    chosen = _checked(source, filename, selection)
    try:
        return _read(source, filename, chosen)
    except ChoiceNeeded as open_question:
        return Intake(needs_choice=True, reason=open_question.question, choices=open_question.choices)
    except IntakeComplaint as complaint:
        return Intake(refused=True, reason=str(complaint))


def columns(source: str | bytes, filename: str | None = None) -> list[Column]:
    """Return the columns that could be chosen in a text or a file, those with readings first.

    Raises IntakeComplaint where the file cannot be opened or holds no table.
    """
    _checked(source, filename, None)
    found: list[Column] = []
    try:
        for table in tables_of(source, filename, None):
            for block in blocks_of(table):
                found.extend(listed(block, roles_of(block)))
    except ChoiceNeeded:
        return []
    return sorted(found, key=lambda column: column.role != "readings")


def _checked(source: Any, filename: Any, selection: Any) -> dict[str, Any]:
    if not isinstance(source, (str, bytes)):
        raise IntakeComplaint(f"Readings come as a text or as the bytes of a file, not as {type(source).__name__}.")
    if filename is not None and not isinstance(filename, str):
        raise IntakeComplaint(f"A file name is a text, not {type(filename).__name__}.")
    if selection is not None and not isinstance(selection, Mapping):
        raise IntakeComplaint(f"A selection is a mapping of names to choices, not {type(selection).__name__}.")
    chosen = {key: value for key, value in (selection or {}).items() if value is not None}
    unknown = [str(key) for key in chosen if key not in _KEYS]
    if unknown:
        raise IntakeComplaint(f"A selection has no {unknown[0]!r}; it can hold {', '.join(sorted(_KEYS))}.")
    if chosen.get("decimal", ".") not in (".", ","):
        raise IntakeComplaint('The decimal sign is "." or ",".')
    if not isinstance(chosen.get("where", {}), Mapping):
        raise IntakeComplaint("The rows are chosen by a mapping of a heading to a value.")
    return chosen


def _read(source: str | bytes, filename: str | None, selection: dict[str, Any]) -> Intake:
    tables = tables_of(source, filename, selection.get("decimal"))
    if selection.get("sheet") is not None:
        tables = [table for table in tables if table.name.strip() == str(selection["sheet"]).strip()]
        if not tables:
            names = ", ".join(f'"{table.name}"' for table in tables_of(source, filename, None))
            raise IntakeComplaint(f'There is no sheet "{selection["sheet"]}"; there are {names}.')
    with_blocks = [(table, blocks) for table in tables if (blocks := blocks_of(table))]
    if not with_blocks:
        return _nothing(tables)
    if len(with_blocks) == 1:
        try:
            return _column(pick(with_blocks[0][1], selection), selection)
        except NothingToRead:
            return _nothing(tables)
    return _one_sheet(with_blocks, selection)


def _one_sheet(with_blocks: Sequence[tuple[Table, list[Block]]], selection: dict[str, Any]) -> Intake:
    """The only visible sheet with something to read, or a question."""
    visible = [pair for pair in with_blocks if not (pair[0].sheet and pair[0].sheet.hidden)] or list(with_blocks)
    found: list[Picked] = []
    choices: list[dict[str, Any]] = []
    for _, blocks in visible:
        try:
            picked = pick(blocks, selection)
            found.append(picked)
            choices.extend(
                column.to_dict()
                for column in listed(picked.block, roles_of(picked.block))
                if column.column_index in picked.columns
            )
        except ChoiceNeeded as open_question:
            choices.extend(open_question.choices)
        except IntakeComplaint:
            continue
    if len(found) == 1 and len({choice.get("sheet") for choice in choices}) == 1:
        return _column(found[0], selection)
    if not choices:
        raise IntakeComplaint("No sheet holds such a column of readings: choose the sheet and the column.")
    raise ChoiceNeeded("Several sheets hold numbers: choose the sheet and the column with the readings.", choices)


def _nothing(tables: Sequence[Table]) -> Intake:
    """Say why nothing at all could be read: the first entries and what is wrong with them."""
    for table in tables:
        figures = [cells for cells in table.rows[:200] if len(cells) > 1 and is_summary(cells[0])]
        if figures:
            named = shown(" ".join(figures[0]))
            return Intake(refused=True, reason=f'Only computed figures were found ("{named}"), no readings.')
        places = [
            (row, column) for row, cells in enumerate(table.rows[:200]) for column, text in enumerate(cells) if text
        ]
        if places:
            found = _entries(table, places[:50])
            read_back = read_column(found)
            found_out = [*(table.sheet.remarks if table.sheet else ()), *read_back.unread]
            return Intake(refused=True, reason=" ".join(["No reading was found.", *found_out[:2]]))
    return Intake(refused=True, reason="There is nothing to read: paste the readings, one a line, or open a file.")


def _entries(table: Table, places: Sequence[tuple[int, int]]) -> Given:
    return Given(
        [table.text(row, column) for row, column in places],
        lambda i: table.place(*places[i]),
        None if table.sheet is None else [table.kind(row, column) for row, column in places],
    )


def _column(picked: Picked, selection: dict[str, Any]) -> Intake:
    """Read the cells that were picked."""
    given = gathered(picked, selection.get("decimal"))
    found = read_column(given)
    if found.sign.open:
        hint = _hint(picked)
        if hint is None:
            raise _ask_for_sign(picked, given, found)
        given = replace(given, hint=hint)
        found = read_column(given)
    return _intake(picked, given, found)


def _hint(picked: Picked) -> Sign | None:
    """The decimal sign that the other columns of the table show beyond doubt, None where they do not."""
    block = picked.block
    numerals = []
    for column in range(min(block.width, 200)):
        if column not in picked.columns:
            for row in sample_of(block.data, block.width):
                one = parsed(block.table.text(row, column)[:60])
                if one.numeral and block.table.kind(row, column) == "text":
                    numerals.append((one.numeral, one.power))
    found = decimal_sign(numerals)
    return found.sign if found.grounds and not found.open and not found.mixed and "cannot" in found.grounds else None


def _ask_for_sign(picked: Picked, given: Given, found: Read) -> ChoiceNeeded:
    heading = picked.block.heading_text(picked.columns[0])
    sample = [text for text in given.texts if "," in text or "." in text][:3]
    base = {"sheet": picked.block.table.name, "column": heading, "column_index": picked.columns[0], "first": sample}
    return ChoiceNeeded(
        f"The decimal sign cannot be told: {found.sign.grounds}. Choose the decimal comma or the decimal point "
        "(then the comma is a thousands separator).",
        [{**base, "decimal": ","}, {**base, "decimal": "."}],
    )


def _intake(picked: Picked, given: Given, found: Read) -> Intake:
    warnings, notes = doubts_about(picked, given, found)
    if found.refusal:
        return Intake(refused=True, reason=found.refusal)
    censored = sum(one.kind in ("below", "above") for one in found.special.values())
    if not found.numbers and not censored:
        first = next(iter(found.unread), "Every entry is marked as missing.")
        return Intake(refused=True, reason=f"No reading was found. {first}")
    passed_over = overlooked(picked)
    if len(passed_over) > len(found.numbers) + censored:
        place, text = passed_over[0]
        return Intake(
            refused=True,
            reason=f"More numbers stand beside the readings than among them: it cannot be told which are meant. First "
            f'{place} "{shown(text)}". Write one reading a line.',
        )
    if passed_over:
        warnings.append(sayings.passed_over(passed_over))
    unread = sum(one.kind == "unread" for one in found.special.values())
    if unread > FEW_UNREAD and unread * 3 > 2 * len(given.texts):
        first = next(iter(found.unread), "")
        return Intake(refused=True, reason=f"{unread} of {len(given.texts)} entries are no readings. {first}")
    return Intake(
        texts=given.texts,
        special=found.special,
        numbers=found.numbers,
        unit=found.unit,
        name=picked.name,
        decimal_sign=found.sign.sign,
        evidence=found.sign.grounds,
        warnings=tuple(warnings),
        notes=tuple(notes),
        computed=found.computed,
        preparations=_preparations(picked),
        preparations_chosen=picked.is_chosen,
        place_of=given.place_of,
    )


def _preparations(picked: Picked) -> tuple[str, ...] | None:
    table = picked.block.table
    if picked.preparation is not None:
        return tuple(table.text(row, picked.preparation) for row, _ in picked.places())
    if table.labels is None or table.lines is None:
        return None
    return tuple(table.labels[table.lines[row]] for row, _ in picked.places())
