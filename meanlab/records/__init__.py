"""What leaves the page: the result panel as a picture, the written record, the numbers, the record file.

Names are handed on when they are first used (PEP 562), so that nobody waits for a library that is not needed.
"""

from importlib import import_module
from typing import Any

_HOMES = {
    "written_record": "meanlab.records.document",
    "written_pages": "meanlab.records.pages",
    "table_csv": "meanlab.records.tables",
    "table_xlsx": "meanlab.records.tables",
    "numbers_csv": "meanlab.records.numbers",
    "panel_pdf": "meanlab.records.pdf",
    "panel_png": "meanlab.records.panel",
    "panel_svg": "meanlab.records.panel",
    "result_file": "meanlab.records.data",
}

__all__ = list(_HOMES)


def __getattr__(name: str) -> Any:
    if name not in _HOMES:
        raise AttributeError(f"module 'meanlab.records' has no attribute {name!r}")
    return getattr(import_module(_HOMES[name]), name)
