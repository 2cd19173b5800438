"""What must be seen about a column as a whole: rows left out, odd lengths, a first or last number unlike the others."""

from meanlab.intake.blocks import Block
from meanlab.intake.characters import shown
from meanlab.intake.choosing import Picked
from meanlab.intake.given import Given, Read
from meanlab.intake.table import filled_width, sort_of
from meanlab.intake.units import is_unit

MOST_ROWS = 20_000


def doubts_about(picked: Picked, given: Given, found: Read) -> tuple[list[str], list[str]]:
    """Return the warnings and the notes about a column, in the order in which they are read."""
    block = picked.block
    warnings = [*block.table.remarks, *picked.warnings, *found.unread, *found.warnings]
    warnings.extend(_left_out_rows(block))
    warnings.extend(_odd_heading(picked))
    warnings.extend(_odd_lengths(picked))
    warnings.extend(_texts_beside(picked))
    warnings.extend(_hidden(picked))
    if len(found.numbers) <= MOST_ROWS:
        warnings.extend(_first_unlike(picked, given, found))
        warnings.extend(_last_is_mean(picked, given, found) or _last_without_label(picked))
    notes = [*block.table.notes, *picked.notes, *found.notes]
    first = block.heading if block.heading is not None else block.data[0]
    above = sum(any(cells) for cells in block.table.rows[: min(first, 2000)])
    if above and not block.table.turned:
        notes.append(f"Above the heading {_counted(above, 'line was', 'lines were')} not read.")
    if block.tail:
        named = ", ".join(f'"{shown(" ".join(filter(None, block.table.rows[row])))}"' for row in block.tail[:3])
        notes.append(f"Below the table {_counted(len(block.tail), 'line was', 'lines were')} not read: {named}.")
    if block.table.labels:
        count = len(set(block.table.labels.values()) - {""})
        notes.append(f"{count} lines name preparations; readings of one preparation are not independent.")
    return list(dict.fromkeys(warnings)), list(dict.fromkeys(notes))


def _counted(count: int, one: str, many: str) -> str:
    return f"{count} {one if count == 1 else many}"


def _left_out_rows(block: Block) -> list[str]:
    found = []
    table = block.table
    if block.summaries:
        named = ", ".join(
            f'{table.place(row, 0)} "{shown(" ".join(filter(None, table.rows[row])))}"' for row in block.summaries[:5]
        )
        found.append(f"Rows of computed figures (mean, SD and the like) were not read as readings: {named}.")
    if block.again:
        where = ", ".join(table.place(row, 0) for row in block.again[:5])
        found.append(f"The heading comes again at {where}; the rows below it were read on as one column.")
    return found


def _odd_heading(picked: Picked) -> list[str]:
    """A heading that begins like a number could be a reading that was meant."""
    block, column = picked.block, picked.columns[0]
    text = block.heading_text(column)
    if len(picked.columns) > 1 or block.heading is None or not text[:1].isdigit() or block.table.separator:
        return []
    place = block.table.place(block.heading, column)
    return [f'{place[0].upper()}{place[1:]}: "{shown(text)}" was taken for the heading, not for a reading.']


def _odd_lengths(picked: Picked) -> list[str]:
    """Rows with a filled field too many, or too short to reach the column."""
    table, block = picked.block.table, picked.block
    if block.heading is None or table.sheet is not None or not table.separator or len(picked.rows) > MOST_ROWS:
        return []
    width, last = filled_width(table.rows[block.heading]), max(picked.columns)
    surplus = {row: filled_width(table.rows[row]) for row in picked.rows if filled_width(table.rows[row]) > width}
    short = {row: len(table.rows[row]) for row in picked.rows if len(table.rows[row]) <= last}
    if len(short) * 2 > len(picked.rows):
        short = {}
    odd = dict(sorted({**surplus, **short}.items()))
    if not odd:
        return []
    where = ", ".join(f"{table.place(row, 0)} has {count}" for row, count in list(odd.items())[:5])
    return [f"Rows with another number of fields than the {width} of the heading: {where}. Check them in the file."]


def _texts_beside(picked: Picked) -> list[str]:
    """Words right of readings without a heading belong to them, "5.02; rejected", and are said."""
    table, block = picked.block.table, picked.block
    if block.heading is not None or table.sheet is not None or len(picked.columns) != 1 or not table.separator:
        return []
    column = picked.columns[0] + 1
    texts = {row: table.text(row, column) for row in picked.rows[:MOST_ROWS]}
    rows = [row for row, text in texts.items() if sort_of(table, row, column) == "text" and not is_unit(text)]
    if not rows or len(rows) == len(picked.rows):
        return []
    where = ", ".join(f'{table.place(row, column)} "{shown(table.text(row, column))}"' for row in rows[:5])
    return [f"Words beside the readings were not read: {where}. Leave a reading out by hand, with its cause."]


def _hidden(picked: Picked) -> list[str]:
    sheet = picked.block.table.sheet
    if sheet is None:
        return []
    found = list(sheet.remarks)
    hidden = [row for row in picked.rows if row in sheet.hidden_rows]
    if hidden:
        where = ", ".join(picked.block.table.place(row, picked.columns[0]) for row in hidden[:5])
        found.append(f"{len(hidden)} hidden rows (filtered or hidden by hand) were read too: {where}.")
    if any(column in sheet.hidden_columns for column in picked.columns):
        found.append("The column that was read is hidden in the sheet.")
    return found


def _first_unlike(picked: Picked, given: Given, found: Read) -> list[str]:
    """A number without a heading that has no decimals, while all others do, and lies far off: perhaps a heading."""
    numbers = found.numbers
    if picked.block.heading is not None or len(numbers) < 4 or "." in numbers[0] or 0 in found.special:
        return []
    rest = sorted(abs(float(number)) for number in numbers[1:])
    if not all("." in number for number in numbers[1:]) or abs(float(numbers[0])) < 5 * max(rest[-1], 1e-300):
        return []
    return [
        f'The first number "{given.texts[0]}" is far from the others and has no decimals: if it is a heading, such as '
        "a year, take it away."
    ]


def _last_is_mean(picked: Picked, given: Given, found: Read) -> list[str]:
    numbers = found.numbers
    if len(numbers) < 4:
        return []
    values = [float(number) for number in numbers]
    places = _places(numbers[-1])
    rest = values[:-1]
    mean, total = sum(rest) / len(rest), sum(rest)
    finer = places > max(map(_places, numbers[:-1]))
    is_mean = finer and abs(values[-1] - mean) <= 0.51 * 10.0**-places
    is_sum = abs(values[-1] - total) <= 1e-9 * abs(total) and abs(total) > 2 * max(map(abs, rest))
    if not is_mean and not is_sum:
        return []
    figure = "mean" if is_mean else "sum"
    return [
        f'The last reading "{given.texts[-1].strip()}" equals the {figure} of the readings above it: if it is computed '
        "and no reading, take it away or leave it out with this cause."
    ]


def _last_without_label(picked: Picked) -> list[str]:
    """A last row that lacks the run number or label that every other row has: perhaps a computed figure."""
    rows, table = picked.rows, picked.block.table
    if len(rows) < 4 or len(picked.columns) != 1 or not table.text(rows[-1], picked.columns[0]):
        return []
    beside = [column for column in range(min(picked.block.width, 50)) if column != picked.columns[0]]
    filled = [any(table.text(row, column) for column in beside) for row in (*rows[:200], rows[-1])]
    if filled[-1] or not all(filled[:-1][: len(rows) - 1]):
        return []
    place = table.place(rows[-1], picked.columns[0])
    text = table.text(rows[-1], picked.columns[0])
    return [
        f'The last row ({place}, "{shown(text)}") has nothing beside its number, as all others have: if it is a mean '
        "or another computed figure, leave it out with this cause."
    ]


def _places(number: str) -> int:
    return len(number.partition(".")[2]) if "E" not in number else 0
