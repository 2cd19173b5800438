"""The invented sample sets of `sample_sets/`: readings as a technician has them, each with its question."""

import json
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property
from pathlib import Path
from typing import Any

FOLDER = Path(__file__).resolve().parents[1] / "sample_sets"
INDEX = "sets.json"


@dataclass(frozen=True)
class SampleSet:
    """One invented example.

    title, scenario  a few words, and one sentence
    path             the file with the readings
    pasted           True where its text is pasted, False where it is opened as a file
    fields           what the fields of the page hold, by their names
    route, verdict   the procedure that the rule picks (None: none) and the verdict it comes to
    """

    title: str
    scenario: str
    path: Path
    pasted: bool
    fields: Mapping[str, Any]
    route: str | None
    verdict: str

    @cached_property
    def content(self) -> str | bytes:
        """The text to paste, or the bytes of the file."""
        return self.path.read_text(encoding="utf-8") if self.pasted else self.path.read_bytes()


def sample_sets(folder: Path = FOLDER) -> tuple[SampleSet, ...]:
    """Return the sample sets of a folder in the order of its index; none where there is no such folder."""
    index = folder / INDEX
    if not index.is_file():
        return ()
    return tuple(
        SampleSet(
            title=given["title"],
            scenario=given["scenario"],
            path=folder / given["readings"],
            pasted=given["pasted"],
            fields=given["fields"],
            route=given["route"],
            verdict=given["verdict"],
        )
        for given in json.loads(index.read_text(encoding="utf-8"))
    )
