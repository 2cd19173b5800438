"""What the columns of a block are: readings, or counters, times, labels and units, which are never proposed."""

import re
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from itertools import pairwise

from meanlab.intake.blocks import Block
from meanlab.intake.characters import one_spelling
from meanlab.intake.found import Column
from meanlab.intake.table import FIRST_ROWS, sort_of
from meanlab.intake.units import is_unit, is_unmistakable
from meanlab.intake.words import is_summary, plain_word, word_set

_COUNTER = word_set(
    "no nr # run runno runnr rep repno replicate replicateno reading readingno index idx seq seqno sequence line "
    "lineno row rowno position pos vial vialno lfdnr lfnr nummer number num injection injectionno inj point "
    "measurement messung messungnr wiederholung spot shot scan cycle step count# i serialno item"
)
_LABEL = word_set(
    "sample sampleno samplenumber samplenr sampleid sampleidentifier samplecode samplename samplelabel probe "
    "probennr probenr probenummer probenname probenid proben specimen specimenno id code barcode labno labnumber "
    "labid order orderno auftrag auftragsnr batch batchno lot lotno charge chargennr label name type typ matrix "
    "material group product article well plate jobno job échantillon muestra site station location part partno "
    "teil teilnr"
)
_TIME = word_set(
    "time date datetime timestamp zeit datum uhrzeit elapsed elapsedtime runtime start startzeit end clock "
    "clocktime acquired measuredat measuredon day tag stunde hour dateandtime datetimeutc timeutc fecha hora "
    "heure jour"
)
PREPARATIONS = word_set(
    "prep preparation preparationno prepno prepid vial flask bottle aliquot digest digestion extract extraction "
    "weighing weighingno portion testportion ansatz einwaage aufschluss aufarbeitung probenvorbereitung subsample"
)
_UNIT = word_set("unit units einheit einheiten unité unidad uom")
_OTHER = word_set(
    "operator analyst user remark remarks comment comments note notes bemerkung bearbeiter instrument method "
    "gerät methode flag flags status initials checkedby"
)
_ANALYTE = word_set("parameter analyte test compound element component quantity messgröße determinand type typ")
_QUALIFIER = word_set("qualifier qual operatorsign sign vorzeichen symbol modifier relation lessthan <>")
_MARKS = word_set("< > <= >= =< => ≤ ≥ = ~")
_LIMITS = _MARKS - {"=", "~"}
_RUNNING = re.compile(r"(.*?)[\s_.#-]*(\d{1,3}|[a-hA-H]|[ivx]{1,4})", re.DOTALL)
_DURATION = re.compile(r"\d+(?:[.,]\d+)?\s?(?:s|sec|min|h|ms)", re.ASCII)
_LISTED = re.compile(r"#\d{1,6}[.):]?|\(?\d{1,6}(?:\.|\)|:)", re.ASCII)
_WHOLE = re.compile(r"\d{1,12}", re.ASCII)
MOST_COLUMNS = 5000


@dataclass(frozen=True)
class Role:
    """What a column is, with how many numbers or limits it holds in the rows looked at."""

    role: str
    numbers: int
    filled: int


def roles_of(block: Block, rows: Sequence[int] | None = None) -> list[Role]:
    """Return what each column of a block is, judged by its heading and by a sample of its rows."""
    rows = block.data if rows is None else rows
    width = min(block.width, MOST_COLUMNS)
    return [_role(block, column, sample_of(rows, width)) for column in range(width)]


def sample_of(rows: Sequence[int], width: int = 1) -> Sequence[int]:
    """Return rows to look at: all of a short block, the first and evenly spread ones of a long block."""
    most = max(30, min(5 * FIRST_ROWS, 60_000 // max(width, 1)))
    if len(rows) <= most:
        return rows
    return [*rows[: most // 2], *rows[most // 2 :: max(1, len(rows) // (most // 2))]]


def _role(block: Block, column: int, rows: Sequence[int]) -> Role:
    table = block.table
    sorts = Counter(sort_of(table, row, column) for row in rows)
    filled = sum(times for sort, times in sorts.items() if sort)
    numbers = sorts["number"] + sorts["limit"]
    texts = [text for row in rows if (text := table.text(row, column))]
    role = _role_of_filled(block, column, texts, sorts, filled) if filled else "empty"
    return Role(role, numbers, filled)


def _role_of_filled(block: Block, column: int, texts: list[str], sorts: Counter[str], filled: int) -> str:
    heading = block.heading_at(column)
    word = plain_word(heading.name or heading.text)
    marks = {one_spelling(text) for text in texts}
    if (marks <= _MARKS and marks & _LIMITS) or (word in _QUALIFIER and not sorts["number"]):
        return "qualifier"
    if word in _UNIT or (len(texts) > 1 and not word and all(is_unit(one) and is_unmistakable(one) for one in marks)):
        return "unit"
    if sorts["stamp"] * 2 >= filled or (word in _TIME and heading.text):
        return "time"
    if len(texts) > 1 and all(_DURATION.fullmatch(text) for text in texts):
        return "time"
    if word in PREPARATIONS and 1 < len(marks) < len(texts):
        return "preparation"
    if all(_LISTED.fullmatch(text) for text in texts) and is_count([text.strip("#(.):") for text in texts]):
        return "counter"
    numeric = sorts["number"] + sorts["limit"]
    if not numeric or (numeric + sorts["missing"] + sorts["word"]) * 2 < filled:
        return "analyte" if word in _ANALYTE else "label" if word in _LABEL else "text"
    return _role_of_numbers(word, texts, bool(heading.text))


def _role_of_numbers(word: str, texts: list[str], headed: bool) -> str:
    whole = all(_WHOLE.fullmatch(text) for text in texts)
    if whole and (word in _COUNTER or word in _LABEL or word in _ANALYTE or word in _OTHER):
        return "counter" if word in _COUNTER else "label"
    if whole and len({len(text) for text in texts}) == 1 and len(texts[0]) > 3 and any(t[0] == "0" for t in texts):
        return "label"
    if whole and is_count(texts) and (len(texts) > 2 or not headed):
        return "counter"
    return "summary" if word and is_summary(word) else "readings"


def is_label_word(word: str) -> bool:
    """Tell whether a heading names labels or counters, not readings: "Sample", "Run".

    >>> is_label_word("Sample"), is_label_word("Nitrate")
    (True, False)
    """
    return plain_word(word) in _LABEL | _COUNTER | _TIME | PREPARATIONS


def is_count(texts: Sequence[str]) -> bool:
    """Tell whether whole numbers count up by one: 1, 2, 3."""
    numbers = [int(float(text)) for text in texts[:FIRST_ROWS]]
    steps = [b - a for a, b in pairwise(numbers)]
    return len(numbers) > 1 and all(step == 1 for step in steps)


def listed(block: Block, roles: Sequence[Role], rows: Sequence[int] | None = None) -> list[Column]:
    """Return every column that holds something, as it is offered for a choice."""
    rows = block.data if rows is None else rows
    found = []
    for index, role in enumerate(roles):
        if role.role == "empty":
            continue
        heading = block.heading_at(index)
        first = [text for row in rows[:50] if (text := block.table.text(row, index))][:3]
        looked_at = max(1, len(sample_of(rows, len(roles))))
        count = role.numbers if looked_at >= len(rows) else round(role.numbers / looked_at * len(rows))
        found.append(
            Column(
                block.table.name,
                block.heading_text(index) or heading.text,
                heading.unit,
                count,
                index,
                role.role,
                len(rows),
                tuple(first),
                heading.name,
            )
        )
    return found


def replicates(block: Block, roles: Sequence[Role]) -> list[int]:
    """Return the columns whose headings run on: "rep 1", "rep 2", "rep 3"; [] where there are none."""
    groups: dict[str, list[int]] = {}
    for index, role in enumerate(roles):
        if role.role != "readings":
            continue
        found = _RUNNING.fullmatch(block.heading_text(index).strip())
        if found:
            groups.setdefault(plain_word(found[1]), []).append(index)
    best = max(groups.values(), key=len, default=[])
    return best if len(best) > 1 else []
