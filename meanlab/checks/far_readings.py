"""Far readings: Grubbs for few units, generalised ESD for more; they are flagged and nothing else."""

from collections.abc import Sequence
from math import sqrt

import numpy as np

from meanlab.checks.facts import CHECK_LEVEL, Facts, at_most
from meanlab.core.results import Check
from meanlab.procedures.distributions import t_critical, t_upper

FEWEST_FOR_GRUBBS = 4
FEWEST_FOR_SEVERAL = 15
MOST_FAR = 10
SHARE_FAR = 5
COARSE = 0.3
BLIND_TO_PAIRS_UP_TO = 10
# how often one reading 6 σ off is found by the two-sided 5 % test, simulated for this project
FOUND_AT_SIX = {4: 0.29, 6: 0.70, 8: 0.86, 10: 0.93}


def far_readings_check(shifted: np.ndarray | None, facts: Facts) -> Check | None:
    """Return G = max|x − x̄|/s with its two-sided p and the units it flags; None for s = 0.

    4 to 14 units: Grubbs, two-sided, 5 %; from 15 generalised ESD with up to n/5, at most 10. Nothing is flagged at
    n = 3 nor with steps above 0.3 s. ``entries`` are the places of the readings of flagged units.
    Source: Grubbs 1950, 1969; Rosner 1983, Technometrics 25:165.
    """
    if shifted is None or not facts.scatters or facts.n < 2:
        return None
    G = distances(shifted).max()
    silent = _why_silent(facts)
    if silent:
        return Check("far readings", "note", float(G), None, f"G = {facts.text(G)}: {silent}.")
    p = grubbs_p(float(G), facts.n)
    far = far_places(shifted)
    entries = tuple(sorted(place for unit in far for place in facts.places[unit]))
    if not far:
        return Check("far readings", "clear", float(G), p, _says_none(float(G), p, facts))
    return Check(
        "far readings", "caution", float(G), p, _says_far(far, float(G), p, facts), {"flagged": len(far)}, entries
    )


def distances(x: np.ndarray) -> np.ndarray:
    """Return |x − x̄|/s for every unit; 0 where they do not scatter."""
    away = np.abs(x - x.mean())
    s = sqrt(float(away @ away) / (len(x) - 1))
    return away / s if s > 0 else away


def grubbs_p(G: float, n: int) -> float:
    """Return the two-sided p of G, n·P(|T| > t) with t² = n(n − 2)G²/((n − 1)² − nG²), T on n − 2 degrees of freedom.

    At most 1; exact where it is below 5 % or so. Source: Grubbs 1950; NIST/SEMATECH e-Handbook 1.3.5.17.1.

    >>> round(grubbs_p(2.1266450871954654, 8), 6)
    0.05
    """
    room = (n - 1) ** 2 - n * G * G
    if room <= 0:
        return 0.0
    return min(1.0, 2 * n * float(t_upper(G * sqrt(n * (n - 2) / room), n - 2)))


def grubbs_critical(n: int, tail: float) -> float:
    """Return the G that is exceeded on one given side with probability ``tail`` (two-sided 5 %: 0.025).

    >>> round(grubbs_critical(8, 0.025), 4), round(grubbs_critical(8, 0.05), 4)
    (2.1266, 2.0317)
    """
    return float(esd_critical(n, 1, tail)[0])


def esd_critical(n: int, most: int, tail: float) -> np.ndarray:
    """Return λ₁…λ of the generalised ESD test, λᵢ = (n − i)t/√((n − i − 1 + t²)(n − i + 1)), t at tail/(n − i + 1).

    Source: Rosner 1983; NIST/SEMATECH e-Handbook 1.3.5.17.3.
    """
    left = n - np.arange(1, most + 1)
    t = t_critical(tail / (left + 1), left - 1)
    return left * t / np.sqrt((left - 1 + t * t) * (left + 1))


def far_places(x: np.ndarray) -> list[int]:
    """Return the places of far units of one sample x of shape (n,), the farthest first; n ≥ 4.

    As many as the largest i with Rᵢ > λᵢ, Rᵢ being the largest |x − x̄|/s once i − 1 are taken away.
    """
    n = len(x)
    most = 1 if n < FEWEST_FOR_SEVERAL else min(MOST_FAR, n // SHARE_FAR)
    critical = esd_critical(n, most, CHECK_LEVEL / 2)
    order = np.argsort(x, kind="stable")
    ordered, first, last = x[order], 0, n - 1  # the farthest is always the first or the last of those left
    taken: list[int] = []
    found = 0
    for bound in critical:
        if ordered[first] == ordered[last]:
            break
        part = ordered[first : last + 1]
        away = part - part.mean()
        s = sqrt(float(np.square(away).sum()) / (len(part) - 1))
        if -away[0] > away[-1]:
            taken.append(int(order[first]))
            distance, first = -away[0], first + 1
        else:
            taken.append(int(order[last]))
            distance, last = away[-1], last - 1
        if distance > bound * s:
            found = len(taken)
    return taken[:found]


def _why_silent(facts: Facts) -> str:
    step = facts.step_in_s
    if facts.n == 2:
        return "of two readings neither can lie far from the other"
    if facts.n < FEWEST_FOR_GRUBBS:
        return f"with {facts.readings} none is called far, because two that are close and a third always seem to differ"
    if step is not None and step > COARSE:
        return f"the readings have a step of {facts.text(step)} s, too coarse for this look, and none is called far"
    return ""


def _says_none(G: float, p: float, facts: Facts) -> str:
    if facts.n >= FEWEST_FOR_SEVERAL:
        most = min(MOST_FAR, facts.n // SHARE_FAR)
        return (
            f"G = {facts.text(G)}: no far reading among {facts.n} (generalised ESD, {facts.percent(CHECK_LEVEL)}); "
            f"more than {most} together could hide one another."
        )
    n, share = at_most(facts.n, FOUND_AT_SIX) or (FEWEST_FOR_GRUBBS, 0.0)
    pairs = ", and two far ones side by side mostly not" if facts.n <= BLIND_TO_PAIRS_UP_TO else ""
    return (
        f"G = {facts.text(G)} (Grubbs, two-sided, {facts.p(p)}): no far reading; at n = {n} one that lies 6 s "
        f"off is found in {facts.percent(share)} of sets{pairs}."
    )


def _says_far(far: Sequence[int], G: float, p: float, facts: Facts) -> str:
    by = (
        f"Grubbs, two-sided, {facts.p(p)}"
        if facts.n < FEWEST_FOR_SEVERAL
        else f"generalised ESD, {facts.percent(CHECK_LEVEL)}"
    )
    listed = _listed(far, facts)
    verb, it = ("lies", "it stays") if len(far) == 1 else ("lie", "they stay")
    return (
        f"{listed} {verb} far from the others (G = {facts.text(G)}; {by}): {it} in unless a cause is found and "
        "written down; leaving out what only looks far raises the risk of a false alarm."
    )


def _listed(far: Sequence[int], facts: Facts) -> str:
    places = sorted(place for unit in far for place in facts.places[unit])
    numbers = [str(place + 1) for place in places]
    names = numbers[0] if len(numbers) == 1 else f"{', '.join(numbers[:-1])} and {numbers[-1]}"
    noun = "Entry" if len(numbers) == 1 else "Entries"
    if not facts.nested:
        return f"{noun} {names}"
    return f"The preparation{'s' if len(far) > 1 else ''} of {noun.lower()} {names}"
