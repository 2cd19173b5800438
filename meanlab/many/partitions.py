"""A table in partitions (a Dask DataFrame): samples are brought together by its own shuffle, then judged in each.

Nothing is imported for it: the table brings its library along, and the cluster its client points at does the work.
"""

from collections.abc import Callable, Hashable, Sequence
from dataclasses import dataclass
from typing import Any

import pandas as pd

from meanlab.intake.numerals import Sign
from meanlab.many.cells import is_numeric, sign_of
from meanlab.many.samples import Samples

PLACE = "place of the row in the table"


@dataclass(frozen=True)
class Parts:
    """Samples of one partition: their labels, the columns found, and the samples themselves."""

    labels: pd.DataFrame
    columns: pd.DataFrame
    samples: Samples


def judged_in_partitions(
    table: Any, keys: Sequence[Hashable], values: Sequence[Hashable], judge: Callable[..., Parts]
) -> tuple[pd.DataFrame, pd.DataFrame, tuple[str, ...]]:
    """Return labels, columns and remarks of all samples, in the order of their first row in the whole table.

    Rows are numbered before they are moved, so that each sample has its readings in their order; the decimal sign of
    texts is decided over the whole column.
    """
    decimal = _sign(table, values)
    numbered = table.assign(**{PLACE: 1})
    numbered[PLACE] = numbered[PLACE].cumsum()
    gathered = numbered.shuffle(on=list(keys))

    def judged(part: pd.DataFrame) -> pd.DataFrame:
        ordered = part.sort_values(PLACE).reset_index(drop=True)
        found = judge(ordered, None, decimal)
        first = pd.Series(ordered[PLACE].to_numpy()).groupby(found.samples.codes).first()
        return pd.concat([found.labels, found.columns, first.rename(PLACE).reset_index(drop=True)], axis=1)

    rows = gathered.map_partitions(judged, meta=judged(gathered._meta)).compute()
    rows = rows.sort_values(PLACE).drop(columns=PLACE).reset_index(drop=True)
    return rows.iloc[:, : len(keys)], rows.iloc[:, len(keys) :], ()


def _sign(table: Any, values: Sequence[Hashable]) -> Sign | None:
    """Return the decimal sign of the texts in all the columns, None where they hold stored numbers."""
    texts = [name for name in values if not is_numeric(table[name])]
    if not texts:
        return None
    distinct = [table[name].drop_duplicates().compute() for name in texts]
    return sign_of(pd.concat(distinct))
