"""Resolution: the step of the readings against their scatter."""

from math import sqrt

import numpy as np

from meanlab.checks.facts import Facts, coarse_limit
from meanlab.core.results import Check

ROUNDING_FINE_UP_TO = 1.0


def resolution_check(shifted: np.ndarray | None, facts: Facts) -> Check | None:
    """Return r/s with the count of distinct values; None for one unit or any censored one.

    Identical readings scatter less than their step: the standard uncertainty of one is then at least r/√12 (GUM
    F.2.2.1, from memory). Where s shows the scatter, r²/12 is already in it and is not added.
    """
    if shifted is None or facts.s is None:
        return None
    distinct = len(np.unique(shifted))
    figures = {"distinct": float(distinct)}
    step, ratio = facts.resolution, facts.step_in_s
    if step is not None:
        figures["step"] = step
    if not facts.scatters:
        return Check("resolution", "caution", None, None, _says_identical(facts), figures)
    if step is None or ratio is None:
        said = (
            f"{distinct} distinct values among {facts.n}; their step is not known (computed values), so whether "
            "rounding hides scatter cannot be seen."
        )
        return Check("resolution", "note", None, None, said, figures)
    seen = f"{distinct} distinct values among {facts.n}, step {facts.step_text(step)}, that is {facts.text(ratio)} s"
    if ratio > ROUNDING_FINE_UP_TO:
        said = (
            f"{seen}: the readings are rounded more coarsely than they scatter, and s says little about their scatter."
        )
        return Check("resolution", "caution", ratio, None, said, figures)
    if ratio > coarse_limit(facts.n):
        said = f"{seen}: coarse for a look at the shape, while t is fine up to a step of 1 s."
        return Check("resolution", "note", ratio, None, said, figures)
    said = f"{seen}: fine enough; the rounding is already in s and is not added again."
    return Check("resolution", "clear", ratio, None, said, figures)


def _says_identical(facts: Facts) -> str:
    start = f"The {facts.readings} are identical: they scatter less than their step"
    if facts.resolution is None:
        return f"{start}, and the step is not known."
    least = facts.with_unit(facts.resolution / sqrt(12), 2)
    return (
        f"{start} of {facts.step_text(facts.resolution)}, so the standard uncertainty of one is at least {least} from "
        "rounding alone; read with more digits."
    )
