"""Files that are damaged or made to bring the server down: each is read within bounds or refused in one sentence.

Memory is measured in a process that only reads the file; the limits asserted are generous.
"""

import json
import random
import struct
import subprocess
import sys
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from made_workbooks import (
    MAIN,
    RELATIONS,
    SHARED_TEXTS,
    biff,
    compound,
    ods,
    rows,
    with_part,
    xls_stream,
    xlsb,
    xlsx,
    xlsx_parts,
    zipped,
)
from mutations import mutated

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.child import sheets_from_child
from meanlab.intake.workbooks import sheets_of

FILES = Path(__file__).parent / "files"
ROOT = Path(__file__).parents[2]
ONE = rows("<c><v>5.02</v></c>")

MEASURED = """
import json, sys, time
from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.workbooks import sheets_of

data = sys.stdin.buffer.read()
begin = time.perf_counter()
try:
    said = [len(sheets_of(data)[0].rows)]
except IntakeComplaint as complaint:
    said = str(complaint)
took = time.perf_counter() - begin
try:
    status = dict(line.split(":", 1) for line in open("/proc/self/status"))
    peak = int(status["VmHWM"].split()[0]) // 1024
except (OSError, KeyError):
    peak = 0
print(json.dumps({"said": said, "seconds": took, "megabytes": peak - len(data) // 2**20}))
"""


def measured(data: bytes) -> dict[str, Any]:
    """What came back, the seconds it took, and the peak memory in MB (0 where the system does not tell)."""
    done = subprocess.run(
        [sys.executable, "-W", "ignore", "-c", MEASURED], input=data, capture_output=True, cwd=ROOT, check=True
    )
    return dict(json.loads(done.stdout))


def sheets_of_one_part(content: str, count: int) -> bytes:
    parts = xlsx_parts(content)
    listed = "".join(f'<sheet name="S{n}" sheetId="{n}" r:id="rId1"/>' for n in range(count))
    parts["xl/workbook.xml"] = f'<workbook {MAIN} xmlns:r="{RELATIONS}"><sheets>{listed}</sheets></workbook>'
    return zipped(parts)


def with_lying_directory(data: bytes, part: str, size: int) -> bytes:
    """The same zip file, whose directory gives another size for one part (APPNOTE 6.3 §4.3.12: at offset 24)."""
    changed = bytearray(data)
    struct.pack_into("<I", changed, data.rfind(part.encode()) - 46 + 24, size)
    return bytes(changed)


ENTITIES = '<!ENTITY a0 "5.02">' + "".join(f'<!ENTITY a{n} "{f"&a{n - 1};" * 10}">' for n in range(1, 10))
LAUGHS = f"<!DOCTYPE x [{ENTITIES}]>"
OUTSIDE = '<!DOCTYPE x [<!ENTITY e SYSTEM "file:///etc/hostname">]>'


MANY_ATTRIBUTES = " ".join(f'a{n}="1"' for n in range(100_000))
MERGED = '<mergeCell ref="A1:A1048576"/>'
CORNER = '<row r="1048576"><c r="XFD1048576" s="0"/></row>'
REPEATED = '<table:table-row table:number-rows-repeated="99999999999"><table:table-cell '


def declared(part: str, declaration: str) -> bytes:
    parts = xlsx_parts(rows('<c t="inlineStr"><is><t>&a9;</t></is></c>'))
    parts[part] = declaration + str(parts[part])
    return zipped(parts)


@pytest.mark.parametrize(
    "data",
    [
        declared("xl/worksheets/sheet1.xml", LAUGHS),
        declared("xl/worksheets/sheet1.xml", OUTSIDE),
        declared("xl/workbook.xml", LAUGHS),
        declared("_rels/.rels", OUTSIDE),
        zipped(
            {
                "mimetype": "application/vnd.oasis.opendocument.spreadsheet",
                "META-INF/manifest.xml": "<m/>",
                "content.xml": LAUGHS + "<a>&a9;</a>",
            }
        ),
        f'{LAUGHS}<Workbook xmlns="urn:schemas-microsoft-com:office:spreadsheet">&a9;</Workbook>'.encode(),
    ],
)
def test_a_document_type_is_refused_wherever_it_stands(data: bytes) -> None:
    """Entities inside entities (a billion of them here) and entities that name a file are never resolved."""
    with pytest.raises(IntakeComplaint, match="document type declaration"):
        sheets_of(data)


@pytest.mark.parametrize(
    ("make", "words"),
    [
        (lambda: with_part("xl/sharedStrings.xml", bytes(400 * 2**20), SHARED_TEXTS), "unpacks to 400 MB"),
        (
            lambda: with_lying_directory(
                with_part("xl/worksheets/sheet1.xml", b" " * (400 * 2**20)), "xl/worksheets/sheet1.xml", 1000
            ),
            "damaged",
        ),
        (lambda: zipped({"a.xlsx": with_part("xl/x", bytes(300 * 2**20))}), "zip archive"),
        (lambda: zipped({**xlsx_parts(ONE), **{f"x/{n}": b"" for n in range(6000)}}), "6,005 parts"),
        (lambda: zipped({**xlsx_parts(ONE), **{f"{n:0400}": b"" for n in range(6000)}}), "parts"),
        (lambda: xlsx(*[ONE] * 1001), "1,001 sheets"),
        (lambda: sheets_of_one_part(rows(*["<c><v>5</v></c>"] * 20_000), 1000), "damaged"),
        (
            lambda: ods(
                '<table:table table:name="R"><table:table-row table:number-rows-repeated="1048576"><table:table-cell '
                'table:number-columns-repeated="16384" office:value-type="float" office:value="1"/></table:table-row>'
                "</table:table>"
            ),
            "2,000,000 filled cells",
        ),
        (
            lambda: xlsx(
                f"<sheetData><row>{''.join(f'<c><v>{n}</v></c>' for n in range(16_384))}</row>"
                + "".join(f'<row r="{n}"><c r="XFD{n}"><v>1</v></c></row>' for n in range(2, 500))
                + "</sheetData>"
            ),
            "6,000,000 cells",
        ),
        (lambda: xlsb([3.0], first_row=1_048_575, column=16_383), "60 seconds or 1,536 MB"),
        (
            lambda: xlsx('<sheetData><row r="9999999"><c r="ZZZ9999999"><v>5</v></c></row></sheetData>'),
            "no filled cell",
        ),
        (
            lambda: ods(
                f'<table:table table:name="R">{REPEATED}'
                'table:number-columns-repeated="-5"/></table:table-row></table:table>'
            ),
            "no filled cell",
        ),
        (
            lambda: ods(
                '<table:table table:name="R"><table:table-row table:number-rows-repeated="1048576"/>'
                f'{REPEATED}table:number-columns-repeated="16384" office:value-type="float" office:value="1"/>'
                "</table:table-row></table:table>"
            ),
            "no filled cell",
        ),
        (lambda: b"<html><table>" + b"<!" * 30_000, "no filled cell"),
    ],
    ids=lambda value: value if isinstance(value, str) else "",
)
def test_a_file_made_to_take_everything_takes_little_and_is_refused(make: Callable[[], bytes], words: str) -> None:
    """Each is refused with its reason within seconds and within 250 MB."""
    found = measured(make())
    assert words in found["said"]
    assert found["seconds"] < 20
    assert found["megabytes"] < 250


@pytest.mark.parametrize(
    "make",
    [
        lambda: xlsx(f'<sheetData><row r="1"><c r="A1"><v>5.02</v></c></row>{CORNER}</sheetData>'),
        lambda: xlsx(f"<sheetData>{'<a>' * 300_000}{'</a>' * 300_000}<row><c><v>5</v></c></row></sheetData>"),
        lambda: xlsx(f"<sheetData><row {MANY_ATTRIBUTES}><c><v>5</v></c></row></sheetData>"),
        lambda: xlsx(f"{ONE}<mergeCells>{MERGED * 60_000}</mergeCells>"),
        lambda: xlsx(
            "<cols>" + '<col min="1" max="16384" hidden="1"/>' * 40_000 + "</cols>" + rows('<c r="A1"><v>5</v></c>')
        ),
        lambda: with_part("xl/sharedStrings.xml", f"<sst {MAIN}>{'<si/>' * 300_000}</sst>", SHARED_TEXTS),
        lambda: with_part("xl/sharedStrings.xml", f"<sst {MAIN}><si><t>{'x' * 2**24}</t></si></sst>", SHARED_TEXTS),
        lambda: xlsx(rows(f"<c><v>{'9' * 1_000_000}</v></c><c><f>{'A1+' * 300_000}1</f></c>")),
        lambda: b"<html><table><tr><td rowspan=1048576 colspan=16384>1</tr>" + b"<tr><td>" * 9000,
    ],
    ids=["corner", "deep", "attributes", "merged", "columns", "texts", "long text", "long cells", "spans"],
)
def test_an_odd_file_with_a_reading_is_read_within_bounds(make: Callable[[], bytes]) -> None:
    """Absurd structures around one sound cell take seconds and less than 250 MB, and the cell is read."""
    found = measured(make())
    assert found["said"] == [1]
    assert found["seconds"] < 20
    assert found["megabytes"] < 250


def test_one_text_in_all_cells_is_kept_once_and_short() -> None:
    """A shared text of megabytes is cut where no heading or reading would be that long."""
    cells = rows(*['<c t="s"><v>0</v></c>'] * 1000)
    parts = xlsx_parts(cells, more_relations=SHARED_TEXTS)
    parts["xl/sharedStrings.xml"] = f"<sst {MAIN}><si><t>{'x' * 100_000}</t></si></sst>"
    (sheet,) = sheets_of(zipped(parts))
    assert {len(row[0].text) for row in sheet.rows} == {1001}


def test_a_child_that_takes_too_long_is_ended() -> None:
    """A sheet that would take minutes is given up after the seconds allowed, with the limit named."""
    data = xlsx(f"<sheetData><row>{'<c/>' * 4_000_000}</row></sheetData>")
    with pytest.raises(IntakeComplaint, match=r"more than 0\.5 seconds"):
        sheets_from_child(data, "xlsx", seconds=0.5)


def test_a_child_that_takes_too_much_memory_is_ended() -> None:
    """A workbook that needs more memory than allowed is given up, with the limit named."""
    data = xlsx(rows(*(f"<c><v>{n}.5</v></c>" for n in range(400_000))))
    with pytest.raises(IntakeComplaint, match="or 60 MB"):
        sheets_from_child(data, "xlsx", memory=60 * 2**20)


def test_a_large_file_comes_through_the_child_as_it_is() -> None:
    """Megabytes through the pipes give the same sheets as reading in this process: cells, kinds and remarks."""
    content = rows(*(f'<c><v>{n / 8}</v></c><c t="e"><v>#N/A</v></c><c/><c><f>A1</f></c>' for n in range(30_000)))
    data = zipped(xlsx_parts(content), zipfile.ZIP_STORED)
    assert len(data) > 2 * 2**20
    (sheet,) = sheets_of(data)
    assert len(sheet.rows) == 30_000
    assert [(cell.text, cell.kind) for cell in sheet.rows[9]] == [
        ("1.125", "number"), ("#N/A", "error"), ("", "text"), ("=A1", "formula"),
    ]  # fmt: skip
    assert "without a result" in sheet.remarks[0]


def test_characters_that_cannot_be_shown_are_taken_away() -> None:
    """Half a pair of UTF-16, a zero byte and control characters would stop the page or the notebook later."""
    (sheet,) = sheets_of(xlsx(rows('<c t="inlineStr"><is><t>_xD800_5_x0000_.0_x001B_2_x0085_</t></is></c>')))
    assert sheet.rows[0][0].text == "5.02"


def test_the_child_starts_without_the_large_libraries() -> None:
    """Numerical libraries, the page and openpyxl would take a second and a hundred megabytes at each start."""
    code = "import sys; import meanlab.intake.reading_process, meanlab.intake.old_workbooks; print(*sys.modules)"
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, cwd=ROOT, check=True, text=True)
    assert not {"numpy", "scipy", "pandas", "streamlit", "openpyxl", "psutil"} & set(done.stdout.split())


@pytest.mark.parametrize("name", ["two_decimals.xlsx", "filtered_rows.ods", "calculated.xls"])
def test_a_file_cut_short_anywhere_is_refused(name: str) -> None:
    """No part of a workbook that broke off is taken for the whole."""
    whole = (FILES / name).read_bytes()
    for length in range(1, len(whole) - 600, len(whole) // 40):
        with pytest.raises(IntakeComplaint):
            sheets_of(whole[:length], name)


def test_a_chain_that_bites_its_tail_is_damage() -> None:
    """The chain of sectors of an .xls that leads back to its start ends, as damage."""
    sound = compound({"Workbook": xls_stream(biff(0x203, struct.pack("<3Hd", 0, 0, 0, 5.02)))})
    place = sound.rfind(struct.pack("<3I", 1, 2, 3))
    with pytest.raises(IntakeComplaint, match="damaged"):
        sheets_of(sound[:place] + struct.pack("<3I", 1, 0, 3) + sound[place + 12 :])


def test_a_thousand_damaged_workbooks_give_sheets_or_a_complaint() -> None:
    """Drawn damage to sound workbooks never lets another error escape; the larger run is in tests/benchmarks."""
    sound = [(path.name, path.read_bytes()) for path in sorted(FILES.iterdir())]
    sound.append(("short.xls", compound({"Workbook": xls_stream(biff(0x203, struct.pack("<3Hd", 0, 0, 0, 5.02)))})))
    read = refused = 0
    for seed in range(1000):
        draw = random.Random(seed)
        name, data = draw.choice(sound)
        try:
            read += all(sheet.rows is not None for sheet in sheets_of(mutated(data, draw), name))
        except IntakeComplaint:
            refused += 1
    assert read > 100
    assert refused > 100
