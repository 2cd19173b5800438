"""What is uncertain in s: integrals over the ratio s/σ, and the tail of the non-central t made from them."""

from math import inf, isfinite, sqrt
from typing import Any

import numpy as np
from scipy import special

from meanlab.procedures.distributions import normal_upper

NODES, WEIGHTS = np.polynomial.legendre.leggauss(16)
PANELS = 8
MOST_PANELS = 80
REACH = 12.0
AROUND = np.array([-40.0, -12.0, -5.0, -2.0, 0.0, 2.0, 5.0, 12.0, 40.0])
SERIES_GOOD_ABOVE = 1e-4
SERIES_GOOD_BELOW = 60.0
SMALLEST_T = 1e-12
LARGEST_SHIFT = 1e8
LARGE_HALF = 100.0


def ratio_panels(
    df: float, middle: float = 1.0, width: float = inf, steps: float = 0.0, upto: float = inf
) -> tuple[Any, Any]:
    """Return points r and weights of a quadrature over r = s/σ, df·r² being chi-squared with ``df`` degrees of freedom.

    ``middle`` and ``width`` tell where, and on which length, what is averaged changes; ``steps`` how fast anywhere;
    above ``upto`` it is 0.
    """
    spread = REACH / sqrt(2 * df)
    low, high = max(0.0, 1 - spread), min(1 + spread, upto)
    low = min(low, high)
    panels = int(max(PANELS, min(MOST_PANELS, steps * (high - low) / 4 + 1)))
    edges = np.linspace(low, high, panels + 1)
    if isfinite(width):
        around = np.clip(middle + width * AROUND, low, high)
        edges = np.unique(np.concatenate((edges, around)))
    half = (edges[1:, np.newaxis] - edges[:-1, np.newaxis]) / 2
    r = (edges[:-1, np.newaxis] + half * (1 + NODES)).ravel()
    return r, (half * WEIGHTS).ravel() * ratio_density(r, df)


def ratio_density(r: Any, df: float) -> Any:
    """Return the density of s/σ: 2 (df/2)^(df/2) r^(df − 1) exp(−df·r²/2)/Γ(df/2), r > 0.

    Γ by Stirling's series for many degrees of freedom.
    """
    half, away = df / 2, r - 1
    # half·(1 − r² + 2 ln r), written so that nothing large cancels for many degrees of freedom
    with np.errstate(divide="ignore"):
        logarithm = np.where(r < 0.5, np.log(r), np.log1p(away))
    fall = half * (2 * (logarithm - away) - away * away)
    if half > LARGE_HALF:
        height = 2 * np.sqrt(half / (2 * np.pi)) * np.exp(-1 / (12 * half) + 1 / (360 * half**3))
    else:
        height = 2 * np.exp(half * np.log(half) - half - special.gammaln(half))
    return height * np.exp(fall) / r


def shifted_t_upper(t: float, df: float, shift: float, precise: bool = True) -> float:
    """Return P(T > t), t > 0, for non-central T = (Z + shift)/√(χ²(df)/df); infinite ``df``: the normal distribution.

    The library's series has full relative accuracy above 1e-4; below, the integral over s is taken, unless ``precise``
    is False (the tail that counts for nothing beside the other one).
    """
    if not isfinite(df):
        return float(normal_upper(t - shift))
    if t < SMALLEST_T:
        return float(normal_upper(-shift))
    if abs(shift) > LARGEST_SHIFT * max(1.0, t):
        return float(shift > 0)
    if abs(shift) < SERIES_GOOD_BELOW:
        tail = float(special.nctdtr(df, -shift, -t))
        if tail > SERIES_GOOD_ABOVE or not precise:
            return tail if tail > 0 else 0.0
    r, weights = ratio_panels(df, shift / t, 1 / t)
    return float(weights @ normal_upper(t * r - shift))
