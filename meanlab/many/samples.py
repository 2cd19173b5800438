"""The samples of a table: which cells belong to each, under which labels, and which target each is held against."""

from collections.abc import Hashable, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd

from meanlab.core.complaints import QuestionComplaint, ReadingsComplaint
from meanlab.core.numbers import exact_setting
from meanlab.core.question import Question
from meanlab.intake.numerals import Sign
from meanlab.many.cells import MISSING, ODD, Cells, cells_of


@dataclass(frozen=True)
class Samples:
    """The samples of a table in order of first appearance.

    labels        one row a sample, with the columns that tell the samples apart
    codes         the number of the sample of each row of the table
    cells         the entries, one after the other
    order         places of the entries that are not missing, sample by sample
    counts        how many those are in each sample, shape (samples,)
    missing       how many are missing
    odd           True for samples with an entry that is no plain number
    preparations  label of the preparation of each entry, None where there are none
    """

    labels: pd.DataFrame
    codes: np.ndarray
    cells: Cells
    order: np.ndarray
    counts: np.ndarray
    missing: np.ndarray
    odd: np.ndarray
    preparations: np.ndarray | None

    def __len__(self) -> int:
        return len(self.counts)

    @cached_property
    def starts(self) -> np.ndarray:
        """Where the entries of each sample begin in ``order``."""
        return np.cumsum(self.counts) - self.counts

    def entries(self, sample: int) -> list[int]:
        """Return the places of the entries of one sample."""
        start = self.starts[sample]
        return [int(place) for place in self.order[start : start + self.counts[sample]]]


def samples_of(
    table: pd.DataFrame, values: Sequence[Hashable], keys: list[Hashable], preparation: Any, decimal: Sign | None
) -> Samples:
    """Return the samples of a table whose readings stand in one column, or in several across each row."""
    wide = len(values)

    def place_of(entry: int) -> str:
        return f"row {entry // wide + 1}" + (f', column "{values[entry % wide]}"' if wide > 1 else "")

    cells = cells_of([table[name] for name in values], place_of, decimal)
    codes, first = _codes_of(table, keys)
    of_entries = np.repeat(codes, wide) if wide > 1 else codes
    count = len(first)
    absent = cells.kind == MISSING
    order = _by_sample(of_entries, absent)
    missing = np.bincount(of_entries[absent], minlength=count)
    odd = np.bincount(of_entries[cells.kind == ODD], minlength=count) > 0
    labels = None if preparation is None else np.repeat(_labels(table[preparation]), wide)
    return Samples(
        table[keys].iloc[first].reset_index(drop=True),
        codes,
        cells,
        order,
        np.bincount(of_entries, minlength=count) - missing,
        missing,
        odd,
        labels,
    )


def _codes_of(table: pd.DataFrame, keys: list[Hashable]) -> tuple[np.ndarray, np.ndarray]:
    """Return the number of the sample of each row, in order of first appearance, and the first row of each sample."""
    if len(keys) == 1:
        codes = pd.factorize(table[keys[0]], use_na_sentinel=False)[0]
    else:
        codes = table.groupby(keys, sort=False, dropna=False, observed=True).ngroup().to_numpy()
    if not len(codes):
        return codes, codes
    highest = np.maximum.accumulate(codes)
    return codes, np.flatnonzero(np.diff(highest, prepend=-1))


def _by_sample(codes: np.ndarray, absent: np.ndarray) -> np.ndarray:
    order = np.arange(len(codes)) if np.all(codes[1:] >= codes[:-1]) else np.argsort(codes, kind="stable")
    return order[~absent[order]] if absent.any() else order


def _labels(column: pd.Series) -> np.ndarray:
    return np.array([None if gone else str(one) for one, gone in zip(column.tolist(), column.isna(), strict=True)])


@dataclass(frozen=True)
class Targets:
    """The targets of the samples.

    code    which of the targets each sample has, −1 where it has none of its own, shape (samples,)
    given   the different targets as they were given, with the same as exact decimals
    lacking why a sample has no target
    """

    code: np.ndarray
    given: list[Any]
    exact: list[Decimal | None]
    lacking: str

    @cached_property
    def usable(self) -> np.ndarray:
        """Which samples have a target that is a number."""
        numbers = np.array([one is not None for one in self.exact], dtype=bool)
        return np.append(numbers, False)[self.code]

    def of(self, sample: int) -> Any:
        """Return the target of a sample as it was given; raises QuestionComplaint where it has none."""
        code = self.code[sample]
        if code < 0:
            raise QuestionComplaint(self.lacking, "target")
        return self.given[code]


def targets_of(
    table: pd.DataFrame, samples: Samples, question: Question, targets: Mapping[Any, Any] | Hashable | None
) -> Targets:
    """Return the target of each sample: that of the question, one of a mapping, or the one in its rows of a column."""
    if targets is None:
        return Targets(np.zeros(len(samples), dtype=int), [question.target], [question.exact_target], "")
    if isinstance(targets, Mapping):
        keys = samples.labels.itertuples(index=False, name=None)
        one = samples.labels.shape[1] == 1
        given = [targets.get(key[0] if one else key) for key in keys]
        code, distinct = pd.factorize(pd.Series(given, dtype=object))
        return _targets(code, list(distinct), "it has no target; give each sample its own.")
    codes, (of_rows, distinct) = samples.codes, pd.factorize(table[targets])
    code, known = np.full(len(samples), -1), of_rows >= 0
    code[codes[known][::-1]] = of_rows[known][::-1]
    differing = np.bincount(codes[known & (of_rows != code[codes])], minlength=len(samples)) > 0
    code[differing] = -1
    lacking = f'it needs one target in column "{targets}" and has none, or several.'
    return _targets(code, distinct.tolist(), lacking)


def _targets(code: np.ndarray, given: list[Any], lacking: str) -> Targets:
    return Targets(np.asarray(code), given, [_exact(one) for one in given], lacking)


def _exact(given: Any) -> Decimal | None:
    try:
        return exact_setting(given, "target", "target")
    except QuestionComplaint:
        return None


def chosen_columns(table: Any, named: Sequence[Hashable]) -> Any:
    """Return the columns that are named; raises ReadingsComplaint for one that is not there, or twice."""
    columns = list(table.columns)
    there = ", ".join(map(str, columns))
    for name in named:
        if columns.count(name) == 0:
            raise ReadingsComplaint(f'There is no column "{name}" in the table; it has {there}.')
        if columns.count(name) > 1:
            raise ReadingsComplaint(f'There is more than one column "{name}" in the table: give each its own name.')
    return table[list(dict.fromkeys(named))]
