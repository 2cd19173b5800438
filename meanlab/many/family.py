"""The family of all samples that have a p: Holm's adjustment, and which rejections it takes back."""

import numpy as np
import pandas as pd

OUTCOMES = ("differs", "agrees", "cannot tell", "not testable")


def holm(p: np.ndarray) -> np.ndarray:
    """Return Holm's adjusted p-values: in rising order, max over the earlier ones of (m − i)·p₍ᵢ₎, at most 1.

    Rows without a p (nan) stay without and do not count. Source: Holm 1979, Scandinavian Journal of Statistics 6:65.

    >>> holm(np.array([0.01, 0.04, np.nan, 0.03])).tolist()
    [0.03, 0.06, nan, 0.06]
    """
    from statsmodels.stats.multitest import multipletests  # a second to import, and only here of use

    adjusted, known = np.full(len(p), np.nan), ~np.isnan(p)
    if known.any():
        adjusted[known] = multipletests(p[known], method="holm")[1]
    return adjusted


def outcomes(results: pd.DataFrame, alpha: float) -> np.ndarray:
    """Return what each sample comes to once the family is counted: one of OUTCOMES, shape (samples,).

    "differs" stands after Holm only; a rejection that Holm takes back leaves "agrees" where agreement within ± E was
    shown, else "cannot tell".

    >>> table = pd.DataFrame({"verdict": ["differs", "differs, within the limit"], "p_holm": [0.2, 0.3]})
    >>> outcomes(table, 0.05).tolist()
    ['cannot tell', 'agrees']
    """
    verdict = results["verdict"].to_numpy(dtype=object)
    kept = results["p_holm"].to_numpy(dtype=float) < alpha
    found = verdict.copy()
    found[(verdict == "differs") & ~kept] = "cannot tell"
    within = verdict == "differs, within the limit"
    found[within] = np.where(kept[within], "differs", "agrees")
    return found
