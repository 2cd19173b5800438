"""The child process that reads one workbook: the file comes through standard input, the sheets leave as JSON.

python -m meanlab.intake.reading_process xlsb 1610612736 30 < file
"""

import gc
import json
import sys
from typing import cast

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.child import packed
from meanlab.intake.containers import Workbook
from meanlab.intake.workbooks import read_kind


def main(kind: str, memory: str, seconds: str) -> None:
    """Read one workbook of this kind within so many bytes of memory and seconds of processor time."""
    _limit_own_process(int(memory), float(seconds))
    # millions of cells and no cycles among them: looking for some takes a third of the time
    gc.disable()
    data = sys.stdin.buffer.read()
    try:
        answer: dict[str, object] = {"sheets": packed(read_kind(data, cast(Workbook, kind)))}
    except IntakeComplaint as complaint:
        answer = {"complaint": str(complaint)}
    sys.stdout.buffer.write(json.dumps(answer, ensure_ascii=False, separators=(",", ":")).encode())


def _limit_own_process(memory: int, seconds: float) -> None:
    """Limit this process where the system can; elsewhere the parent watches alone."""
    try:
        import resource
    except ImportError:
        return
    for limit, most in (
        (resource.RLIMIT_AS, memory),
        (resource.RLIMIT_CPU, int(seconds) + 2),
        (resource.RLIMIT_CORE, 0),
    ):
        try:
            resource.setrlimit(limit, (most, most))
        except (ValueError, OSError):
            continue


if __name__ == "__main__":
    main(*sys.argv[1:4])
