"""What made a result: versions, time, and a fingerprint of the readings as typed and the question."""

import hashlib
import json
import platform
from dataclasses import fields
from datetime import UTC, datetime

import numpy
import scipy

import meanlab
from meanlab.core.question import Question
from meanlab.core.readings import ReadingSet
from meanlab.core.results import Provenance


def provenance_of(readings: ReadingSet, question: Question) -> Provenance:
    """Return versions, the time in UTC to the second, and the fingerprint."""
    versions = {
        "meanlab": meanlab.__version__,
        "python": platform.python_version(),
        "numpy": numpy.__version__,
        "scipy": scipy.__version__,
    }
    return Provenance(versions, datetime.now(UTC).isoformat(timespec="seconds"), fingerprint(readings, question))


def fingerprint(readings: ReadingSet, question: Question) -> str:
    """Return the SHA-256, in hexadecimal, of the readings as typed and of the question."""
    digest = hashlib.sha256()
    parts = {
        "typed": readings.typed,
        "censored": [[entry.index, entry.kind, str(entry.limit), entry.preparation] for entry in readings.censored],
        "positions": readings.positions,
        "preparations": readings.preparations,
        "left_out": sorted(readings.left_out.items()),
        "question": {field.name: str(getattr(question, field.name)) for field in fields(question)},
    }
    for name, part in parts.items():
        text = json.dumps([name, part], ensure_ascii=False, sort_keys=True)
        digest.update(text.encode("utf-8", "surrogatepass"))  # half a surrogate pair is no reason to refuse a result
    return digest.hexdigest()
