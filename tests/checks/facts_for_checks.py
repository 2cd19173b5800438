"""Facts for the checks, made of plain readings as an analysis would make them."""

import numpy as np

from meanlab.checks import Facts, all_checks
from meanlab.core.question import Question


def facts_of(x, resolution=0.001, smallest_p=0.0, places=None, sign=".", heading="", **question):
    """Return the facts of readings x that are a unit each."""
    return Facts(
        question=Question("5.00", **question),
        n=len(x),
        s=float(np.std(x, ddof=1)) if len(x) > 1 else None,
        resolution=resolution,
        places=places or tuple((place,) for place in range(len(x))),
        decimal_sign=sign,
        unit=heading,
        smallest_p=smallest_p,
    )


def check_of(name, x, **given):
    """Return the check of that name on readings x, None where it was not made."""
    return next((one for one in all_checks(np.asarray(x, dtype=float), facts_of(x, **given)) if one.name == name), None)
