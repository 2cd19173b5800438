"""Searches over the power: the smallest detectable difference, and the smallest number of readings."""

from collections.abc import Callable
from math import floor, inf, isfinite

import numpy as np
from scipy import special
from scipy.optimize import brentq

from meanlab.planning.detection import (
    Design,
    combined_power,
    detection_power,
    largest_power,
    power_at,
    scale_of,
    usual_shift,
)
from meanlab.procedures.distributions import normal_critical, normal_upper, t_critical

MOST_READINGS = 10_000
FEW = 6
MOST_DOUBLINGS = 60
MOST_HALVINGS = 2000
FIRST_CHUNK = 64


def smallest_detectable(n: int, power: float, design: Design) -> float | None:
    """Return the smallest true difference (a magnitude) found with this power; None where none of any size is.

    >>> round(smallest_detectable(10, 0.8, Design(1.0)), 4)
    0.996
    """
    df = design.df(n)
    start = float(t_critical(design.tail, df)) if df > 0 else usual_shift(power, design)
    return _where_it_reaches(power_at(n, design), power, design.side, scale_of(n, design), start + 1)


def out_of_reach(power: float, design: Design) -> float:
    """Return the true difference up to which no number of readings has this power: 2.80 u two-sided at 5 % and 80 %.

    0 without an uncertainty beside the scatter.
    """
    if design.u == 0:
        return 0.0
    found = combined_power(0.0, inf, design)
    return _where_it_reaches(found, power, design.side, design.u, usual_shift(power, design)) or 0.0


def _where_it_reaches(
    found: Callable[[float], float], power: float, side: float, scale: float, start: float
) -> float | None:
    """Return the smallest |δ| with found(δ) = power, by bracketing from ``start`` scales on."""
    if found(0.0) >= power:
        return 0.0
    high = max(start, 1.0)
    for _ in range(MOST_DOUBLINGS):
        if found(side * high * scale) >= power:
            break
        high *= 2
    else:
        return None
    return (
        float(
            brentq(
                lambda size: found(side * size * scale) - power,
                0.0,
                high,
                xtol=1e-14,
                rtol=1e-13,
                maxiter=MOST_HALVINGS,
            )
        )
        * scale
    )


def readings_needed(difference: float, power: float, design: Design) -> int | None:
    """Return the smallest n ≥ 2 that finds a true difference with this power; None where none up to 10,000 does.

    ``difference`` is signed; one against the side that is asked, or too small for the uncertainty of the target, is
    found by none. Sign: the smallest n at all, its power is a saw-tooth in n.
    """
    towards = design.side * difference if design.alternative != "two-sided" else abs(difference)
    if towards <= 0 or largest_power(difference, design) <= power:
        return None
    if design.procedure == "sign":
        return _first_sign(towards, power, design)

    def enough(n: int) -> bool:
        return detection_power(n, difference, design) >= power

    if design.u > 0:  # effective degrees of freedom are generous at the smallest n, where power need not rise with n
        for n in range(2, FEW):
            if enough(n):
                return n
    return first_enough(enough, lower_guess(usual_shift(power, design) * (design.s / towards)))


def lower_guess(root: float) -> int:
    """Return a number of readings somewhat below the square of ``root``, between 2 and the most that are planned."""
    if not isfinite(root) or root * root >= MOST_READINGS:
        return MOST_READINGS
    return max(2, floor(root * root) - 1)


def first_enough(enough: Callable[[int], bool], guess: int) -> int | None:
    """Return the smallest n from 2 to 10,000 that is enough, where more readings are never less; None where none is."""
    low, high, step = 1, guess, 1
    while not enough(high):
        if high >= MOST_READINGS:
            return None
        low, high, step = high, min(MOST_READINGS, high + step), 2 * step
    while high - low > 1:
        middle = (low + high) // 2
        low, high = (low, middle) if enough(middle) else (middle, high)
    return high


def _first_sign(towards: float, power: float, design: Design) -> int | None:
    """Return the smallest n of the sign test, tried in chunks and confirmed by the exact critical count."""
    start, size = 2, FIRST_CHUNK
    while start <= MOST_READINGS:
        n = np.arange(start, min(start + size, MOST_READINGS + 1))
        for candidate in n[_sign_powers(n, towards, design) >= power * (1 - 1e-9)]:
            if detection_power(int(candidate), design.side * towards, design) >= power:
                return int(candidate)
        start, size = start + size, 2 * size
    return None


def _sign_powers(n: np.ndarray, towards: float, design: Design) -> np.ndarray:
    """Return the power of the sign test for many n at once."""
    spread = float(normal_critical(design.tail)) * np.sqrt(n)
    most = np.floor((n - spread) / 2) + 2
    for _ in range(5):
        most = np.where((most >= 0) & (special.bdtr(np.maximum(most, 0), n, 0.5) >= design.tail), most - 1, most)
    below = float(normal_upper(towards / design.s))
    sides = (below, 1 - below) if design.alternative == "two-sided" else (below,)
    found = sum(special.bdtr(np.maximum(most, 0), n, chance) for chance in sides)
    return np.where(most >= 0, found, 0.0)
