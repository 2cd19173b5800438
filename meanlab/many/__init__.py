"""A table of samples → a table of results: samples of equal size are judged together, each as one analysis would be."""

from collections.abc import Callable, Hashable, Mapping
from typing import Any

import numpy as np
import pandas as pd

from meanlab.core.question import Question
from meanlab.intake.numerals import Sign
from meanlab.many.family import OUTCOMES, holm, outcomes
from meanlab.many.one_by_one import decided_alone
from meanlab.many.opened import Opened
from meanlab.many.partitions import Parts, judged_in_partitions
from meanlab.many.samples import Samples, Targets, chosen_columns, samples_of, targets_of
from meanlab.many.together import blocks

__all__ = ["COLUMNS", "OUTCOMES", "Opened", "analyse_many", "holm", "outcomes"]

DOUBLES = ("mean", "s", "low", "high", "difference", "statistic", "df", "p")
COLUMNS = ("n", *DOUBLES, "p_holm", "procedure", "verdict", "flags")
Told = Callable[[int, int], None]
TOLD_EACH = 50  # samples analysed one by one between two words of progress


def analyse_many(
    table: Any,
    value: Hashable | list[Hashable],
    sample: Hashable | list[Hashable],
    question: Question,
    targets: Mapping[Any, Any] | Hashable | None = None,
    preparation: Hashable | None = None,
    progress: Told | None = None,
) -> pd.DataFrame:
    """Return one row a sample, in order of first appearance: the same numbers as ``analyse`` one by one.

    table        pandas or Dask DataFrame: long, one reading a row, or wide, the replicates of a row in several columns
    value        column of the readings (numbers, or texts as the intake reads them: "5,02", "<0.05", "n.d."), or a list
                 of columns that are read across each row
    sample       name of the column, or list of names, that tells the samples apart
    targets      each sample's own target: a mapping from the sample, or the name of a column
    preparation  name of the column with the preparation labels
    progress     called with (done, all); an exception it raises ends the run

    Columns after those of the sample: n, mean, s, low, high, difference, statistic, df, p, p_holm (Holm over the rows
    that have a p), procedure, verdict (by raw p), flags. A sample column that bears the name of a result column is
    called "… (sample)". A sample that cannot be tested keeps its row with the reason in its flags; missing values are
    left away and counted there. What must be seen about the texts of the readings is in ``attrs["remarks"]``.
    Raises Complaint for columns that are not there and for readings in two units.
    Source: Holm 1979.
    """
    keys, values = ([*named] if isinstance(named, list | tuple) else [named] for named in (sample, value))
    further = [one for one in (preparation, None if isinstance(targets, Mapping) else targets) if one is not None]
    chosen = chosen_columns(table, [*keys, *values, *further])

    def judge(part: pd.DataFrame, told: Told | None = None, decimal: Sign | None = None) -> Parts:
        samples = samples_of(part, values, keys, preparation, decimal)
        columns = _columns(samples, question, targets_of(part, samples, question, targets), told)
        return Parts(samples.labels.rename(columns=_free_name), pd.DataFrame(columns), samples)

    if hasattr(chosen, "map_partitions"):
        labels, columns, remarks = judged_in_partitions(chosen, keys, values, judge)
        _tell(progress, len(labels), len(labels))
    else:
        found = judge(chosen if isinstance(chosen, pd.DataFrame) else chosen.compute(), progress)
        labels, columns, remarks = found.labels, found.columns, found.samples.cells.remarks
    results = pd.concat([labels, _with_family(columns, question.alpha)], axis=1)
    results.attrs["remarks"] = list(remarks)
    return results


def _free_name(name: Hashable) -> Hashable:
    return f"{name} (sample)" if name in COLUMNS else name


def _columns(samples: Samples, question: Question, targets: Targets, progress: Told | None) -> dict[str, np.ndarray]:
    """Return the columns of the result but p_holm: what can be judged together first, then the others one by one."""
    count = len(samples)
    columns: dict[str, np.ndarray] = {"n": samples.counts.copy()}
    columns |= {name: np.full(count, np.nan) for name in DOUBLES}
    columns |= {name: np.full(count, None, dtype=object) for name in ("procedure", "verdict")}
    columns["flags"] = np.full(count, "", dtype=object)
    missing = np.flatnonzero(samples.missing)
    columns["flags"][missing] = [f"{lost} missing" for lost in samples.missing[missing].tolist()]
    left, done = np.ones(count, dtype=bool), 0
    for block in blocks(samples, question, targets):
        for name, numbers in block.judged.numbers.items():
            columns[name][block.samples] = numbers
        columns["procedure"][block.samples] = block.judged.procedure
        columns["verdict"][block.samples] = block.judged.verdict
        _add_flags(columns["flags"], block.samples, block.reasons)
        left[block.samples] = block.judged.beyond
        done += len(block.samples) - int(block.judged.beyond.sum())
        _tell(progress, done, count)
    for place in np.flatnonzero(left).tolist():
        found, reason = decided_alone(samples, place, question, targets)
        for name, one in found.items():
            columns[name][place] = np.nan if one is None and name in DOUBLES else one
        columns["flags"][place] = _joined(columns["flags"][place], reason)
        done += 1
        if done % TOLD_EACH == 0 or done == count:
            _tell(progress, done, count)
    return columns


def _tell(progress: Told | None, done: int, count: int) -> None:
    if progress is not None:
        progress(done, count)


def _add_flags(flags: np.ndarray, places: np.ndarray, reasons: np.ndarray) -> None:
    for place, reason in zip(places[reasons != ""], reasons[reasons != ""], strict=True):
        flags[place] = _joined(flags[place], reason)


def _joined(flags: str, reason: str) -> str:
    return f"{flags}; {reason}" if flags and reason else flags or reason


def _with_family(columns: pd.DataFrame, alpha: float) -> pd.DataFrame:
    """Return the columns in their order with Holm's p, and a flag where it takes a rejection back."""
    p = columns["p"].to_numpy(dtype=float)
    adjusted, flags = holm(p), columns["flags"].to_numpy(dtype=object, copy=True)
    lost = np.flatnonzero((p < alpha) & (adjusted >= alpha))
    _add_flags(flags, lost, np.full(len(lost), "not after Holm", dtype=object))
    return columns.assign(p_holm=adjusted, flags=flags)[list(COLUMNS)]
