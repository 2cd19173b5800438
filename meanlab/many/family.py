"""The family of all samples that have a p: Holm's adjustment, and which rejections it takes back."""

import numpy as np


def holm(p: np.ndarray) -> np.ndarray:
    """Return Holm's adjusted p-values: in rising order, max over the earlier ones of (m − i)·p₍ᵢ₎, at most 1.

    Rows without a p (nan) stay without and do not count. Source: Holm 1979, Scandinavian Journal of Statistics 6:65.

    >>> holm(np.array([0.01, 0.04, np.nan, 0.03])).tolist()
    [0.03, 0.06, nan, 0.06]
    """
    order = np.argsort(p, kind="stable")[: np.count_nonzero(~np.isnan(p))]
    adjusted = np.full(len(p), np.nan)
    left = np.arange(len(order), 0, -1)
    adjusted[order] = np.minimum(1.0, np.maximum.accumulate(left * p[order])) if len(order) else p[order]
    return adjusted
