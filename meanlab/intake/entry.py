"""The grammar of one entry: what a text can be that stands where a reading should.

    entry    = missing | word | limit | reading | unread
    limit    = ("<" | ">" | "≤" | "≥" | "below" | "above" …) number [unit] [remark]
    reading  = [sign] numeral [power of ten] [unit] [± uncertainty [unit]] [remark]
    unread   = date | time | formula | two numbers | any other text

An entry is parsed without knowing the decimal sign, which is decided over the whole column (`numerals`).
"""

import re
from collections.abc import Callable
from dataclasses import dataclass, replace
from typing import Literal

from meanlab.intake.numerals import NUMERAL
from meanlab.intake.units import is_unit
from meanlab.intake.words import (
    ABOVE,
    BELOW,
    ERROR_CELLS,
    FLAGS,
    INFINITE,
    LIMIT_NAMES,
    UNCLEAR,
    is_missing_mark,
    plain_word,
)

Kind = Literal["reading", "below", "above", "missing", "unread"]

POWER = (
    r"(?:[eE](?P<e1>[+-]?\d{1,4})(?!\d)|\s[eE](?P<e2>[+-]\d{1,4})(?!\d)"
    r"|\s?[x×X*·⋅]\s?10\s?(?:(?:\^|\*\*)\s?\(?(?P<e3>[+-]?\d{1,4})\)?|(?P<e4>[+-]\d{1,4}))(?!\d))"
)
_READING = re.compile(rf"(?P<sign>[+-](?P<gap>\s*))?(?P<numeral>{NUMERAL})(?:{POWER})?", re.ASCII)
_BARE = re.compile(r"[+-]?\d{1,30}(?:[.,]\d{1,30})?", re.ASCII)
_BARE_WITH_UNIT = re.compile(r"([+-]?\d{1,30}(?:[.,]\d{1,30})?)(?: ([^\W\d_][^\s\d]*)| ?([%‰]))", re.ASCII)
_LOST_POWER = re.compile(rf"[+-]?(?:{NUMERAL})\s?[x×*·⋅]\s?10\d{{1,2}}(?!\d)", re.ASCII)
_ERROR_CODE = re.compile(r"err(?:or)?[ -]?\d{0,4}|e\d{2,3}", re.IGNORECASE | re.ASCII)
_RANGE = re.compile(
    rf"[<>≤≥~]?\s*[+-]?(?:{NUMERAL})(?:-|\s-\s|\s*(?:\.\.+|…|\bto\b|\bbis\b)\s*)(?:{NUMERAL})(?:\s?\D*)", re.ASCII
)
_IN_BRACKETS = re.compile(rf"\([+-]?(?:{NUMERAL})\)", re.ASCII)
_UNIT_IN_BRACKETS = re.compile(r"[(\[]([^()\[\]]{2,})[)\]]")
_WORD_AND_LIMIT = re.compile(
    rf"(?P<word><?\s?[^\W\d][^\d(<≤:=]*?)\s*[(<≤:=]*\s*(?P<number>{NUMERAL}[^()]*)\)?", re.ASCII
)
_ABOUT = re.compile(
    r"(?:[*†‡!?](?=[\d.+-])|~|≈|≅|∼|ca\.?(?=[\s\d])|circa\b|about\b|approx(?:\.|imately)?(?=\s)|around\b|etwa\b|roughly\b)\s*",
    re.IGNORECASE,
)
_QUOTES = "'\"“”„‘’‚«»"
_BARE_POWER = re.compile(r"(?P<sign>[+-])?10\^(?P<exponent>[+-]?\d{1,4})", re.ASCII)
_LIMIT = re.compile(
    r"(?P<below><=|=<|<|≤|≪|(?:less|lower|smaller|fewer) than\b|below\b|under\b|unter\b|kleiner(?: als)?\b|up to\b)\s*"
    r"|(?P<above>>=|=>|>|≥|≫|(?:more|greater|higher|larger) than\b|above\b|over\b|über\b|größer(?: als)?\b)\s*",
    re.IGNORECASE,
)
_UNCERTAINTY = re.compile(
    rf"\(?\s*(?:±|\+\s?/\s?-|\+-|-/\+)\s*(?:{NUMERAL})(?:[eE][+-]?\d+)?\s*(?P<unit>.*?)\)?"
    r"(?:[,;]?\s*\(?k\s?=\s?\d+(?:[.,]\d+)?\)?)?",
    re.ASCII,
)
_WORD_BEHIND = re.compile(r"[,:]\s+[^\W\d]")
_DASH_AND_WORD = re.compile(r"(?:-+|<-+)\s+[^\W\d]")
_LAST_DIGITS = re.compile(r"\(\d{1,4}\)", re.ASCII)
_MONTH = (
    r"(?:jan|feb|mar|apr|may|jun|jul|aug|sep|sept|oct|nov|dec|mär|mai|okt|dez|january|february|march|april|june|july|"
    r"august|september|october|november|december|januar|februar|märz|juni|juli|oktober|dezember)\.?"
)
_CLOCK = r"(?:[01]?\d|2[0-4]):[0-5]\d(?::[0-5]\d(?:[.,]\d+)?)?(?:\s?[ap]\.?m\.?)?(?:Z|[+-]\d\d:?\d\d|\s?UTC|\s?GMT)?"
_DAY = (
    r"(?:(?:19|20)\d\d[-/.](?:0?[1-9]|1[0-2])[-/.](?:0?[1-9]|[12]\d|3[01])"
    r"|(?:0?[1-9]|[12]\d|3[01])[/](?:0?[1-9]|[12]\d|3[01])[/](?:(?:19|20)?\d\d)"
    r"|(?:0?[1-9]|[12]\d|3[01])\.(?:0?[1-9]|1[0-2])\.(?:\s?(?:19|20)?\d\d)?"
    r"|(?:0?[1-9]|[12]\d|3[01])\. (?:0?[1-9]|1[0-2])\.(?: ?(?:19|20)\d\d)"
    r"|(?:0?[1-9]|[12]\d|3[01])-(?:0?[1-9]|1[0-2])-(?:19|20)\d\d"
    rf"|(?:0?[1-9]|[12]\d|3[01])\.?[-\s/]?{_MONTH}(?:[-\s/,]*(?:19|20)?\d\d)?"
    rf"|{_MONTH}[-\s](?:0?[1-9]|[12]\d|3[01])(?:st|nd|rd|th)?(?:,?\s*(?:19|20)\d\d)?"
    rf"|{_MONTH}[-\s](?:19|20)?\d\d)"
)
_WEEKDAY = r"(?:(?:mon|tue|wed|thu|fri|sat|sun)[a-z]*[.,]?\s+)?"
STAMP = rf"{_WEEKDAY}{_DAY}(?:(?:[T,;]|\s)+{_CLOCK})?|{_CLOCK}(?:\s+{_DAY})?"
_DATE = re.compile(rf"{_WEEKDAY}{_DAY}(?:(?:[T,;]|\s)+{_CLOCK})?|{_CLOCK}\s+{_DAY}", re.IGNORECASE | re.ASCII)
_TIME = re.compile(_CLOCK, re.IGNORECASE | re.ASCII)
_FORMULA = re.compile(r"=(?![<>])|[+@][A-Za-z$]|-\$?[A-Z]{1,3}\$?\d", re.ASCII)
_DIGIT = re.compile(r"\d", re.ASCII)
_LOOKALIKE = str.maketrans({"O": "0", "o": "0", "l": "1", "I": "1", "|": "1", "S": "5", "B": "8"})
_SLIPS = ((re.compile(r"\.\.+"), "."), (re.compile(r",,+"), ","), (re.compile(r"\s*([.,])\s*"), r"\1"))
MOST_REMARK = 40
MOST_CHARACTERS = 400


@dataclass(frozen=True, slots=True)
class Parsed:
    """One entry before the decimal sign is known.

    kind      what it is
    numeral   as written, "" where there is none; ``minus`` and ``exponent`` belong to it
    unit      as written
    remark    what stands behind the number and unit
    sort      what kind of remark or why not read: "uncertainty", "flag", "trailing minus", "gap", "word", "unclear",
              "error", "span", "lost power",
              "brackets", "date", "time", "formula", "width", "infinite", "two numbers", "text"
    meant     what was probably meant, for the complaint
    """

    kind: Kind
    numeral: str = ""
    minus: bool = False
    exponent: int = 0
    power: bool = False
    unit: str = ""
    remark: str = ""
    sort: str = ""
    meant: str = ""


MISSING = Parsed("missing")


def parse(text: str) -> Parsed:
    """Return what one entry is; ``text`` is stripped and in one spelling (`characters.one_spelling`).

    >>> parse("< 0.05 mg/L").kind, parse("12:30").sort, parse("5.02 ± 0.03").numeral
    ('below', 'time', '5.02')
    """
    if _BARE.fullmatch(text):
        return Parsed("reading", text.lstrip("+-"), text[0] == "-")
    with_unit = _BARE_WITH_UNIT.fullmatch(text)
    if with_unit and is_unit(unit := with_unit[2] or with_unit[3]):
        return Parsed("reading", with_unit[1].lstrip("+-"), text[0] == "-", unit=unit)
    if len(text) > MOST_CHARACTERS:
        return Parsed("unread", sort="long")
    if len(text) > 1 and text[0] in _QUOTES:
        text = text[1:-1].strip() if text[-1] in _QUOTES and len(text) > 2 else text[1:] if text[0] == "'" else text
    return next((found for way in _WAYS if (found := way(text)) is not None), Parsed("unread", sort="text"))


def _word(text: str) -> Parsed | None:
    if not text or is_missing_mark(text):
        return MISSING
    if len(text) > 2 and set(text) <= {"<"} | {">"} and len(set(text)) == 1:
        return Parsed("below" if text[0] == "<" else "above", sort="unclear")
    if text[0] == "#" and set(text) == {"#"}:
        return Parsed("unread", sort="width") if len(text) > 1 else Parsed("unread", sort="text")
    word = plain_word(text)
    if word in ERROR_CELLS or _ERROR_CODE.fullmatch(word):
        return Parsed("missing", sort="error")
    if word in INFINITE:
        return Parsed("unread", sort="infinite")
    if word in BELOW:
        return Parsed("below", sort="unclear" if word in UNCLEAR else "word")
    if word in ABOVE:
        return Parsed("above", sort="unclear" if word in UNCLEAR else "word")
    return _word_and_limit(text)


def _word_and_limit(text: str) -> Parsed | None:
    """A word with its limit: "ND (0.05)", "n.d. < 0.05", "<LOQ (0.05)"."""
    found = _WORD_AND_LIMIT.fullmatch(text)
    word = plain_word(found["word"]) if found else ""
    kind: Kind | None = "below" if word in BELOW - LIMIT_NAMES else "above" if word in ABOVE and len(word) > 1 else None
    number = _reading(found["number"].strip()) if found and kind else None
    if number is None or kind is None or number.kind != "reading" or number.sort:
        return None
    return replace(number, kind=kind, sort="word and limit")


def _formula(text: str) -> Parsed | None:
    if not _FORMULA.match(text):
        return None
    return Parsed("unread", sort="formula", meant=_meant(text[1:]) if text[0] == "=" else "")


def _limit(text: str) -> Parsed | None:
    found = _LIMIT.match(text)
    if found is None:
        return None
    kind: Kind = "below" if found["below"] else "above"
    rest = text[found.end() :]
    if plain_word(rest) in ("lod", "loq", "mdl", "dl", "rl", "uloq", "lloq", "range"):
        return Parsed(kind, sort="word")
    number = _reading(rest)
    if number is None or number.kind != "reading" or number.sort in ("uncertainty", "trailing minus"):
        return Parsed("unread", sort="text")
    return Parsed(
        kind, number.numeral, number.minus, number.exponent, number.power, number.unit, number.remark, number.sort
    )


def _stamp(text: str) -> Parsed | None:
    if _DATE.fullmatch(text):
        return Parsed("unread", sort="date", meant=_meant(text))
    if _RANGE.fullmatch(text):
        return Parsed("unread", sort="span")
    return Parsed("unread", sort="time") if _TIME.fullmatch(text) else None


def _about(text: str) -> Parsed | None:
    """A number said to be approximate is kept and marked; a number in brackets is no reading."""
    found = _ABOUT.match(text)
    number = _reading(text[found.end() :]) if found else None
    if found and number is not None and number.kind == "reading" and number.sort in ("", "uncertainty"):
        return replace(number, remark=found[0].strip(), sort="flag")
    return Parsed("unread", sort="brackets") if _IN_BRACKETS.fullmatch(text) else None


def _reading(text: str) -> Parsed | None:
    bare = text
    if text.startswith("(") and text.count("(") == 1 and "±" in text.replace("+/-", "±"):  # (5.02 ± 0.03) mg/L
        bare = text[1:].replace(")", " ", 1)
    if _LOST_POWER.match(text):
        return Parsed("unread", sort="lost power")
    power = _BARE_POWER.fullmatch(text)
    if power:
        return Parsed("reading", "1", power["sign"] == "-", int(power["exponent"]), True)
    found = _READING.match(bare)
    if found is None:
        return None
    exponent = found["e1"] or found["e2"] or found["e3"] or found["e4"]
    numeral = found["numeral"]
    minus = bool(found["sign"]) and found["sign"][0] == "-"

    def as_reading(unit: str = "", remark: str = "", sort: str = "", negative: bool = minus) -> Parsed:
        gap = "gap" if minus and found is not None and found["gap"] and not sort else sort
        return Parsed("reading", numeral, negative, int(exponent or 0), exponent is not None, unit, remark, gap)

    rest = bare[found.end() :]
    return _with_rest(rest, as_reading, bool(found["sign"])) or _with_blanks(text)


def _with_rest(rest: str, as_reading: Callable[..., Parsed], signed: bool) -> Parsed | None:
    """What stands behind the number: nothing, a unit, an uncertainty, a remark."""
    if not rest.strip():
        return as_reading()
    if rest == "-" and not signed:
        return as_reading(remark="-", sort="trailing minus", negative=True)
    joined = (rest[0] in ".,'0123456789_:" and not _WORD_BEHIND.match(rest)) or rest in ("e", "E")
    if joined or (rest[0] == "/" and _DIGIT.match(rest[1:2])):
        return None
    if _LAST_DIGITS.match(rest):
        tail = rest[rest.index(")") + 1 :].strip()
        return as_reading(tail, rest, "uncertainty") if not tail or is_unit(tail) else None
    body = rest.strip()
    uncertainty = _UNCERTAINTY.fullmatch(body)
    if uncertainty and (not uncertainty["unit"] or is_unit(uncertainty["unit"])):
        unit = uncertainty["unit"] if uncertainty["unit"] != "%" else ""  # ± 3 % may be relative
        return as_reading(unit, body, "uncertainty")
    if body[-1] in ".;" and len(body) > 2 and is_unit(body[:-1]):
        return as_reading(body[:-1])
    bracketed = _UNIT_IN_BRACKETS.fullmatch(body)
    if bracketed and is_unit(bracketed[1].strip()):
        return as_reading(bracketed[1].strip())
    if is_unit(body) and not (
        rest[0] != " " and body.casefold() in FLAGS and len(body) == 1 and body not in "gLlVAKNCs"
    ):
        return as_reading(body)
    return _with_unit_and_remark(rest, body, as_reading)


def _with_unit_and_remark(rest: str, body: str, as_reading: Callable[..., Parsed]) -> Parsed | None:
    for cut in [m.start() for m in re.finditer(r"(?<=\S)(?=\s|±|\+/-|[(*†‡#])", body)][::-1]:
        unit, remark = body[:cut].strip(), body[cut:].strip()
        if not remark or not is_unit(unit):
            continue
        uncertainty = _UNCERTAINTY.fullmatch(remark)
        if uncertainty and (not uncertainty["unit"] or is_unit(uncertainty["unit"])):
            return as_reading(unit, remark, "uncertainty")
        if _is_remark(remark):
            return as_reading(unit, remark, "flag")
    if _is_remark(body) and (not rest[0].isalnum() or len(body) == 1):
        return as_reading(remark=body, sort="flag")
    return None


def _is_remark(text: str) -> bool:
    """A remark is short and holds no number of its own, except in brackets or behind a comment sign."""
    if len(text) > MOST_REMARK or (text[0] in "-+~^=<>%" and not _DASH_AND_WORD.match(text)):
        return False
    if text.startswith(("//", "#", "(", "[", "!", "*")):
        return True
    return not _DIGIT.search(text) and len(text.split()) <= 5


def _with_blanks(text: str) -> Parsed | None:
    """Two readings beside each other on one line, or a slip of the keyboard, or neither."""
    meant = _meant(text)
    if meant:
        return Parsed("unread", sort="text", meant=meant)
    numbers = re.findall(rf"(?<![\w.,]){NUMERAL}(?![\w.,])", text, re.ASCII)
    return Parsed("unread", sort="two numbers") if len(numbers) > 1 and len(text) < MOST_REMARK else None


def _meant(text: str) -> str:
    """Return the number that a slip of the keyboard probably meant: "12,3O", "5..04", "5. 02"."""
    if not _DIGIT.search(text):
        return ""
    for repaired in (text.rstrip(".,"), text.translate(_LOOKALIKE), *(slip.sub(to, text) for slip, to in _SLIPS)):
        found = _READING.fullmatch(repaired.strip())
        if found and repaired != text and not re.search(r"[.,].*[.,]", repaired):
            return repaired.strip()
    return ""


def meant_by_letter(text: str, parsed: Parsed) -> str:
    """Return the number that was meant where a letter like a digit stands close behind one: "12,3O"; "" elsewhere."""
    letter = parsed.unit or parsed.remark
    if len(letter) != 1 or not text.rstrip().endswith(parsed.numeral[-1:] + letter):
        return ""
    digit = letter.translate(_LOOKALIKE)
    return parsed.numeral + digit if digit != letter else ""


_WAYS: tuple[Callable[[str], Parsed | None], ...] = (
    _word,
    _formula,
    _stamp,
    _limit,
    _about,
    _reading,
    lambda text: Parsed("unread", sort="text", meant=_meant(text)),
)
