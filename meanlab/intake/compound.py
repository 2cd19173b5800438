"""The compound file that older office files are kept in: a small file system of sectors and chains.

Source: [MS-CFB] §2 (Compound File Binary File Format).
"""

import struct

from meanlab.core.complaints import IntakeComplaint
from meanlab.intake.parts import DAMAGED

_END = 0xFFFFFFFA
_IN_HEADER = 109


class Compound:
    """The streams of one compound file, by name; raises IntakeComplaint when its chains are damaged."""

    def __init__(self, data: bytes) -> None:
        if len(data) < 512:
            raise IntakeComplaint(DAMAGED)
        self._data = data
        shift, mini_shift = struct.unpack_from("<HH", data, 30)
        if shift not in (9, 12) or mini_shift != 6:
            raise IntakeComplaint(DAMAGED)
        self._size = 1 << shift
        directory, self._cutoff, mini_table = (struct.unpack_from("<I", data, at)[0] for at in (48, 56, 60))
        self._table = self._sector_table()
        self._streams = self._directory(self._chain(directory))
        root = next((stream for stream in self._streams if stream[1] == 5), None)
        self._mini = self._chain(root[2]) if root else b""
        mini_bytes = self._chain(mini_table) if mini_table < _END else b""
        self._mini_table = struct.unpack(f"<{len(mini_bytes) // 4}I", mini_bytes[: len(mini_bytes) // 4 * 4])

    def names(self) -> list[str]:
        """The names of all streams and folders."""
        return [name for name, _, _, _ in self._streams]

    def stream(self, name: str) -> bytes:
        """The bytes of the stream with this name."""
        found = next((stream for stream in self._streams if stream[0] == name and stream[1] == 2), None)
        if found is None:
            raise IntakeComplaint(DAMAGED)
        _, _, first, size = found
        content = self._mini_chain(first, size) if size < self._cutoff else self._chain(first)
        if len(content) < size:
            raise IntakeComplaint(DAMAGED)
        return content[:size]

    def _sector_table(self) -> tuple[int, ...]:
        """Which sector follows which: the table itself lies in sectors that the header and a chain of lists name."""
        sectors = list(struct.unpack_from(f"<{_IN_HEADER}I", self._data, 76))
        following = struct.unpack_from("<I", self._data, 68)[0]
        per_sector = self._size // 4
        for _ in range(len(self._data) // self._size + 1):
            if following >= _END:
                break
            part = self._sector(following).ljust(self._size, b"\xff")
            *more, following = struct.unpack(f"<{per_sector}I", part)
            sectors.extend(more)
        named = [sector for sector in sectors if sector < _END][: len(self._data) // self._size + 1]
        table = b"".join(self._sector(sector).ljust(self._size, b"\xff") for sector in named)
        return struct.unpack(f"<{len(table) // 4}I", table)

    def _sector(self, number: int) -> bytes:
        begin = (number + 1) * self._size
        if begin >= len(self._data):
            raise IntakeComplaint(DAMAGED)
        return self._data[begin : begin + self._size]

    def _chain(self, first: int) -> bytes:
        return b"".join(self._sector(number) for number in _followed(first, self._table))

    def _mini_chain(self, first: int, size: int) -> bytes:
        places = _followed(first, self._mini_table) if size else []
        return b"".join(self._mini[place * 64 : place * 64 + 64] for place in places)

    def _directory(self, content: bytes) -> list[tuple[str, int, int, int]]:
        """Name, kind (2 stream, 5 root), first sector and size of each entry."""
        entries = []
        for at in range(0, len(content) - 127, 128):
            length, kind = struct.unpack_from("<HB", content, at + 64)
            first, size = struct.unpack_from("<II", content, at + 116)
            if kind and 2 <= length <= 64:
                name = content[at : at + length - 2].decode("utf-16-le", "replace")
                entries.append((name, kind, first, size))
        return entries


def _followed(first: int, table: tuple[int, ...]) -> list[int]:
    """The sectors of a chain in their order; a chain that bites its own tail is damage."""
    places: list[int] = []
    while first < _END:
        if first >= len(table) or len(places) > len(table):
            raise IntakeComplaint(DAMAGED)
        places.append(first)
        first = table[first]
    return places
