"""One sample of a table onto the page: its readings, its target and its name in the fields, the question as it is."""

from typing import Any

from meanlab.core.complaints import Complaint
from meanlab.page import focus, state
from meanlab.page.many_run import Ran
from meanlab.page.many_table import OPENED

TROUBLE = "many_trouble"
HEADING = ("preparation", "reading")


def open_sample(ran: Ran, place: int) -> None:
    """Bring a sample onto the page; what stood there can be put back."""
    state.note(TROUBLE, "")
    try:
        target = ran.opened.question(place).target
    except Complaint as complaint:
        state.note(TROUBLE, f'Sample "{ran.opened.name(place)}": {complaint}')
        return
    entries = ran.opened.entries(place)
    fields: dict[str, Any] = dict(state.working().fields) | {
        "target": str(target).replace(".", ran.sign),
        "material": ran.opened.name(place),
        "unit": ran.question.unit,
        "decimal_sign": "decimal comma" if ran.sign == "," else "decimal point",
        "sheet": None, "column": None, "replicates": [], "filter_column": None, "filter_value": "",
        "preparation": None, "labels_name_preparations": False,
    }  # fmt: skip
    if ran.choice.preparation is None:
        fields["readings_text"] = "\n".join(text for text, _ in entries)
    else:
        lines = [HEADING, *((label, text) for text, label in entries)]
        fields["readings_text"] = "\n".join("\t".join(line) for line in lines)
        fields |= {"column": 1, "preparation": HEADING[0]}
    state.note(OPENED, fields["readings_text"])
    state.open_set("", fields)
    focus.jump("page")
    before = state.working().previous
    if before is not None:
        before["cause"] = f'sample "{ran.opened.name(place)}" was opened'
