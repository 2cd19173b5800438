"""The parts of a zipped workbook, unpacked only as far as a workbook can reasonably go.

A file of a few kilobytes can unpack to gigabytes, and the directory inside it can lie. So the sizes in the directory
are added up before anything is unpacked, and no part is ever unpacked beyond the size the directory states for it.
"""

import io
import struct
import zipfile
import zlib
from collections.abc import Iterator

from meanlab.core.complaints import IntakeComplaint

LARGEST_UNPACKED = 200 * 2**20
MOST_PARTS = 5000
_LARGEST_DIRECTORY = 2 * 2**20
_STEP = 2**18
_END_OF_DIRECTORY = b"PK\x05\x06"
_WIDE_END_OF_DIRECTORY = b"PK\x06\x06"

DAMAGED = (
    "The workbook is damaged and cannot be opened: a piece of it is missing or altered. "
    "Fetch the file again, or open it where it was made and save it as .xlsx or .csv."
)
LOCKED = "The file is locked with a password. Open it, save it without a password and choose it again."


class Parts:
    """The parts of one zipped file, by name.

    Raises IntakeComplaint when the file is damaged, locked by a password, or unpacks to more than a workbook may.
    """

    def __init__(self, data: bytes) -> None:
        _check_directory_size(data)
        try:
            self._archive = zipfile.ZipFile(io.BytesIO(data))
        except (zipfile.BadZipFile, struct.error, ValueError, OSError, NotImplementedError) as error:
            raise IntakeComplaint(DAMAGED) from error
        entries = self._archive.infolist()
        self.unpacked = sum(entry.file_size for entry in entries)
        _check_sizes(len(entries), self.unpacked)
        self._given: set[str] = set()
        self._entries = {_plain(entry.filename): entry for entry in entries}

    def __contains__(self, name: str) -> bool:
        return _plain(name) in self._entries

    def names(self) -> list[str]:
        """The names of all parts as the file writes them, without a leading slash."""
        return [entry.filename.lstrip("/\\") for entry in self._entries.values()]

    def chunks(self, name: str) -> Iterator[bytes]:
        """The bytes of one part, piece by piece; raises IntakeComplaint when it is absent or damaged.

        Each part is given once: a thousand sheets that point to one part would take a thousand times its size.
        """
        entry = self._entries.get(_plain(name))
        if entry is None or entry.filename in self._given:
            raise IntakeComplaint(DAMAGED)
        self._given.add(entry.filename)
        if entry.flag_bits & 0x1:
            raise IntakeComplaint(LOCKED)
        if entry.compress_type not in (zipfile.ZIP_STORED, zipfile.ZIP_DEFLATED):
            raise IntakeComplaint(DAMAGED)
        try:
            with self._archive.open(entry) as part:
                while piece := part.read(_STEP):
                    yield piece
        except (zipfile.BadZipFile, zlib.error, EOFError, struct.error, ValueError, OSError, RuntimeError) as error:
            if isinstance(error, IntakeComplaint):
                raise
            raise IntakeComplaint(DAMAGED) from error

    def start(self, name: str, length: int) -> bytes:
        """The first bytes of one part."""
        return next(self.chunks(name), b"")[:length]


def _plain(name: str) -> str:
    return name.replace("\\", "/").lstrip("/").lower()


def _check_directory_size(data: bytes) -> None:
    """Look at the stated size of the directory itself, which is read whole when the file is opened."""
    place = data.rfind(_END_OF_DIRECTORY, max(0, len(data) - 66_000))
    if place < 0 or place + 22 > len(data):
        raise IntakeComplaint(DAMAGED)
    entries, size = struct.unpack_from("<HI", data, place + 10)
    wide = data.rfind(_WIDE_END_OF_DIRECTORY, max(0, place - 200), place)
    if wide >= 0 and wide + 56 <= len(data):
        entries, size = struct.unpack_from("<QQ", data, wide + 32)
    if size > _LARGEST_DIRECTORY:
        _check_sizes(max(entries, MOST_PARTS + 1), 0)


def _check_sizes(count: int, unpacked: int) -> None:
    if count > MOST_PARTS:
        raise IntakeComplaint(
            f"The file holds {count:,} parts; a workbook may hold {MOST_PARTS:,}. "
            "Save only the sheet with the readings, as .xlsx or .csv."
        )
    if unpacked > LARGEST_UNPACKED:
        raise IntakeComplaint(
            f"The file unpacks to {unpacked / 2**20:,.0f} MB; a workbook may unpack to {LARGEST_UNPACKED // 2**20} MB. "
            "It is not opened, to be safe. Save only the sheet with the readings, as .xlsx or .csv."
        )
