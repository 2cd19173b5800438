"""A table of samples → a table of results: it only groups and assembles; every number is that of one analysis."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from typing import Any

import pandas as pd
from statsmodels.stats.multitest import multipletests

from meanlab.analysis import decide
from meanlab.core.complaints import QuestionComplaint, ReadingsComplaint
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet

COLUMNS = ("n", "mean", "s", "low", "high", "difference", "statistic", "df", "p", "p_holm")
COLUMNS += ("procedure", "verdict", "flags")
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

    table        long table, one reading a row; ``value`` names the column of numbers, number texts or "<0.05"
    sample       name of the column, or list of names, that tells the samples apart
    targets      each sample's own target: a mapping from the sample, or the name of a column
    preparation  name of the column with the preparation labels
    progress     called with (done, all)

    Columns after those of the sample: n, mean, s, low, high, difference, statistic, df, p, p_holm (Holm over the rows
    that have a p), procedure, verdict (by raw p), flags. Missing values are left away and counted in the flags.
    Raises Complaint for columns that are not there or a sample without a target. Source: Holm 1979.
    """
    keys = [sample] if isinstance(sample, str) else list(sample)
    named = [*keys, value, *([preparation] if preparation else []), *([targets] if isinstance(targets, str) else [])]
    absent = [name for name in named if name not in table.columns]
    if absent:
        there = ", ".join(map(str, table.columns))
        raise ReadingsComplaint(f'There is no column "{absent[0]}" in the table; it has {there}.')
    groups = table.groupby(keys, sort=False, dropna=False)
    rows, total = [], groups.ngroups
    for done, (key, group) in enumerate(groups, 1):
        asked = _with_target(question, targets, key if len(keys) > 1 else key[0], group)
        rows.append((*key, *_row(group, value, preparation, asked)))
        if progress is not None:
            progress(done, total)
    columns = [*keys, *(name for name in COLUMNS if name != "p_holm")]
    return _with_holm(pd.DataFrame(rows, columns=columns), question.alpha)[[*keys, *COLUMNS]]


def _with_target(
    question: Question, targets: Mapping[Any, Any] | str | None, key: Any, group: pd.DataFrame
) -> Question:
    if targets is None:
        return question
    if isinstance(targets, str):
        found = group[targets].dropna().unique()
        if len(found) != 1:
            many = f'Sample "{key}" has {len(found)} targets in column "{targets}"; it needs one.'
            raise QuestionComplaint(many, "target")
        return replace(question, target=found[0])
    if key not in targets:
        raise QuestionComplaint(f'Sample "{key}" has no target.', "target")
    return replace(question, target=targets[key])


def _row(group: pd.DataFrame, value: str, preparation: str | None, question: Question) -> tuple[Any, ...]:
    present = group[group[value].notna()]
    missing = len(group) - len(present)
    flags = [f"{missing} missing"] if missing else []
    if present.empty:
        return (0, *[None] * 8, "not testable", "; ".join([*flags, "no reading"]))
    found = decide(_readings(present, value, preparation), question)
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


def _readings(group: pd.DataFrame, value: str, preparation: str | None) -> ReadingSet:
    values, censored = [], []
    for place, entry in enumerate(group[value].tolist()):
        text = entry.strip() if isinstance(entry, str) else ""
        if text[:1] in LIMIT_SIGNS and text:
            censored.append({"index": place, "kind": LIMIT_SIGNS[text[0]], "limit": text.lstrip("<>≤≥=").strip()})
        else:
            values.append(entry)
    labels = None if preparation is None else tuple(map(str, group[preparation]))
    return ReadingSet(tuple(values), preparations=labels, censored=tuple(censored))  # type: ignore[arg-type]


def _with_holm(results: pd.DataFrame, alpha: float) -> pd.DataFrame:
    """Return the results with Holm's p over the rows that have a p, and a flag where it changes the rejection."""
    results["p_holm"] = float("nan")
    tested = results["p"].notna()
    if tested.any():
        results.loc[tested, "p_holm"] = multipletests(results.loc[tested, "p"].astype(float), method="holm")[1]
    lost = tested & (results["p"].astype(float) < alpha) & (results["p_holm"] >= alpha)
    results.loc[lost, "flags"] = [f"{flags}; not after Holm".lstrip("; ") for flags in results.loc[lost, "flags"]]
    return results
