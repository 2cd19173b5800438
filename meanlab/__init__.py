"""meanlab: does the mean agree with the target, on which evidence, with which uncertainty?

    analysis = meanlab.analyse(["5.02", "5.04", "4.98"], meanlab.Question("5.00"))

Names are handed on when they are first used (PEP 562), so that a child process that only parses files starts without
the numerical libraries.
"""

from importlib import import_module
from typing import Any

__version__ = "1.0.0"

_HOMES = {
    "Intake": "meanlab.intake",
    "read": "meanlab.intake",
    "columns": "meanlab.intake",
    "ReadingSet": "meanlab.core.readings",
    "Question": "meanlab.core.question",
    "Analysis": "meanlab.core.results",
    "Plan": "meanlab.core.results",
    "Complaint": "meanlab.core.complaints",
    "analyse": "meanlab.analysis",
    "analyse_many": "meanlab.many",
    "power": "meanlab.planning",
    "power_agreement": "meanlab.planning",
    "plan_detection": "meanlab.planning",
    "plan_agreement": "meanlab.planning",
    "plan_interval": "meanlab.planning",
}

__all__ = [*_HOMES, "__version__"]


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'meanlab' has no attribute {name!r}")
    value = getattr(import_module(_HOMES[name]), name)
    globals()[name] = value
    return value


def __dir__() -> list[str]:
    return sorted(__all__)
