"""One spelling for characters that look or mean the same, so that the grammar has to know only one."""

import re

HARD_BLANK = "\xa0"  # stands for every blank that may group digits

_INVISIBLE = [0xAD, 0x180E, 0xFEFF, *range(0x200B, 0x2010), *range(0x202A, 0x202F), *range(0x2060, 0x2070)]
_MINUS = "−–‒﹣－‐‑"
_HARD_BLANKS = "\u00a0\u202f\u2009\u2007\u2008\u200a"
_BLANKS = "\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u205f\u3000"
_FIRST_DIGITS = (
    *(0x660, 0x6F0, 0x7C0, 0x966, 0x9E6, 0xA66, 0xAE6, 0xB66, 0xBE6, 0xC66, 0xCE6, 0xD66, 0xE50, 0xED0, 0xF20),
    *(0x1040, 0x17E0, 0x1810, 0x1D7CE, 0x1D7D8, 0x1D7E2, 0x1D7EC, 0x1D7F6),
)
_RAISED = dict(zip("⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-", strict=True))
_POWER_OF_TEN = re.compile("10([⁺⁻]?[⁰¹²³⁴⁵⁶⁷⁸⁹]+)")
_APOSTROPHE = re.compile("(?<=[0-9])[’ʼ′´`](?=[0-9]{3})")
_NAMED_SIGNS = {"&lt;": "<", "&gt;": ">", "&le;": "≤", "&ge;": "≥", "&plusmn;": "±", "&nbsp;": HARD_BLANK}

_SPELLING: dict[int, str | None] = (
    dict.fromkeys(_INVISIBLE)
    | {0xFF01 + i: chr(0x21 + i) for i in range(94)}
    | {first + i: str(i) for first in _FIRST_DIGITS for i in range(10)}
    | {ord(mark): "-" for mark in _MINUS}
    | {ord(blank): HARD_BLANK for blank in _HARD_BLANKS}
    | {ord(blank): " " for blank in _BLANKS}
    | {0x66B: ".", 0x66C: "'", ord("⩽"): "≤", ord("⩾"): "≥"}
)


def one_spelling(text: str) -> str:
    """Return a text with one spelling for digits, signs and blanks, and without invisible characters.

    >>> one_spelling("−５．０２"), one_spelling("1.2×10⁻³")
    ('-5.02', '1.2×10^-3')
    """
    if text.isascii():
        return text
    text = _POWER_OF_TEN.sub(lambda found: "10^" + "".join(_RAISED[one] for one in found[1]), text)
    return _APOSTROPHE.sub("'", text.translate(_SPELLING))


def signs_for_names(text: str) -> str:
    """Return a text with the signs that web pages write by name: "&lt;" is "<".

    >>> signs_for_names("&lt;0.05")
    '<0.05'
    """
    for name, sign in _NAMED_SIGNS.items():
        text = text.replace(name, sign)
    return text


def shown(text: str, most: int = 40) -> str:
    """Return a text as it is quoted in a sentence: on one line and not longer than ``most`` characters."""
    flat = " ".join(text.split())
    return flat if len(flat) <= most else flat[: most - 1] + "…"
