"""Reads a workbook in a process of its own, so that a hostile or huge file can end that process and nothing else.

The file goes to the child (``reading_process.py``) through standard input, the sheets come back as JSON. The child
limits its own memory and processor time where the system knows such limits; here it is ended when it takes longer or
more all the same.
"""

import json
import os
import subprocess
import sys
import threading
import time
from contextlib import suppress
from itertools import islice
from pathlib import Path
from typing import IO, Any

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.containers import Workbook
from meanlab.intake.grid import Cell, Sheet

SECONDS = 60
MEMORY = 1536 * 2**20
_LOOK_EVERY = 0.1
_ROOT = Path(__file__).resolve().parents[2]


def sheets_from_child(data: bytes, kind: Workbook, seconds: float = SECONDS, memory: int = MEMORY) -> tuple[Sheet, ...]:
    """The sheets of a workbook of this kind, read by a child process within so many seconds and bytes of memory.

    Raises IntakeComplaint for what the child complains of, and when it had to be ended or ended itself.
    """
    child = subprocess.Popen(
        [sys.executable, "-m", "meanlab.intake.reading_process", kind, str(memory), str(seconds)],
        stdin=subprocess.PIPE,
        stdout=subprocess.PIPE,
        stderr=subprocess.DEVNULL,
        env={**os.environ, "PYTHONPATH": os.pathsep.join([str(_ROOT), *filter(None, sys.path)])},
        creationflags=getattr(subprocess, "CREATE_NO_WINDOW", 0),
    )
    try:
        answer = _answer(child, data, seconds, memory)
    finally:
        child.kill()
        child.wait()
        if child.stdout:
            child.stdout.close()
    if child.returncode not in (0, None) or not answer:
        raise _too_much(memory, seconds)
    found = json.loads(answer)
    if "complaint" in found:
        raise IntakeComplaint(found["complaint"])
    return unpacked(found["sheets"])


def _answer(child: "subprocess.Popen[bytes]", data: bytes, seconds: float, memory: int) -> bytes:
    end = time.monotonic() + seconds
    threading.Thread(target=_send, args=(child.stdin, data), daemon=True).start()
    # what communicate() was given to send is lost when its time runs out, so the thread sends
    child.stdin = None
    while True:
        with suppress(subprocess.TimeoutExpired):
            return child.communicate(timeout=_LOOK_EVERY)[0]
        if time.monotonic() > end or _memory_of(child.pid) > memory:
            raise _too_much(memory, seconds)


def _send(stream: IO[bytes], data: bytes) -> None:
    """Send the file; a child that ended before has its own reason."""
    with suppress(OSError), stream:
        stream.write(data)


def _memory_of(identity: int) -> int:
    import psutil

    try:
        return int(psutil.Process(identity).memory_info().rss)
    except psutil.Error:
        return 0


def _too_much(memory: int, seconds: float) -> IntakeComplaint:
    return IntakeComplaint(
        f"The workbook cannot be opened: it is damaged, or reading it takes more than {seconds:g} seconds or "
        f"{memory // 2**20:,} MB of memory, which is the limit. Open it where it was made and save only the sheet "
        "with the readings, as .xlsx or .csv."
    )


def packed(sheets: tuple[Sheet, ...]) -> list[dict[str, object]]:
    """Sheets as plain lists for JSON: each different cell once, the length of each row, the cells in order."""
    result: list[dict[str, object]] = []
    for sheet in sheets:
        places: dict[int, int] = {}
        cells: list[Cell] = []
        order: list[int] = []
        for row in sheet.rows:
            for cell in row:
                place = places.get(id(cell))
                if place is None:
                    place = places[id(cell)] = len(cells)
                    cells.append(cell)
                order.append(place)
        result.append(
            {
                "name": sheet.name,
                "cells": [(cell.text, cell.kind, cell.computed) for cell in cells],
                "lengths": [len(row) for row in sheet.rows],
                "order": order,
                "hidden": sheet.hidden,
                "hidden_rows": sorted(sheet.hidden_rows),
                "hidden_columns": sorted(sheet.hidden_columns),
                "remarks": sheet.remarks,
            }
        )
    return result


def unpacked(sheets: list[dict[str, Any]]) -> tuple[Sheet, ...]:
    """The sheets that were packed."""
    result = []
    for sheet in sheets:
        cells = [Cell(*cell) for cell in sheet["cells"]]
        order = map(cells.__getitem__, sheet["order"])
        rows = [tuple(islice(order, length)) for length in sheet["lengths"]]
        result.append(
            Sheet(
                name=sheet["name"],
                rows=rows,
                hidden=sheet["hidden"],
                hidden_rows=frozenset(sheet["hidden_rows"]),
                hidden_columns=frozenset(sheet["hidden_columns"]),
                remarks=tuple(sheet["remarks"]),
            )
        )
    return tuple(result)
