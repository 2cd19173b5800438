"""A table of samples → a table of results: it only groups and assembles; every number is that of one analysis."""

from collections.abc import Callable, Hashable, Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

import numpy as np
import pandas as pd

from meanlab.analysis import decide
from meanlab.core.complaints import Complaint, QuestionComplaint, ReadingsComplaint
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet

NUMBERS = ("n", "mean", "s", "low", "high", "difference", "statistic", "df", "p", "p_holm")
COLUMNS = (*NUMBERS, "procedure", "verdict", "flags")
LIMIT_SIGNS = {"<": "below", "≤": "below", ">": "above", "≥": "above"}


def analyse_many(
    table: pd.DataFrame,
    value: str,
    sample: str | Sequence[str],
    question: Question,
    targets: Mapping[Any, Any] | str | None = None,
    preparation: str | None = None,
    progress: Callable[[int, int], None] | None = None,
) -> pd.DataFrame:
    """Return one row a sample, in order of first appearance: the same numbers as ``analyse`` one by one.

    table        long table, one reading a row; ``value`` names the column of numbers, number texts or "<0.05";
                 another kind of table is used where its ``compute()`` gives a pandas one (Dask)
    sample       name of the column, or list of names, that tells the samples apart
    targets      each sample's own target: a mapping from the sample, or the name of a column
    preparation  name of the column with the preparation labels
    progress     called with (done, all)

    Columns after those of the sample: n, mean, s, low, high, difference, statistic, df, p, p_holm (Holm over the rows
    that have a p), procedure, verdict (by raw p), flags. A sample column that bears the name of a result column is
    called "… (sample)". Missing values are left away and counted in the flags.
    Raises Complaint, naming the sample, for columns that are not there, a sample without a target, or a bad reading.
    Source: Holm 1979.
    """
    keys = [sample] if isinstance(sample, str) else list(sample)
    named = [*keys, value, *([preparation] if preparation else []), *([targets] if isinstance(targets, str) else [])]
    readings = _chosen(table, named)
    labels = readings[keys].drop_duplicates().reset_index(drop=True)
    samples = _samples(readings, value, keys, targets if isinstance(targets, str) else None, preparation)
    rows = []
    for done, (key, group) in enumerate(zip(labels.itertuples(index=False, name=None), samples, strict=True), 1):
        try:
            asked = _with_target(question, targets, key if len(keys) > 1 else key[0], group)
            rows.append(_row(group, asked))
        except Complaint as complaint:
            in_words = ", ".join(map(str, key))
            raise type(complaint)(f'Sample "{in_words}": {complaint}', complaint.where) from None
        if progress is not None:
            progress(done, len(samples))
    results = _with_holm(pd.DataFrame(rows, columns=[name for name in COLUMNS if name != "p_holm"]), question.alpha)
    return pd.concat([labels.rename(columns=_free_name), results], axis=1)


@dataclass(frozen=True)
class _Sample:
    """The cells of one sample: entries that are not blank, their preparation labels, its targets, count of blanks."""

    entries: list[Any]
    preparations: list[Any] | None
    targets: list[Any]
    missing: int


def _samples(
    readings: pd.DataFrame, value: str, keys: list[str], targets: str | None, preparation: str | None
) -> list[_Sample]:
    """Return the samples in order of first appearance."""
    if readings.empty:
        return []
    codes = readings.groupby(keys, sort=False, dropna=False).ngroup().to_numpy()
    order = np.argsort(codes, kind="stable")
    entries = readings[value].tolist()
    blank = [gone or str(entry).strip() == "" for entry, gone in zip(entries, readings[value].isna(), strict=True)]
    labels = None if preparation is None else _labels(readings[preparation])
    aims = None if targets is None else readings[targets].tolist()
    found = []
    for places in np.split(order, np.flatnonzero(np.diff(codes[order])) + 1):
        there = [place for place in places.tolist() if not blank[place]]
        found.append(
            _Sample(
                [entries[place] for place in there],
                None if labels is None else [labels[place] for place in there],
                []
                if aims is None
                else list(dict.fromkeys(aims[place] for place in places if not pd.isna(aims[place]))),
                len(places) - len(there),
            )
        )
    return found


def _labels(column: pd.Series) -> list[str | None]:
    return [None if gone else str(label) for label, gone in zip(column.tolist(), column.isna(), strict=True)]


def _chosen(table: Any, named: Sequence[str]) -> pd.DataFrame:
    """Return the columns that are named, as a pandas table."""
    columns = list(table.columns)
    there = ", ".join(map(str, columns))
    for name in named:
        if columns.count(name) == 0:
            raise ReadingsComplaint(f'There is no column "{name}" in the table; it has {there}.')
        if columns.count(name) > 1:
            raise ReadingsComplaint(f'There is more than one column "{name}" in the table: give each its own name.')
    chosen = table[list(dict.fromkeys(named))]
    return chosen if isinstance(chosen, pd.DataFrame) else chosen.compute()


def _free_name(name: Hashable) -> Hashable:
    return f"{name} (sample)" if name in COLUMNS else name


def _with_target(question: Question, targets: Mapping[Any, Any] | str | None, key: Any, sample: _Sample) -> Question:
    if targets is None:
        return question
    if isinstance(targets, str):
        if len(sample.targets) != 1:
            count = len(sample.targets)
            raise QuestionComplaint(f'it has {count} targets in column "{targets}"; it needs one.', "target")
        return replace(question, target=sample.targets[0])
    if key not in targets:
        raise QuestionComplaint("it has no target; give each sample its own.", "target")
    return replace(question, target=targets[key])


def _row(sample: _Sample, question: Question) -> tuple[Any, ...]:
    flags = [f"{sample.missing} missing"] if sample.missing else []
    if not sample.entries:
        return (0, *[None] * 8, None, "not testable", "; ".join([*flags, "no reading"]))
    found = decide(_reading_set(sample), question)
    units, test, route = found.units, found.test, found.route
    scatter = None if units.sample is None else units.sample
    flags += [route.reasons[0]] if test is None else []
    offsets = (None,) * 3 if test is None else test.offsets
    difference = offsets[0] if test is not None else (scatter.difference if scatter else None)
    return (
        units.n,
        scatter.mean if scatter else None,
        scatter.s if scatter and units.n > 1 else None,
        None if test is None else test.interval.low,
        None if test is None else test.interval.high,
        difference,
        None if test is None else test.statistic,
        None if test is None else test.df,
        None if test is None else test.p_value,
        route.procedure,
        found.verdict,
        "; ".join(flags),
    )


def _reading_set(sample: _Sample) -> ReadingSet:
    values, censored = [], []
    for place, entry in enumerate(sample.entries):
        text = entry.strip() if isinstance(entry, str) else ""
        if text[:1] in LIMIT_SIGNS and text:
            limit = text.lstrip("<>≤≥=").strip()
            censored.append({"index": place, "kind": LIMIT_SIGNS[text[0]], "limit": limit or None, "typed": text})
        else:
            values.append(entry)
    if sample.preparations is not None and None in sample.preparations:
        raise ReadingsComplaint("a reading has no preparation label; give each reading one.", "preparations")
    labels = None if sample.preparations is None else tuple(sample.preparations)
    return ReadingSet(tuple(values), preparations=labels, censored=tuple(censored))  # type: ignore[arg-type]


def _with_holm(results: pd.DataFrame, alpha: float) -> pd.DataFrame:
    """Return the results with Holm's p over the rows that have a p, and a flag where it changes the rejection."""
    p = results["p"].to_numpy(dtype=float)
    adjusted = holm(p)
    results.insert(COLUMNS.index("p_holm"), "p_holm", adjusted)
    lost = (p < alpha) & (adjusted >= alpha)
    results.loc[lost, "flags"] = [f"{flags}; not after Holm".lstrip("; ") for flags in results.loc[lost, "flags"]]
    return results


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
