"""Every check, in the order of the page."""

import numpy as np

from meanlab.checks.facts import Facts
from meanlab.core.results import Check


def all_checks(shifted: np.ndarray | None, facts: Facts) -> tuple[Check, ...]:
    """Return every check that applies."""
    return ()
