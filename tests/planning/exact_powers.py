"""Powers at many digits or by other libraries, written independently of the package."""

from itertools import pairwise
from math import comb, inf, sqrt

import numpy as np
from mpmath import betainc, exp, factorial, findroot, gamma, mp, mpf, ncdf, quad
from mpmath import sqrt as root
from scipy import integrate, special, stats


def shifted_t_upper(t, df, shift):
    """Return P(T > t) of the non-central t at 60 digits, by Lenth's series (Lenth 1989, AS 243), t > 0."""
    mp.dps = 60
    t, df, shift = mpf(t), mpf(df), mpf(shift)
    x, half = t * t / (t * t + df), shift * shift / 2
    below, place = ncdf(-shift), 0
    while True:
        p = exp(-half) * half**place / factorial(place)
        q = shift / root(2) * exp(-half) * half**place / gamma(place + mpf(3) / 2)
        even = betainc(place + mpf(1) / 2, df / 2, 0, x, regularized=True)
        odd = betainc(place + 1, df / 2, 0, x, regularized=True)
        below += (p * even + q * odd) / 2
        place += 1
        if place > half and p + abs(q) < mpf("1e-50"):
            return 1 - below


def t_critical(tail, df):
    """Return the t that is exceeded with this probability, at 30 digits."""
    mp.dps = 30
    df, tail = mpf(df), mpf(tail)

    def excess(t):
        return betainc(df / 2, mpf(1) / 2, 0, df / (df + t * t), regularized=True) / 2 - tail

    return findroot(excess, mpf(float(special.stdtrit(float(df), 1 - float(tail)))))


def ratio_density(r, df):
    """Return the density of s/σ, df·(s/σ)² being χ²(df), by scipy.stats.chi."""
    return stats.chi.pdf(r * np.sqrt(df), df) * np.sqrt(df)


def critical_distance(r, scatter, df, u, tail):
    """Return t(ν)·√(s²/n + u²) with ν by Welch–Satterthwaite, by scipy.stats.t."""
    total = (r * scatter) ** 2 + u * u
    df_all = total**2 / ((r * scatter) ** 4 / df) if r > 0 else inf
    return (stats.t.isf(tail, df_all) if df_all < 1e12 else stats.norm.isf(tail)) * sqrt(total)


def over_scatter(probability, df, edges):
    """Return ∫ density · probability over r = s/σ by scipy's adaptive quadrature between the edges."""
    parts = [
        integrate.quad(
            lambda r: ratio_density(r, df) * probability(r), low, high, epsabs=1e-14, epsrel=1e-12, limit=200
        )
        for low, high in pairwise(edges)
    ]
    return sum(part[0] for part in parts)


EDGES = (0.0, 0.1, 0.25, 0.5, 0.75, 1.0, 1.25, 1.5, 2.0, 3.0, 6.0, 12.0)


def combined_power(n, difference, s, u, tail, sides):
    """Return the power with an uncertain target by scipy's quadrature; ``sides`` 1 or 2."""
    scatter, df = s / sqrt(n), n - 1
    total = sqrt(scatter**2 + u * u)

    def rejects(r):
        bound = critical_distance(r, scatter, df, u, tail)
        above = stats.norm.sf((bound - difference) / total)
        return above + stats.norm.sf((bound + difference) / total) if sides == 2 else above

    return over_scatter(rejects, df, EDGES)


def agreement_power(n, limit, s, true, alpha, u):
    """Return the power of two one-sided tests by scipy's quadrature up to the ratio where the interval is too wide."""
    scatter, df = s / sqrt(n), n - 1
    total = sqrt(scatter**2 + u * u)

    def room(r):
        return limit - critical_distance(r, scatter, df, u, alpha)

    def agrees(r):
        if room(r) <= 0:
            return 0.0
        return stats.norm.cdf((room(r) - true) / total) - stats.norm.cdf((-room(r) - true) / total)

    if room(1e-9) <= 0:
        return 0.0
    low, high = 1e-9, 12.0
    if room(high) < 0:
        for _ in range(80):
            middle = (low + high) / 2
            low, high = (low, middle) if room(middle) < 0 else (middle, high)
    return over_scatter(agrees, df, np.linspace(0.0, high, 9))


def agreement_power_many_digits(n, limit, s, true, alpha):
    """Return the power of two one-sided tests without further uncertainty at 25 digits (Owen 1965)."""
    t, df = t_critical(alpha, n - 1), mpf(n - 1)
    mp.dps = 25
    scatter = mpf(s) / root(mpf(n))
    last = mpf(limit) / (t * scatter)

    def part(r):
        density = 2 * exp(df / 2 * mp.log(df / 2) - mp.loggamma(df / 2) + (df - 1) * mp.log(r) - df * r * r / 2)
        room = mpf(limit) - t * scatter * r
        return density * (ncdf((room - true) / scatter) - ncdf((-room - true) / scatter))

    top = min(last, mpf(12))
    return quad(part, [top * step / 8 for step in range(9)])


def sign_power(n, chance, tail, sides):
    """Return the power of the sign test from whole-number binomial sums; ``chance`` = P(x > μ₀)."""
    most, total = -1, 0
    while (total + comb(n, most + 1)) / 2**n < tail:
        most += 1
        total += comb(n, most)
    if most < 0:
        return 0.0
    above = stats.binom.cdf(most, n, 1 - chance)
    return above + stats.binom.cdf(most, n, chance) if sides == 2 else above
