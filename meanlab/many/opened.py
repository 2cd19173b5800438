"""Single samples out of a table: their readings and their question, as one analysis takes them."""

from collections.abc import Hashable, Mapping
from functools import cached_property
from typing import Any

import numpy as np
import pandas as pd

from meanlab.core.numbers import as_typed
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.many.one_by_one import question_of, reading_set
from meanlab.many.samples import chosen_columns, samples_of, targets_of


class Opened:
    """The samples of a table in the order of their rows in the result of ``analyse_many``; it takes what that takes."""

    def __init__(
        self,
        table: pd.DataFrame,
        value: Hashable | list[Hashable],
        sample: Hashable | list[Hashable],
        question: Question,
        targets: Mapping[Any, Any] | Hashable | None = None,
        preparation: Hashable | None = None,
    ) -> None:
        keys, values = ([*named] if isinstance(named, list | tuple) else [named] for named in (sample, value))
        further = [one for one in (preparation, None if isinstance(targets, Mapping) else targets) if one is not None]
        chosen = chosen_columns(table, [*keys, *values, *further])
        self._samples = samples_of(chosen, values, keys, preparation, None)
        self._targets = targets_of(chosen, self._samples, question, targets)
        self._question = question

    def __len__(self) -> int:
        return len(self._samples)

    @property
    def sign(self) -> str:
        """The decimal sign of the readings."""
        return self._samples.cells.sign

    def name(self, place: int) -> str:
        """Return the name of a sample: its labels with commas between."""
        return self.names[place]

    @cached_property
    def names(self) -> list[str]:
        """The names of all samples."""
        labels = self._samples.labels
        return [", ".join(map(str, one)) for one in zip(*(labels[name].tolist() for name in labels), strict=True)]

    def readings(self, place: int) -> ReadingSet:
        """Return the readings of a sample; raises ReadingsComplaint where it has none or one cannot be read."""
        return reading_set(self._samples, place)

    def question(self, place: int) -> Question:
        """Return the question with the target of a sample; raises QuestionComplaint where it has none."""
        return question_of(self._question, self._targets, place)

    def entries(self, place: int) -> list[tuple[str, str]]:
        """Return the entries of a sample as typed, each with the label of its preparation ("" without)."""
        cells, labels = self._samples.cells, self._samples.preparations
        return [
            (_typed(cells.given[entry], cells.sign), "" if labels is None else str(labels[entry]))
            for entry in self._samples.entries(place)
        ]

    def target_text(self, place: int) -> str:
        """Return the target of a sample as it was given, "–" where it has none."""
        return _typed(self._targets.of(place), self.sign) if self._targets.usable[place] else "–"

    def targets(self) -> np.ndarray:
        """Return the targets as doubles, nan where there is none, shape (samples,)."""
        numbers = [np.nan if one is None else float(one) for one in self._targets.exact]
        return np.array([*numbers, np.nan])[self._targets.code]


def _typed(entry: Any, sign: str) -> str:
    """The text of an entry; a stored number with the decimal sign of the texts beside it."""
    return entry.strip() if isinstance(entry, str) else as_typed(entry).replace(".", sign)
