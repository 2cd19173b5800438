"""Units as laboratories write them: is a text a unit, and do two texts mean the same unit."""

import re
import unicodedata
from functools import lru_cache

from meanlab.intake.words import word_set

# Symbols of the SI brochure (BIPM, 9th edition) that take prefixes, and the usual ones beside them.
_BASES = (
    "m g L l mol M A V W J N Pa bar Hz s K F H T S Sv Gy Bq Ω lm lx cd kat eV Da eq Eq osmol Osm cal IU U AU Abs OD"
)
_PREFIXED = {
    "k M G m µ μ u n p": _BASES + " cps P St t Ah Wh Torr psi val ohm Ohm B b",
    "c": "m g L l P St Gy N Poise",
    "d": "m g L l B eq",
    "h": "Pa L l",
    "f": "mol g L l m M",
    "a": "mol g",
    "T": "Hz Bq Ω",
    "mc": "g L l mol",
}
_ALONE = word_set(
    '% ‰ ‱ " ppm ppb ppt ppmv ppbv ppmw °C °F °K °dH °fH °Bx °Brix °P °Bé °Z ° ′ ″ °Oe °SR Brix '
    "min h d wk yr mo hr hrs sec NTU FNU FTU FAU FBU JTU EBC SRM CFU cfu KBE KbE KBE MPN PFU pfu GE copies cells "
    "IU U U.I. I.U. IE AU mAU RU RFU RLU LU FU Ct Cq cts counts count rpm min⁻¹ RPM G xg px dpi pH pX dB dBA "
    "mmHg inHg mmH2O cmH2O atm at psi psig psia in ft yd mil oz lb lbs gal HV HB HRC HRB HK ShA ShD Shore cP cSt mPas "
    "TCU Hazen APHA PCU Pt-Co mgPt PSU psu S.U. SU dtex den tex gsm ha Å amu kDa Da MPa log log10 lg "
    "Vol.-% Vol-% vol% vol-% v/v% %v/v %vol wt% wt.-% wt-% w/w% %w/w %w/v w% m% m-% mol% mol-% at% at.-% at-% "
    "Mol-% Gew.-% Gew-% Ma.-% M-% percent pct per cent percentage mg% g% grad gon rad sr deg degC degF degK "
    "ct carat pc pcs spots colonies units plaques ions events pixel pixels Zellen Keime Kolonien Stk Stück "
    "gram grams gramme grammes milligram milligrams kilogram kilograms litre litres liter liters minute minutes "
    "second seconds hour hours day days metre metres meter meters volt volts degree degrees"
)
_WITH_PREFIX = frozenset(
    prefix + base for prefixes, bases in _PREFIXED.items() for prefix in prefixes.split() for base in bases.split()
)
_SYMBOLS = _WITH_PREFIX | _ALONE | word_set(_BASES + " C t B P St ohm Ohm Torr psi")
_LITRE = word_set("l Ml kl hl dl cl ml µl μl ul nl pl fl mcl")
_RAISED = str.maketrans("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-")
_TERM = re.compile(r"([^\W\d_]+[₀-₉]*|[%‰‱°′″Å][A-Za-zé]*|\d+(?:\.\d+)?)(?:\^?\(?([+-]?\d{1,2})\)?)?")
_LENGTHS = word_set("m dm cm mm µm μm um nm km in ft s h")
_BETWEEN = re.compile(r"\s*(/|per\b|[·⋅*×.•]|\s)\s*")
_QUALIFIED = re.compile(r"(.*?\S)\s+(?:as\s+)?\(?((?:[A-Z][a-z]?\d{0,2}){1,6}(?:[-–][NPSC])?)\)?")
_BASIS = re.compile(r"\s*\(?\b(w/w|m/m|v/v|w/v|m/v|n/n|mol/mol|dry|wet|DM|TS|i\. ?Tr\.|FS)\)?$")
_WORDS = word_set(
    "pH pX Abs abs day min max log in at mol count counts cells units copies events Count RU Ct LU SU GE IE HK"
)
MOST_CHARACTERS = 24


@lru_cache(maxsize=2048)
def is_unit(text: str) -> bool:
    """Tell whether a text is a unit: one symbol, or symbols with powers, products and quotients.

    >>> [is_unit(text) for text in ("mg/L", "MPN/100 mL", "µS·cm⁻¹", "g kg-1", "as N", "outlier")]
    [True, True, True, True, False, False]
    """
    bare = _bare(text)
    if not bare or len(bare) > MOST_CHARACTERS:
        return False
    if bare in _SYMBOLS or _terms(bare) is not None:
        return True
    for logarithm in ("log10 ", "log ", "lg "):
        if bare.startswith(logarithm):
            return is_unit(bare[len(logarithm) :])
    found = _BASIS.search(bare)
    return bool(found and found.start() and is_unit(bare[: found.start()]))


def is_qualified_unit(text: str) -> bool:
    """Tell whether a text is a unit, also one that names what it counts: "mg/L N", "mg/L as CaCO3"."""
    if is_unit(text):
        return True
    found = _QUALIFIED.fullmatch(_bare(text))
    return bool(found and "/" in found[1] and is_unit(found[1]))


def is_unmistakable(unit: str) -> bool:
    """Tell whether a unit is more than a letter or a word that could be part of a name or a label.

    >>> is_unmistakable("mg/L"), is_unmistakable("NTU"), is_unmistakable("A"), is_unmistakable("day")
    (True, True, False, False)
    """
    if re.search(r"[/%‰°µμΩ^⁻]", unit):
        return True
    return len(unit) > 1 and unit not in _WORDS and not (unit.isalpha() and unit.islower() and len(unit) > 3)


def same_unit(one: str, other: str) -> bool:
    """Tell whether two texts mean the same unit: "mg/l", "mg/L", "mg·L⁻¹" and "mg L-1" do.

    >>> same_unit("ug/l", "µg/L"), same_unit("mg/L", "µg/L")
    (True, False)
    """
    return _meaning(one) == _meaning(other)


def _bare(text: str) -> str:
    return " ".join(text.split())


def _meaning(text: str) -> object:
    bare = unicodedata.normalize("NFC", _bare(text)).replace("℃", "°C").replace("µ", "μ")
    if bare in ("percent", "pct", "per cent"):
        bare = "%"
    terms = _terms(bare)
    if terms is None:
        return unicodedata.normalize("NFKC", bare).replace(" ", "").replace("l", "L")
    powers: dict[str, int] = {}
    for symbol, power in terms:
        symbol = symbol[:-1] + "L" if symbol in _LITRE else symbol
        if symbol[0] == "u" and "μ" + symbol[1:] in _SYMBOLS and symbol not in _ALONE:
            symbol = "μ" + symbol[1:]
        powers[symbol] = powers.get(symbol, 0) + power
    return frozenset(powers.items())


def _terms(bare: str) -> list[tuple[str, int]] | None:
    """The symbols of a unit with their powers, None where the text is none."""
    text, place, below, behind_slash = bare.translate(_RAISED), 0, False, False
    found: list[tuple[str, int]] = []
    if text.startswith(("/", "1/")):
        place, below = text.index("/") + 1, True
    while True:
        term = _TERM.match(text, place)
        if term is None or not _is_term(term, behind_slash):
            return None
        power = int(term[2] or 1)
        found.append((term[1], -power if below else power))
        place = term.end()
        if place == len(text):
            return found if any(not symbol.isdigit() for symbol, _ in found) else None
        between = _BETWEEN.match(text, place)
        if between is None:
            return None
        behind_slash = between[1] in ("/", "per")
        below = below or behind_slash
        place = between.end()


def _is_term(term: re.Match[str], behind_slash: bool) -> bool:
    """A symbol, or a whole number directly behind a slash: "MPN/100 mL"."""
    symbol = term[1]
    if symbol[0].isdigit():
        return behind_slash and symbol.isdigit()
    bare_power = term[2] is not None and term[0] == symbol + term[2] and term[2][0] not in "+-"
    return symbol in _SYMBOLS and (not bare_power or (term[2] in "23" and symbol in _LENGTHS))
