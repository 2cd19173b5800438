"""Checks of the readings: each says what was seen, and what it can and cannot see at this n; none changes the route."""

import numpy as np

from meanlab.checks.enough_readings import enough_readings_check
from meanlab.checks.facts import Facts
from meanlab.checks.far_readings import far_readings_check
from meanlab.checks.known_sigma import known_sigma_check
from meanlab.checks.normality_check import normality_check
from meanlab.checks.resolution import resolution_check
from meanlab.checks.run_order import run_order_check
from meanlab.checks.units import units_check
from meanlab.core.results import Check

__all__ = ["Facts", "all_checks"]


def all_checks(shifted: np.ndarray | None, facts: Facts) -> tuple[Check, ...]:
    """Return every check that applies, in fixed order.

    shifted  the units measured from any origin in any scale, shape (n,); None where any of them is censored
    """
    found = [
        normality_check(shifted, facts),
        far_readings_check(shifted, facts),
        run_order_check(shifted, facts),
        resolution_check(shifted, facts),
        enough_readings_check(facts),
        units_check(facts),
        known_sigma_check(facts),
    ]
    return tuple(check for check in found if check is not None)
