"""The cell styles of a workbook: which number format each has, and which are struck through."""

from meanlab.intake.grid import Cell
from meanlab.intake.number_formats import BUILT_IN, GENERAL, NumberFormat

_REMEMBERED = 50_000


class Styles:
    """Styles in the order of the file: number format and font of each, by their number in the file."""

    def __init__(self) -> None:
        self.codes = dict(BUILT_IN)
        self.struck_fonts: set[int] = set()
        self.styles: list[tuple[int, int]] = []
        self.since_1904 = False
        self._formats: dict[int, NumberFormat] = {}
        self._shown: dict[tuple[int, float], Cell] = {}

    def cell(self, number: float, style: int) -> Cell:
        """The cell that shows a stored number in this style."""
        identity = self.styles[style][0] if 0 <= style < len(self.styles) else 0
        shown = self._shown.get((identity, number))
        if shown is None:
            shown = self._format(identity).cell(number, self.since_1904)
            if len(self._shown) < _REMEMBERED:
                self._shown[identity, number] = shown
        return shown

    def _format(self, identity: int) -> NumberFormat:
        found = self._formats.get(identity)
        if found is None:
            found = self._formats[identity] = NumberFormat(self.codes.get(identity, GENERAL))
        return found

    def struck(self, style: int) -> bool:
        """True where the style strikes the text through."""
        return 0 <= style < len(self.styles) and self.styles[style][1] in self.struck_fonts
