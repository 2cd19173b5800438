"""Texts made up from a drawn number: what laboratories write, mixed, damaged and misplaced.

text = made_text(random.Random(7))
"""

import random


def _words(text: str) -> list[str]:
    """Words parted by blanks; "␣" stands for a blank inside a word."""
    return [word.replace("␣", " ") for word in text.split(" ")]


NUMBERS = _words(
    "5.02 5,02 0.412 1,234 1.234 1,234.5 1.234,5 1'234.5 1\u2009234.5 1␣234,5 12000 -0.05 −0.05 –0.12 +0.12 0.12- .5 "
    "5. 5,0,1 5..04 1e5 1.2E-03 1,2E-03 1.2×10⁻³ 1.2x10^-3 "
    "10^5 1e400 1e-400 0x1F 1_000 007 5.10 ５．０２ ٥٫٠٢ 1.2e 12,3O "
    "l2.3 0.30000000000000004 99999999999999999999999999999999999999999999 2026 -999 5.2. 1/2 5-6 5:02 "
    "192.168.0.1 ½ (0.05)"
)
UNITS = _words('mg/L mg/l µg/L μg/L % °C NTU CFU/mL MPN/100␣mL g g/100␣g mg·L⁻¹ ppm ‰ foo mm² " € mg\u202fL-1 as␣N')
MARKS = _words("* ** † (a) a H J U outlier? rejected 👍 (<LOQ) // ? ± +/- (3) ±␣0.03 #note [x] ^ ~")
WORDS = _words(
    "NA N/A - -- — . n.d. ND BDL <LOQ < > <0.05 >100 ≤0,5 =>2.0 OVER OL inf -inf NaN #N/A #DIV/0! #### TRUE 12:30 "
    "2026-03-04 04.03.2026 5-Feb 3/4/2026 9:12␣AM =A1*2 =cmd|'/C'!A0 @SUM(A1) http://x.y/1 <b>1</b> <script> "
    "Nitrate Nitrat Run Sample Time Date Mean SD n Mittelwert Unit Qualifier Prep␣A Vial QC-1 A-101 Rep spot no. pH 😀 "
    "not␣measured broken␣vial Dear␣colleague x̄ s = 1. 2) #1 (3) a) • | || |---| ;; ,, \t\t $5 \\frac{1}{2} **bold** "
    "$x$ nan(1) ∞ 0 00 -0 1E+ \u200b5.04 \ufeff \u202e5 \x0c \x85 \u2028 \x1c \x0b \ud7ff \U0010ffff ¼ Ⅷ ⁵ ٣ 一"
)
HEADINGS = (
    "Nitrate (mg/L)",
    "Nitrat [mg/l]",
    "Nitrate, mg/L",
    "Thickness / µm",
    "pH",
    "Line 2",
    "2026",
    "mg/L",
    "T/°C",
    "E. coli (MPN/100 mL)",
    "# Nitrate (mg/L)",
    "Run,Nitrate (mg/L)",
    "Run;Nitrat",
    "Sample\tNitrate (mg/L)\tpH",
    "A,B,C",
    "Nitrate\nmg/L",
    "Worksheet,WS-1\nDate,2026-03-04",
    "| Rep | pH |\n|---|---|",
)
SEPARATORS = ("\n", "\n", "\n", "\r\n", "\r", "\t", ";", ",", ", ", " ", "  ", "|", "\n\n", "\u2028", "; ", " / ")


def made_entry(draw: random.Random) -> str:
    """One entry: mostly a number with or without what stands beside it."""
    if draw.random() < 0.2:
        return draw.choice(WORDS)
    number = draw.choice(NUMBERS) if draw.random() < 0.5 else _plain_number(draw)
    parts = [draw.choice(("", "", "", "<", "> ", "1. ", "Rep 1 ", "09:12 ", "~")), number]
    if draw.random() < 0.3:
        parts += [draw.choice(("", " ", "\u00a0", "  ")), draw.choice(UNITS)]
    if draw.random() < 0.15:
        parts += [draw.choice(("", " ")), draw.choice(MARKS)]
    return "".join(parts)


def _plain_number(draw: random.Random) -> str:
    text = f"{draw.gauss(5, draw.choice((0.1, 3, 1000))):.{draw.randrange(5)}f}"
    return text.replace(".", ",") if draw.random() < 0.4 else text


def made_column(draw: random.Random) -> str:
    """A column as an instrument writes it: one heading, one decimal sign, one unit, here and there something else."""
    sign, places, unit = draw.choice(".,"), draw.randrange(4), draw.choice(("", "", " mg/L", " %", "\u00a0°C"))
    before = draw.choice(("", "", "", "{}. ", "#{} ", "QC-{} ", "09:{:02d} ", "{}\t", "{};"))
    lines = [draw.choice(HEADINGS)] if draw.random() < 0.5 else []
    for number in range(1, draw.choice((2, 3, 6, 12, 40))):
        text = f"{draw.gauss(50, 3):.{places}f}".replace(".", sign) + unit
        lines.append(before.format(number) + (text if draw.random() < 0.9 else made_entry(draw)))
    return draw.choice(("\n", "\n", "\r\n", "\r")).join(lines)


def made_text(draw: random.Random) -> str:
    """A few entries in one or several columns, perhaps under a heading, perhaps damaged."""
    if draw.random() < 0.4:
        text = made_column(draw)
        return damaged(text, draw) if draw.random() < 0.3 else text
    columns = draw.choice((1, 1, 1, 2, 3, draw.randrange(1, 8)))
    between = draw.choice(SEPARATORS)
    same = made_entry(draw) if draw.random() < 0.2 else ""
    rows = [
        draw.choice(SEPARATORS[5:]).join(same or made_entry(draw) for _ in range(columns))
        if draw.random() < 0.1
        else between.join(same or made_entry(draw) for _ in range(columns))
        for _ in range(draw.choice((0, 1, 2, 3, 5, 8, 20)))
    ]
    if draw.random() < 0.4:
        rows.insert(draw.randrange(len(rows) + 1) if draw.random() < 0.2 else 0, draw.choice(HEADINGS))
    text = draw.choice(("\n", "\n", "\r\n", between)).join(rows)
    while draw.random() < 0.3:
        text = damaged(text, draw)
    return text


def damaged(text: str, draw: random.Random) -> str:
    """A text with one piece taken out, doubled, moved, quoted, or replaced by a drawn character."""
    first, last = sorted((draw.randint(0, len(text)), draw.randint(0, len(text))))
    piece = text[first:last]
    places = (draw.randrange(32), draw.randrange(32, 127), draw.randrange(0xD7FF), 0x10000 + draw.randrange(0xFFFF))
    odd = chr(draw.choice(places))
    return draw.choice(
        (
            text[:first] + text[last:],
            text[:last] + piece + text[last:],
            piece + text[:first] + text[last:],
            f'{text[:first]}"{piece}"{text[last:]}',
            text[:first] + odd + text[first:],
            text[:first] + piece[::-1] + text[last:],
            text[:first] + '"' + text[first:],
            text.replace(".", ","),
            text.replace("\n", draw.choice(SEPARATORS)),
            text + odd * draw.choice((1, 50, 3000)),
        )
    )


def made_selection(draw: random.Random) -> dict[str, object] | None:
    """Nothing chosen, or something that may or may not be there."""
    if draw.random() < 0.6:
        return None
    wanted: dict[str, object] = {
        "sheet": draw.choice(("R", "", "Sheet1")),
        "column": draw.choice(("Nitrate (mg/L)", "pH", "", "A")),
        "column_index": draw.choice((0, 1, 7, -1)),
        "columns": draw.choice((["A", "B"], [0, 1], ["rep1"], [])),
        "where": draw.choice(({"Sample": "QC-1"}, {"Run": 1}, {})),
        "qualifier_column": draw.choice(("Qualifier", "A")),
        "preparation": draw.choice(("Prep", "A")),
        "decimal": draw.choice((",", ".")),
    }
    names = draw.sample(sorted(wanted), draw.choice((1, 1, 2, 3)))
    return {name: wanted[name] for name in names}
