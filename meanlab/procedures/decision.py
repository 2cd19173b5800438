"""From the two one-sided p-values to p, rejection and the level of each tail."""

from typing import Any

import numpy as np


def p_value(alternative: str, p_greater: Any, p_less: Any) -> Any:
    """Return p for the alternative; two-sided p = min(1, 2·min of the tails).

    >>> float(p_value("two-sided", 0.01, 0.99))
    0.02
    """
    if alternative == "greater":
        return p_greater
    if alternative == "less":
        return p_less
    return np.minimum(1.0, 2 * np.minimum(p_greater, p_less))


def tail(alternative: str, alpha: float) -> float:
    """Return the probability each rejecting tail has: α/2 two-sided, α one-sided."""
    return alpha / 2 if alternative == "two-sided" else alpha


def rejecting_sides(alternative: str) -> tuple[bool, bool]:
    """Tell whether the lower and the upper tail of the statistic reject."""
    return alternative != "greater", alternative != "less"


def one_sided(alternative: str, low: Any, high: Any) -> tuple[Any, Any]:
    """Keep the interval ends that the alternative gives: "greater" has no upper end, "less" no lower one."""
    return (None if alternative == "less" else low), (None if alternative == "greater" else high)
