"""A sample that cannot be judged beside others (limits, preparations, very long numbers): one analysis of its own."""

from dataclasses import replace
from typing import Any

from meanlab.analysis import decide
from meanlab.core.complaints import Complaint, ReadingsComplaint
from meanlab.core.question import Question
from meanlab.core.readings import Censored, ReadingSet
from meanlab.many.samples import Samples, Targets


def decided_alone(samples: Samples, sample: int, question: Question, targets: Targets) -> tuple[dict[str, Any], str]:
    """Return the columns of one sample, and the reason where nothing can be tested."""
    try:
        if not samples.counts[sample]:
            raise ReadingsComplaint("no reading", "readings")
        found = decide(reading_set(samples, sample), question_of(question, targets, sample))
    except Complaint as complaint:
        return {"procedure": None, "verdict": "not testable"}, str(complaint)
    units, test, plain = found.units, found.test, found.units.sample
    columns: dict[str, Any] = {"n": units.n, "procedure": found.route.procedure, "verdict": found.verdict}
    if plain is not None:
        columns |= {"mean": plain.mean, "s": plain.s if units.n > 1 else None, "difference": plain.difference}
    if test is None:
        return columns, found.route.reasons[0]
    columns |= {"low": test.interval.low, "high": test.interval.high, "difference": test.offsets[0]}
    return columns | {"statistic": test.statistic, "df": test.df, "p": test.p_value}, ""


def question_of(question: Question, targets: Targets, sample: int) -> Question:
    """Return the question with the target of a sample."""
    given = targets.of(sample)
    return question if given is question.target else replace(question, target=given)


def reading_set(samples: Samples, sample: int) -> ReadingSet:
    """Return the readings of one sample; raises ReadingsComplaint for an entry that is no reading."""
    cells, labels = samples.cells, samples.preparations
    entries = samples.entries(sample)
    found = [cells.reading(place) for place in entries]
    numbers = [place for place, one in enumerate(found) if not isinstance(one, Censored)]
    if labels is not None and any(labels[place] is None for place in entries):
        raise ReadingsComplaint("a reading has no preparation label; give each reading one.", "preparations")
    return ReadingSet(
        tuple(one for one in found if not isinstance(one, Censored)),
        cells.unit,
        preparations=None if labels is None else tuple(labels[place] for place in entries),
        censored=tuple(
            Censored(place, one.kind, one.limit, typed=one.typed)
            for place, one in enumerate(found)
            if isinstance(one, Censored)
        ),
        positions=tuple(numbers),
        typed=tuple(str(cells.given[entries[place]]) for place in numbers),
        decimal_sign=cells.sign,
        computed=any(bool(cells.computed[entries[place]]) for place in numbers),
    )
