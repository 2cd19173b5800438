"""Damage done to files on purpose: from a sound file and a drawn number to one that nobody wrote.

    damaged = mutated(data, random.Random(7))

Zipped files are also unpacked, damaged inside a part, and packed again, so that the damage gets past the checksums.
"""

import io
import random
import re
import zipfile
import zlib

LARGEST = 2_000_000
_DIGITS = re.compile(rb"\d+")
_NAMES = re.compile(rb"[< ]([A-Za-z:]+)(?=[ =/>])")
_WORDS = (
    b"1048576", b"XFD1048576", b"-1", b"99999999999", b"1e308", b"nan", b"inf", b"&#0;", b"<", b">", b'"', b"\x00",
    b"</c>", b"<c>", b"<row>", b"t='s'", b"t='e'", b"_x0000_", b"0.00;;;", b"<!DOCTYPE x>", b"\xff\xfe", b"../../x",
)  # fmt: skip


def mutated(data: bytes, draw: random.Random) -> bytes:
    """One to three kinds of damage, one after the other."""
    for _ in range(draw.choice((1, 1, 2, 3))):
        change = draw.choice((*_INSIDE[:5], other_numbers, *(inside_a_part,) * 8, parts_changed))
        data = change(data, draw)[:LARGEST]
    return data


def flipped(data: bytes, draw: random.Random) -> bytes:
    """Some bytes changed, from one bit to anything."""
    changed = bytearray(data)
    for _ in range(min(len(changed), draw.choice((1, 2, 8, 50)))):
        place = draw.randrange(len(changed))
        changed[place] = draw.choice((changed[place] ^ (1 << draw.randrange(8)), draw.randrange(256), 0, 255))
    return bytes(changed)


def cut(data: bytes, draw: random.Random) -> bytes:
    """A piece missing: the end, the start or something between."""
    first, last = _span(data, draw)
    return draw.choice((data[:first], data[first:], data[:first] + data[last:]))


def swapped(data: bytes, draw: random.Random) -> bytes:
    """Two neighbouring pieces in the other order."""
    first, last = _span(data, draw)
    middle = draw.randint(first, last)
    return data[:first] + data[middle:last] + data[first:middle] + data[last:]


def repeated(data: bytes, draw: random.Random) -> bytes:
    """One piece several times."""
    first, last = _span(data, draw)
    return data[:last] + data[first:last] * draw.choice((1, 2, 20)) + data[last:]


def with_words(data: bytes, draw: random.Random) -> bytes:
    """Words put in, or in place of others, that mean something in a workbook."""
    for _ in range(draw.choice((1, 3, 10))):
        place = draw.randint(0, len(data))
        word = draw.choice(_WORDS)
        data = data[:place] + word + data[place + draw.choice((0, len(word))) :]
    return data


def other_numbers(data: bytes, draw: random.Random) -> bytes:
    """Some of the numbers written in digits changed: places, counts, styles, sizes and values."""
    found = list(_DIGITS.finditer(data))
    for place in draw.sample(found, min(len(found), draw.choice((1, 3, 10)))):
        changed = draw.choice((b"0", b"7", b"16384", b"1048577", b"4294967296", place[0][::-1], place[0] * 2))
        data = data[: place.start()] + changed[: len(place[0])].rjust(len(place[0]), b"0") + data[place.end() :]
    return data


def other_names(data: bytes, draw: random.Random) -> bytes:
    """One name of an element or attribute for another that occurs too, everywhere."""
    names = sorted({found[1] for found in _NAMES.finditer(data)})
    return data.replace(draw.choice(names), draw.choice(names)) if names else data


def inside_a_part(data: bytes, draw: random.Random) -> bytes:
    """Damage inside one part of a zipped file; elsewhere the bytes are flipped."""
    parts = _parts(data)
    if not parts:
        return flipped(data, draw)
    name = draw.choice(sorted(parts))
    parts[name] = draw.choice(_INSIDE)(parts[name], draw)[:LARGEST]
    return _zipped(parts)


def parts_changed(data: bytes, draw: random.Random) -> bytes:
    """A part missing, two parts exchanged, one under another name, or one empty; elsewhere a piece is cut out."""
    parts = _parts(data)
    if not parts:
        return cut(data, draw)
    one, other = draw.choice(sorted(parts)), draw.choice(sorted(parts))
    change = draw.randrange(4)
    if change == 0:
        del parts[one]
    elif change == 1:
        parts[one], parts[other] = parts[other], parts[one]
    elif change == 2:
        parts[one + "x"] = parts.pop(one)
    else:
        parts[one] = b""
    return _zipped(parts)


_INSIDE = (flipped, cut, swapped, repeated, with_words, *(other_numbers, other_names) * 4)


def _span(data: bytes, draw: random.Random) -> tuple[int, int]:
    first = draw.randint(0, len(data))
    return first, min(len(data), first + draw.choice((1, 10, 200, len(data))))


def _parts(data: bytes) -> dict[str, bytes]:
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as archive:
            return {name: archive.read(name) for name in archive.namelist()}
    except (zipfile.BadZipFile, zlib.error, EOFError, OSError, ValueError, RuntimeError, NotImplementedError):
        return {}


def _zipped(parts: dict[str, bytes]) -> bytes:
    target = io.BytesIO()
    with zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED) as archive:
        for name, content in parts.items():
            archive.writestr(name, content)
    return target.getvalue()
