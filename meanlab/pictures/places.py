"""Where a label goes: the first place of several that touches nothing."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field

from meanlab.pictures.drawing import Words
from meanlab.pictures.measure import Box, crossed

APART = 3.0
EDGE = 1.0


@dataclass
class Obstacles:
    """What labels keep clear of while one drawing is laid out: paths, rectangles, and the frame around all."""

    frame: Box
    paths: list[tuple[tuple[float, float], ...]] = field(default_factory=list)
    boxes: list[Box] = field(default_factory=list)

    def free(self, words: Words) -> bool:
        """Tell whether a label lies inside the frame and touches nothing."""
        box = words.box
        wide = Box(box.left - APART, box.top, box.right + APART, box.bottom)
        return (
            box.within(self.frame)
            and not any(box.meets(other, APART) for other in self.boxes)
            and not any(crossed(wide, path) for path in self.paths)
        )

    def place(self, candidates: Iterable[Words]) -> Words | None:
        """Return the first label that fits and keep its place taken; None where none does."""
        found = next((words for words in candidates if self.free(words)), None)
        if found is not None:
            self.boxes.append(found.box)
        return found


def around(text: str, xs: Sequence[float], ys: Sequence[float]) -> Iterable[Words]:
    """Return a label centred at, right of and left of each x, at each height, the first height first."""
    for y in ys:
        for x in xs:
            yield Words(x, y, text)
            yield Words(x, y, text, "left")
            yield Words(x, y, text, "right")


def kept_inside(words: Words, width: float) -> Words:
    """Return a centred label moved sideways so far that it lies between 0 and ``width``."""
    half = (words.box.right - words.box.left) / 2 + EDGE
    x = min(max(words.x, half), width - half) if 2 * half <= width else width / 2
    return Words(x, words.y, words.text, "middle", words.size, words.bold, words.grey)
