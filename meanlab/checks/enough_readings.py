"""Enough readings: whether the procedure in force could reject at all."""

from meanlab.checks.facts import Facts
from meanlab.core.results import Check


def enough_readings_check(facts: Facts) -> Check | None:
    """Return the smallest p the procedure could attain against the level; None where nothing can be tested.

    "stop" where it is not below the level: the procedure still runs, but no outcome of it could be significant.
    """
    smallest, level = facts.smallest_p, facts.question.alpha
    if smallest is None:
        return None
    if smallest >= level:
        said = (
            f"With {facts.readings} no outcome of this procedure could be significant: the smallest p it can attain is "
            f"{facts.p(smallest, level).removeprefix('p = ')}, and the level is {facts.percent(level)}."
        )
        return Check("enough readings", "stop", smallest, None, said)
    if smallest > 0:
        reach = f"the smallest p this procedure can attain, {facts.p(smallest, level)}, lies below the level"
    else:
        reach = "this procedure can attain any p"
    said = (
        f"With {facts.readings} {reach}; whether they could have shown the difference that matters is another question."
    )
    return Check("enough readings", "clear", smallest, None, said)
