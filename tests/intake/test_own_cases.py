"""More entries, columns, lists and tables as people type and paste them, each with the answer of a technician.

Invented for this project; the answers follow from the texts themselves.
"""

import pytest
from judging import problems

import meanlab

PLAIN = {"rejected": 0, "missing": 0, "censored": []}


def lines(*parts: str) -> str:
    return "\n".join(parts) + "\n"


def below(index, limit):
    return {"index": index, "kind": "below", "limit": limit}


def above(index, limit):
    return {"index": index, "kind": "above", "limit": limit}


def column(*values, **more):
    return {"values": list(values), **PLAIN, **more}


NUMERALS = [
    (lines("7.31", "7.29", "7.33"), column(7.31, 7.29, 7.33, decimals=2, quiet=True)),
    (lines("7,31", "7,29", "7,33"), column(7.31, 7.29, 7.33, decimals=2, quiet=True)),
    (lines("0.50", "0.5", ".5", "5."), column(0.5, 0.5, 0.5, 5.0, decimals=2)),
    (lines("2,340.5", "2,351.0", "998.5"), column(2340.5, 2351.0, 998.5, decimals=1)),
    (lines("2.340,5", "2.351,0", "998,5"), column(2340.5, 2351.0, 998.5, decimals=1)),
    (lines("2\u202f340,5", "2\u202f351,0"), column(2340.5, 2351.0)),
    (lines("2’340.5", "2’351.0"), column(2340.5, 2351.0)),
    (lines("2 340.5", "2 351.0", "998.5"), column(2340.5, 2351.0, 998.5)),
    (lines("1.234.567,8", "2.345.678,9"), column(1234567.8, 2345678.9)),
    (lines("1,234,567", "1,234,890"), column(1234567.0, 1234890.0)),
    (lines("0,250", "1,250"), column(0.25, 1.25, decimals=3)),
    (lines("2,500", "987", "3,120"), column(2500.0, 987.0, 3120.0, warnings_any_of=["thousands"])),
    (lines("9.81", "9,79", "9.80"), column(9.81, 9.79, 9.80, warnings_any_of=["decimal sign is mixed"])),
    (lines("6.1e-3", "6.3E-03", "5.9e-3"), column(0.0061, 0.0063, 0.0059)),
    (lines("6.1 E-3", "6.3 E-3"), column(0.0061, 0.0063)),
    (lines("6,1·10^-3", "6,3·10^-3"), column(0.0061, 0.0063)),
    (lines("6.1x10^4", "6.3x10^4"), column(61000.0, 63000.0)),
    (lines("2.9×10⁵ CFU/mL", "3.1×10⁵ CFU/mL"), column(290000.0, 310000.0, unit="CFU/mL")),
    (lines("10^5", "10^4"), column(100000.0, 10000.0)),
    (lines("−0.12", "0.08"), column(-0.12, 0.08)),
    (lines("- 0.12 g", "+ 0.08 g"), column(-0.12, 0.08, unit="g")),
    (lines("1234,5", "1.241,0"), column(1234.5, 1241.0)),
    (lines("00.5", "01.5"), column(0.5, 1.5)),
]
UNITS = [
    (lines("51.2 µm", "50.9 μm"), column(51.2, 50.9, unit="µm", quiet=True)),
    (lines("3.1 mg/l", "3.2 mg/L"), column(3.1, 3.2, unit="mg/l")),
    (lines("3.1 mg·L⁻¹", "3.2 mg L-1"), column(3.1, 3.2, unit="mg·L⁻¹")),
    (lines("Conc (ug/mL)", "3.1 µg/mL", "3.2 µg/mL"), column(3.1, 3.2, unit="ug/mL", name="Conc")),
    (lines("12.1 foo", "12.3 foo"), column(12.1, 12.3, unit="foo")),
    (lines("12.1 g", "12.3", "12.2 g"), column(12.1, 12.3, 12.2, unit="g", warnings_any_of=["no unit"])),
    (lines("3.1 (mg/L)", "3.2 (mg/L)"), column(3.1, 3.2, unit="mg/L")),
    (lines("5.1 %", "5.2 %"), column(5.1, 5.2, unit="%", quiet=True)),
    (lines("5.1 % (m/m)", "5.2 % (m/m)"), column(5.1, 5.2, unit="% (m/m)")),
    (lines("4.2 g/100 g", "4.3 g/100 g"), column(4.2, 4.3, unit="g/100 g")),
    (lines("Nitrate (mg/L)", "5.1 µg/L"), {"refused": True, "must_mention": ["mg/L", "µg/L", "line 2"]}),
    (lines("5.1 ppm", "5.2 mg/L"), {"refused": True, "must_mention": ["ppm", "mg/L"]}),
    (lines("5.1 mg/L", "<50 µg/L"), {"refused": True, "must_mention": ["unit"]}),
    (lines("Nitrate (mg/L)", "5.1 J", "5.2"), column(5.1, 5.2, unit="mg/L", warnings_any_of=["Marked"])),
]
HEADINGS = [
    (lines("Nitrate [mg/L]:", "5.1", "5.2"), column(5.1, 5.2, name="Nitrate", unit="mg/L")),
    (lines("Nitrate in mg/L", "5.1", "5.2"), column(5.1, 5.2, name="Nitrate", unit="mg/L")),
    (lines("Thickness / µm", "51.2", "50.9"), column(51.2, 50.9, name="Thickness", unit="µm")),
    (lines("T/°C", "21.5", "21.4"), column(21.5, 21.4, name="T", unit="°C")),
    (lines("c(NO3-) / (mg/L)", "5.1", "5.2"), column(5.1, 5.2, name="c(NO3-)", unit="mg/L")),
    (lines("Nitrate (as N) [mg/L]", "5.1", "5.2"), column(5.1, 5.2, name="Nitrate (as N)", unit="mg/L")),
    (lines("Abs (540 nm)", "0.41", "0.42"), column(0.41, 0.42, name="Abs (540 nm)", unit=None)),
    (lines("mg/L", "5.1", "5.2"), column(5.1, 5.2, name=None, unit="mg/L")),
    (lines("pH", "7.1", "7.2"), column(7.1, 7.2, name="pH", unit=None, quiet=True)),
    (lines("pH [-]", "7.1", "7.2"), column(7.1, 7.2, name="pH", unit=None)),
    (lines("spot 3", "47.1", "47.2"), column(47.1, 47.2, name="spot 3")),
    (lines("Turbidity", "(NTU)", "0.41", "0.43"), column(0.41, 0.43, name="Turbidity", unit="NTU")),
    (lines("# Nitrate (mg/L)", "5.1", "5.2"), column(5.1, 5.2, name="Nitrate", unit="mg/L")),
    (lines("Analyst: M. Keel", "Date: 2026-03-04", "5.1", "5.2"), column(5.1, 5.2, name=None)),
    (
        lines("Worksheet: WS-7", "Cell length: 10 mm", "", "Nitrate (mg/L)", "5.1", "5.2"),
        column(5.1, 5.2, name="Nitrate", unit="mg/L"),
    ),
    (lines("Nitrat, gesamt [mg/l]", "5,1", "5,2"), column(5.1, 5.2, name="Nitrat, gesamt", unit="mg/l")),
    (lines("Nitrate\tmg/L", "5.1", "5.2"), column(5.1, 5.2, name="Nitrate", unit="mg/L")),
    (lines("Nitrate-N (mg/L as N)", "5.1", "5.2"), column(5.1, 5.2, name="Nitrate-N", unit="mg/L as N")),
    (lines("2025", "12.1", "12.4", "11.9"), column(2025.0, 12.1, 12.4, 11.9, warnings_any_of=["2025"])),
    (lines("pH 7.21", "pH 7.19"), column(7.21, 7.19, name="pH")),
    (lines("Nitrate 5.1 mg/L", "Nitrate 5.2 mg/L"), column(5.1, 5.2, name="Nitrate", unit="mg/L")),
]
LISTS = [
    ("4.1 4.2 4.3", column(4.1, 4.2, 4.3)),
    ("4.1, 4.2, 4.3", column(4.1, 4.2, 4.3)),
    ("4,1, 4,2, 4,3", column(4.1, 4.2, 4.3)),
    ("4,1 4,2 4,3", column(4.1, 4.2, 4.3)),
    ("4,1; 4,2; 4,3", column(4.1, 4.2, 4.3)),
    ("[4.1, 4.2, 4.3]", column(4.1, 4.2, 4.3)),
    ("4,01,4,02,4,03", column(4.01, 4.02, 4.03, warnings_any_of=["comma"])),
    ("Nitrate (mg/L)\t4.1\t4.2\t4.3", column(4.1, 4.2, 4.3, name="Nitrate", unit="mg/L")),
    (lines("4.1,", "4.2,", "4.3"), column(4.1, 4.2, 4.3)),
    (lines("4.1;", "4.2;"), column(4.1, 4.2)),
    (lines("4.1, 4.2, 4.3,", "4.2, 4.1"), column(4.1, 4.2, 4.3, 4.2, 4.1)),
    (lines("'4.1'", "'4.2'"), column(4.1, 4.2)),
    (lines('"4,1"', '"4,2"'), column(4.1, 4.2)),
    ("12,14,13,15", {"needs_choice": True, "choices_include": ["12,14"]}),
    ("Readings: 4.1, 4.2, 4.3", column(4.1, 4.2, 4.3, name="Readings")),
    ("Nitrate (mg/L) = 4,1 4,2 4,3", column(4.1, 4.2, 4.3, name="Nitrate", unit="mg/L")),
    ("x <- c(4.1, 4.2, 4.3)", column(4.1, 4.2, 4.3, name="x")),
    ("Rep 1 4.1  Rep 2 4.2", column(4.1, 4.2)),
    ("4.1, 4.2 and 4.3", column(4.1, 4.2, 4.3)),
    ("4.1, 4.2,4.3", column(4.1, 4.2, 4.3)),
    ("4.1 / 4.2 / 4.3", column(4.1, 4.2, 4.3)),
    ("0,412,0,415,0,411", column(0.412, 0.415, 0.411, warnings_any_of=["comma"])),
    ("4.1 mg/L, 4.2 mg/L", column(4.1, 4.2, unit="mg/L")),
    ("4.1 mg/L 4.2 mg/L", {"refused": True, "must_mention": ["more than one number"]}),
    ("Rep1=4.1; Rep2=4.2", column(4.1, 4.2)),
    (lines("4.1; rejected", "4.2"), column(4.1, 4.2, warnings_any_of=["rejected"])),
    ("4.1,4.2;4.3", {"values": [4.3], "rejected": 1, "must_mention": ["4.1,4.2"]}),
]
BEFORE = [
    (lines("1. 4.1", "2. 4.2", "3. 4.3"), column(4.1, 4.2, 4.3)),
    (lines("1) 4,1", "2) 4,2"), column(4.1, 4.2)),
    (lines("(1) 4.1", "(2) 4.2"), column(4.1, 4.2)),
    (lines("No. 1 4.1", "No. 2 4.2"), column(4.1, 4.2)),
    (lines("a) 4.1", "b) 4.2"), column(4.1, 4.2)),
    (lines("• 4.1", "• 4.2"), column(4.1, 4.2)),
    (lines("1 4,1", "2 4,2", "3 4,3"), column(4.1, 4.2, 4.3)),
    (lines("1\t4.1", "2\t<0.5"), column(4.1, censored=[below(1, 0.5)])),
    (lines("x1 = 4.1", "x2 = 4.2"), column(4.1, 4.2)),
    (lines("Rep 1: 4.1 mg/L", "Rep 2: 4.2 mg/L"), column(4.1, 4.2, unit="mg/L")),
    (lines("24-0031 4.1", "24-0032 4.2"), column(4.1, 4.2)),
    (lines("[09:12:01] 4.1", "[09:12:31] 4.2"), column(4.1, 4.2)),
    (lines("04.03.2026 09:12 4,1", "04.03.2026 09:14 4,2"), column(4.1, 4.2)),
    (lines("2026-03-04T09:12:00Z,4.1", "2026-03-04T09:14:00Z,4.2"), column(4.1, 4.2)),
    (lines("1 - 4.1", "2 - 4.2", "3 - 4.3"), column(4.1, 4.2, 4.3)),
    (lines("1.\t4.1", "2.\t4.2"), column(4.1, 4.2)),
    (lines("Sample 12A 4.1", "Sample 12B 4.2"), column(4.1, 4.2)),
    (lines("10 - 12", "11 - 13"), {"refused": True, "must_mention": ["range of numbers"]}),
    (lines("minus 4.1", "minus 4.2"), {"refused": True}),
    (lines("pH: 7.02", "Temp: 21.5"), column(7.02, 21.5, warnings_any_of=["different names"])),
    (lines("3,79: 8,69", "4,42: 5,88"), {"refused": True}),
    (lines("3,12  5,93  5,16", "4,20  3,39  1,64"), {"needs_choice": True}),
    (lines("8,12 <", "1,64", "7,19"), {"values": [1.64, 7.19], "rejected": 1}),
    (lines("4.1\tx 4.2", "4.3\tx 4.4"), column(4.1, 4.3, warnings_any_of=["4.2"])),
    (lines("4.1\tx 4.2 4.3"), column(4.1, warnings_any_of=["4.2"])),
    (lines("- 4.1", "- 4.2"), {"refused": True, "must_mention": ["list mark"]}),
    (lines("5. 02", "5. 04"), {"refused": True, "must_mention": ["5.02"]}),
]
KEPT_APART = [
    (
        lines("<0.05", "≤ 0.1", ">9", "≥ 9.5"),
        {"values": [], "censored": [below(0, 0.05), below(1, 0.1), above(2, 9.0), above(3, 9.5)]},
    ),
    (lines("&lt;0.05", "0.12"), column(0.12, censored=[below(0, 0.05)])),
    (lines("< 0,05 mg/l", "0,12 mg/l"), column(0.12, censored=[below(0, 0.05)], unit="mg/l")),
    (lines("less than 0.05", "0.12"), column(0.12, censored=[below(0, 0.05)])),
    (lines("ND (0.05)", "0.12"), column(0.12, censored=[below(0, 0.05)], warnings_any_of=["limit"])),
    (lines("<LOQ", "0.12", "BDL"), column(0.12, censored=[below(0, None), below(2, None)])),
    (lines("not detected", "0.12"), column(0.12, censored=[below(0, None)])),
    (lines("0.12", "TNTC", "OL"), column(0.12, censored=[above(1, None), above(2, None)])),
    (lines("0.12", "out of range"), column(0.12, censored=[above(1, None)], warnings_any_of=["range"])),
    (lines("0.12", "NA", "n/a", "-", "…", "not measured"), {"values": [0.12], "missing": 5, "rejected": 0}),
    (lines("0.12", "#N/A", "#WERT!", "Err:502"), {"values": [0.12], "missing": 3, "warnings_any_of": ["error"]}),
    (lines("0.12", "-999", "0.13"), {"values": [0.12, -999.0, 0.13], "warnings_any_of": ["no value"]}),
    (lines("0.12", "±0.3"), {"values": [0.12], "rejected": 1}),
    (lines("0.12", "0.10-0.14"), {"values": [0.12], "rejected": 1, "must_mention": ["range of numbers"]}),
    (lines("0.12 ± 0.03 mg/L", "0.13 ± 0.03 mg/L"), column(0.12, 0.13, unit="mg/L", warnings_any_of=["uncertainty"])),
    (lines("0.12 ± 0.03 (k=2)", "0.13"), column(0.12, 0.13, warnings_any_of=["uncertainty"])),
    (lines("0.12 ± 3 %", "0.13 ± 3 %"), column(0.12, 0.13, unit=None, warnings_any_of=["uncertainty"])),
    (lines("0.12 [0.11; 0.13]", "0.13"), column(0.12, 0.13, warnings_any_of=["0.11"])),
    (lines("0.12, outlier", "0.13 - rejected"), column(0.12, 0.13, warnings_any_of=["outlier"])),
    (lines("0.12", "-----", "0.13"), {"values": [0.12, 0.13], "missing": 1}),
    (lines("0.120(3)", "0.130(3)"), column(0.12, 0.13, warnings_any_of=["uncertainty"])),
    (lines("0.12*", "0.13"), column(0.12, 0.13, warnings_any_of=["*"])),
    (lines("0.12 H", "0.13"), column(0.12, 0.13, warnings_any_of=["H"])),
    (lines("~0.12", "0.13"), column(0.12, 0.13, warnings_any_of=["~0.12"])),
    (lines("0.12", "# 0.13", "0.14"), column(0.12, 0.14, warnings_any_of=["0.13"])),
]
NOT_READ = [
    (lines("12,3O", "12,31"), {"values": [12.31], "rejected": 1, "must_mention": ["Line 1", "12,30"]}),
    (lines("5.O2", "5.04"), {"values": [5.04], "rejected": 1, "must_mention": ["5.02"]}),
    (lines("5. 02", "5.04"), {"values": [5.04], "rejected": 1, "must_mention": ["5.02"]}),
    (lines("5.04", "5.02.1"), {"values": [5.04], "rejected": 1}),
    (lines("(0.05)", "0.08"), {"values": [0.08], "rejected": 1, "must_mention": ["brackets"]}),
    (lines("5.02", "1.2 x 103"), {"values": [5.02], "rejected": 1, "must_mention": ["exponent"]}),
    (lines("5.02", "5.04 and 5.06"), {"values": [5.02], "rejected": 1}),
    (lines("5.02", "1e400"), {"values": [5.02], "rejected": 1, "must_mention": ["1e400"]}),
    (lines("5.02", "9" * 45), {"values": [5.02], "rejected": 1}),
    (lines("5.02", "1,234"), {"values": [5.02], "rejected": 1, "must_mention": ["thousands"]}),
    (lines("5.02", "=5.04"), {"values": [5.02], "rejected": 1, "must_mention": ["formula"]}),
    (lines("5.02", "@SUM(A1:A3)"), {"values": [5.02], "rejected": 1, "must_mention": ["formula"]}),
    (lines("5.02", "3. Mar", "5.03"), {"values": [5.02, 5.03], "rejected": 1, "must_mention": ["date"]}),
    (lines("09:12", "09:14"), {"refused": True, "must_mention": ["time"]}),
    (lines("alpha", "beta"), {"refused": True, "must_mention": ["not a number"]}),
    (lines("5", "all", "of", "this", "is", "only", "prose"), {"refused": True, "must_mention": ["6 of 7"]}),
    (lines("-", "-"), {"refused": True}),
    ("", {"refused": True, "must_mention": ["nothing"]}),
    (lines("Mean 5.02"), {"refused": True, "must_mention": ["Mean"]}),
]
TABLES = [
    (lines("Run,Value", "1,48", "2,47", "3,48"), column(48.0, 47.0, 48.0, name="Value")),
    (lines("A,B", "12,14", "13,15"), {"needs_choice": True, "choices_include": ["A", "B"]}),
    (lines("5.1\t7.2", "5.2\t7.3"), {"needs_choice": True}),
    (lines("1 234", "2 241", "3 228"), column(234.0, 241.0, 228.0)),
    (lines("12 345", "12 410"), column(12345.0, 12410.0, warnings_any_of=["blank"])),
    (lines("Sample\tNitrate", "QC-1\t5.1", "QC-2\t5.2"), column(5.1, 5.2, name="Nitrate")),
    (
        lines("Sample\tNitrate", "QC-1\t5.1", "QC-1\t5.2", "QC-2\t9.1"),
        {"needs_choice": True, "choices_include": ["QC-2"]},
    ),
    (lines("Time (min),Turbidity (NTU)", "0,0.41", "5,0.43"), column(0.41, 0.43, name="Turbidity", unit="NTU")),
    (
        lines("Nitrate\t5.1\t5.2\t5.3", "Chloride\t24.1\t24.2\t24.3"),
        {"needs_choice": True, "choices_include": ["Chloride"]},
    ),
    (lines("Nitrate (mg/L)", "5.1", "5.2", "", "Chloride (mg/L)", "24.1", "24.2"), {"needs_choice": True}),
    (lines("5.1", "5.2", "Mean", "5.15", "SD", "0.07"), column(5.1, 5.2, warnings_any_of=["mean"])),
    (lines("5.1", "5.2", "n = 2", "x̄ = 5.15"), column(5.1, 5.2, warnings_any_of=["mean"])),
    (
        lines("5.10", "5.20", "5.30", "5.20", "5.200"),
        {"values": [5.1, 5.2, 5.3, 5.2, 5.2], "warnings_any_of": ["mean"]},
    ),
    (lines("Nitrate", "5.1", "Nitrate", "5.2"), column(5.1, 5.2, warnings_any_of=["heading comes again"])),
    (lines("5.1", "", "broken vial", "5.2"), {"values": [5.1, 5.2], "rejected": 1, "must_mention": ["Line 3"]}),
    (lines("Nitrate  Chloride", "5.1  24.1", "5.2  24.2"), {"needs_choice": True, "choices_include": ["Chloride"]}),
]
GROUPS = {
    "numerals": NUMERALS,
    "units": UNITS,
    "headings": HEADINGS,
    "lists": LISTS,
    "before": BEFORE,
    "kept apart": KEPT_APART,
    "not read": NOT_READ,
    "tables": TABLES,
}


@pytest.mark.parametrize(
    ("text", "expected"),
    [pytest.param(*case, id=f"{group}: {case[0][:40]!r}") for group, cases in GROUPS.items() for case in cases],
)
def test_a_pasted_text_is_read_as_a_technician_would(text, expected):
    """Values, limits, missing and unread entries, unit, name and what is said about them."""
    assert problems(expected, meanlab.read(text).to_dict()) == []


FILES = [
    ("Nitrat [mg/l]\n5,1\n5,2\n", {}, column(5.1, 5.2, unit="mg/l")),
    ('Run,Nitrate (mg/L)\n1,"5,1"\n2,"5,2"\n', {}, column(5.1, 5.2, unit="mg/L")),
    ('Run,Nitrate,Remark\n1,5.1,"Keel, M."\n2,5.2,"said ""so"""\n', {}, column(5.1, 5.2, name="Nitrate")),
    ("Value;Other\n1,234;0,5\n1,241;0,6\n", {"column": "Value"}, column(1.234, 1.241)),
    ("Run,Nitrate\n1,5.1\n2,\n3,5.3\n", {}, {"values": [5.1, 5.3], "missing": 1, "quiet": True}),
    ("Run,Nitrate\n1,5.1\n2\n3,5.3\n", {}, {"values": [5.1, 5.3], "missing": 1, "must_mention": ["line 3 has 1"]}),
    ("Run,Nitrate\n1,5.1\n2,5.2,x,y\n3,5.3\n", {}, column(5.1, 5.2, 5.3, warnings_any_of=["line 3 has 4"])),
    ("Run,Cl (mg/L)\n1,24,1\n2,24,3\n", {}, {"refused": True, "must_mention": ["2 columns", "3 fields"]}),
    ("Analyte,Value,Unit\nA,0.12,mg/L\nA,50,µg/L\n", {}, {"refused": True, "must_mention": ["mg/L", "µg/L"]}),
    ("Sample,Result,Unit\nQ,5.1,mg/L\nQ,5.2,mg/L\n", {}, column(5.1, 5.2, unit="mg/L")),
    ("x,Sign,Value\na,,0.12\nb,<,0.05\n", {}, column(0.12, censored=[below(1, 0.05)], warnings_any_of=["Sign"])),
    ("Time,Turbidity\ns,NTU\n0,0.41\n1,0.43\n", {}, column(0.41, 0.43, name="Turbidity", unit="NTU")),
    ("Parameter,Result\nNitrate,5.1\nChloride,24\n", {}, {"needs_choice": True, "choices_include": ["Chloride"]}),
    ("Parameter,Result\nNitrate,5.1\nChloride,24\n", {"where": {"Parameter": "nitrate"}}, column(5.1)),
    (
        "Parameter,Result\nNitrate,5.1\n",
        {"where": {"Parameter": "Iron"}},
        {"refused": True, "must_mention": ["Iron", "Nitrate"]},
    ),
    ("Run,Nitrate\n1,5.1\n", {"column": "Iron"}, {"refused": True, "must_mention": ["Iron", "Nitrate"]}),
    ("Run,Nitrate\n1,5.1\n", {"column_index": 9}, {"refused": True, "must_mention": ["9"]}),
    (
        "S,rep1,rep2\nA,5.1,5.2\nB,6.1,\n",
        {"columns": ["rep1", "rep2"], "where": {"S": "B"}},
        {"values": [6.1], "missing": 1},
    ),
    ("S,rep1,rep2\nA,5.1,5.2\nB,6.1,6.2\n", {}, {"needs_choice": True, "choices_include": ["rep1", "B"]}),
    ("5.1;5.2\n", {"sheet": "R"}, {"refused": True, "must_mention": ["sheet"]}),
    ("1.234\n1.241\n", {"decimal": ","}, column(1234.0, 1241.0)),
    ("1,234\n1,241\n", {"decimal": "."}, column(1234.0, 1241.0)),
]


@pytest.mark.parametrize(("text", "selection", "expected"), FILES, ids=lambda given: repr(given)[:50])
def test_a_file_is_read_as_a_technician_would(text, selection, expected):
    """The same for a file with what was chosen in it."""
    assert problems(expected, meanlab.read(text.encode(), "export.csv", selection).to_dict()) == []


@pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig", "utf-16", "utf-16-le", "utf-16-be", "utf-32", "cp1252"])
@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_every_usual_encoding_and_line_end_is_read(encoding, end):
    """UTF-8, UTF-16 and UTF-32 with and without their mark, Windows-1252; three ends of a line."""
    text = end.join(["Schichtdicke [µm]", "48,2", "47,9", ""])
    found = meanlab.read(text.encode(encoding), "readings.csv")
    assert (found.values, found.unit, found.name) == ([48.2, 47.9], "µm", "Schichtdicke")


@pytest.mark.parametrize(
    ("data", "said"),
    [
        (b"", "empty"),
        (b" \n\t", "empty"),
        (b"%PDF-1.7\n5.02", "PDF"),
        (b"\x89PNG\r\n\x1a\n", "PNG"),
        (b'{"nitrate": [5.02, 5.04]}', "JSON"),
        (b"<?xml version='1.0'?><a>5.02</a>", "XML"),
        (b"<html><p>5.02</p></html>", "HTML"),
        (b"\x00\x01\x02\x03" * 50, "no text"),
        ("Ni\n".encode("utf-16"), "No reading"),
        (b"\xff\xfeN\x00i\xd8\x00\x00", "damaged"),
        (b"5\n" * 25_000_001, "50 MB"),
    ],
    ids=["empty", "blank", "pdf", "png", "json", "xml", "html", "zeros", "words", "broken", "large"],
)
def test_a_file_that_is_no_table_is_refused_by_its_content(data, said):
    """The name does not count; the reason says what the file is and what the limit is."""
    found = meanlab.read(data, "readings.csv")
    assert found.refused
    assert said in found.reason
