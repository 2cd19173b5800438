"""The record file: our own JSON file (*.meanlab.json) that holds one result, or a whole notebook, with every digit.

    {"meanlab record": "result", "format": 1, "analysis": {…}, "source": {…}, "written": {…}}
    {"meanlab record": "notebook", "format": 1, "entries": [{"digest": "…", "content": {…}}, …], "last": {…}}

The values are those of `exact_values`. The same facts give the same bytes. A later version reads every earlier format.
"""

import json
from collections.abc import Mapping, Sequence
from typing import Any, NoReturn

from meanlab.core.complaints import NotebookComplaint
from meanlab.core.exact_values import canonical

KIND = "meanlab record"
KINDS = ("result", "notebook")
FORMAT = 1
SUFFIX = ".meanlab.json"


def record_file(kind: str, parts: Mapping[str, Any]) -> bytes:
    """Return a record file; a member of a list stands on a line of its own.

    Raises NotebookComplaint for a text that cannot be written as UTF-8.

    >>> record_file("notebook", {"entries": [1, 2]}).decode()
    '{"meanlab record":"notebook","format":1,\\n"entries":[\\n1,\\n2\\n]\\n}\\n'
    """
    try:
        named = _named(parts)
    except UnicodeEncodeError as problem:
        raise NotebookComplaint(
            f"A text holds a character that cannot be written ({problem.object[problem.start]!r}): take it out."
        ) from problem
    return b'{"%s":"%s","format":%d,\n%s\n}\n' % (KIND.encode(), kind.encode(), FORMAT, named)


def _named(parts: Mapping[str, Any]) -> bytes:
    return b",\n".join(canonical(name) + b":" + _lines(values) for name, values in parts.items())


def parts_of(content: bytes) -> dict[str, Any]:
    """Return the parts of a record file, its kind among them.

    Raises NotebookComplaint for a file that is no record file or was written by a newer meanlab.
    """
    try:
        parts = strict_json(content.decode("utf-8-sig"))
    except (ValueError, RecursionError) as problem:
        raise NotebookComplaint(f"This is no record file of meanlab: it is no JSON ({problem}).") from problem
    if not isinstance(parts, dict) or parts.get(KIND) not in KINDS or type(parts.get("format")) is not int:
        raise NotebookComplaint('This is no record file of meanlab: it does not begin with "meanlab record".')
    if parts["format"] > FORMAT:
        raise NotebookComplaint(
            f"This record file was written by a newer meanlab (format {parts['format']}; this one knows {FORMAT}). "
            "Open it with the newer one."
        )
    return parts


def strict_json(text: str) -> Any:
    """Return the values of a JSON text; raises ValueError also for NaN, Infinity and a name that stands twice."""
    return json.loads(text, parse_constant=_no_number, object_pairs_hook=_once)


def _lines(values: Any) -> bytes:
    if isinstance(values, Sequence) and not isinstance(values, str) and values:
        return b"[\n" + b",\n".join(map(canonical, values)) + b"\n]"
    return canonical(values)


def _no_number(text: str) -> NoReturn:
    raise ValueError(f"{text} is no number")


def _once(pairs: list[tuple[str, Any]]) -> dict[str, Any]:
    values = dict(pairs)
    if len(values) != len(pairs):
        raise ValueError("a name stands there twice")
    return values
