"""What stands beside the readings and belongs to them: their name and unit, "<" signs, labels of preparations."""

from collections import Counter
from collections.abc import Sequence

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.characters import shown
from meanlab.intake.heading import heading_of
from meanlab.intake.picked import Picked
from meanlab.intake.roles import Role, sample_of
from meanlab.intake.units import is_unit, same_unit


def with_what_stands_beside(picked: Picked, roles: Sequence[Role]) -> Picked:
    """Complete picked cells by name, unit, qualifiers and preparations.

    Raises IntakeComplaint where the rows have two units.
    """
    _name_and_unit(picked)
    _unit_column(picked, roles)
    _qualifier_column(picked, roles)
    _preparation_column(picked, roles)
    return picked


def _name_and_unit(picked: Picked) -> None:
    block = picked.block
    headings = [block.heading_at(column) for column in picked.columns[:500]]
    if len(headings) == 1:
        picked.name, picked.unit = headings[0].name, headings[0].unit
    else:
        units = {heading.unit for heading in headings}
        picked.unit = units.pop() if len(units) == 1 else None
    if len(headings) == 1 and picked.unit is None:
        picked.unit = _unit_in_next_heading(picked)
    if picked.name is None and block.table.named:
        named = heading_of(block.table.named)
        picked.name, picked.unit = named.name, picked.unit or named.unit


def _unit_in_next_heading(picked: Picked) -> str | None:
    """A unit as a heading of its own, right of the name and over nothing: "Nitrate", "mg/L"."""
    block, beside = picked.block, picked.columns[0] + 1
    text = block.heading_text(beside)
    over_nothing = text and not any(block.table.text(row, beside) for row in sample_of(picked.rows))
    return text if over_nothing and is_unit(text) else None


def _unit_column(picked: Picked, roles: Sequence[Role]) -> None:
    """The unit that stands in a column of its own; two units in the rows that are read stop the reading."""
    columns = [i for i, role in enumerate(roles) if role.role == "unit" and i not in picked.columns]
    if not columns:
        return
    column = next((i for i in columns if i > picked.columns[-1]), columns[-1])
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


def _qualifier_column(picked: Picked, roles: Sequence[Role]) -> None:
    column = picked.columns[0]
    near = [i for i, role in enumerate(roles) if role.role == "qualifier" and abs(i - column) <= 2]
    if picked.qualifier is not None or len(picked.columns) > 1 or not near:
        return
    picked.qualifier = min(near, key=lambda i: abs(i - column))
    heading = picked.block.heading_text(picked.qualifier) or f"column {picked.qualifier + 1}"
    picked.warnings.append(
        f'The signs under "{shown(heading)}" were taken for qualifiers of the readings: "<" and ">" make limits.'
    )


def _preparation_column(picked: Picked, roles: Sequence[Role]) -> None:
    """Labels of preparations are proposed where each stands for several readings."""
    if picked.preparation is not None:
        return
    for index, role in enumerate(roles):
        if role.role == "preparation" and index not in picked.columns:
            counts = Counter(picked.block.table.text(row, index) for row in sample_of(picked.rows))
            if len(counts) > 1 and max(counts.values()) > 1 and "" not in counts:
                picked.preparation = index
                heading = shown(picked.block.heading_text(index))
                picked.notes.append(
                    f'"{heading}" names {len(counts)} preparations; readings of one preparation are not independent.'
                )
                return
