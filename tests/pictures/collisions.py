"""What touches what in a drawing, found anew from its facts: no label may lie on another, on a line or on a mark."""

from itertools import combinations, pairwise

from meanlab.pictures.drawing import Drawing
from meanlab.pictures.measure import Box


def touching(drawing: Drawing) -> list[str]:
    """Return every pair of things that touch, and every text that leaves the area."""
    frame = Box(0.0, 0.0, drawing.width, drawing.height)
    found = [f"{a.text!r} on {b.text!r}" for a, b in combinations(drawing.words, 2) if a.box.meets(b.box)]
    found += [f"{words.text!r} outside" for words in drawing.words if not words.box.within(frame)]
    for words in drawing.words:
        paths = (stroke.points for stroke in drawing.strokes if not stroke.faint)
        found += [
            f"{words.text!r} on a line" for points in paths if any(_enters(words.box, *p) for p in pairwise(points))
        ]
        found += [f"{words.text!r} on a mark" for mark in drawing.marks if words.box.meets(_box_of(mark))]
    return found


def _box_of(mark) -> Box:
    half = (1.0 if mark.shape == "tick" else mark.size / 2), mark.size / 2
    return Box(mark.x - half[0], mark.y - half[1], mark.x + half[0], mark.y + half[1])


def _enters(box: Box, start, end) -> bool:
    """Tell by small steps whether a piece of a line enters a rectangle (another way than the layout's own)."""
    steps = max(2, int(max(abs(end[0] - start[0]), abs(end[1] - start[1]))))
    points = (
        (start[0] + (end[0] - start[0]) * i / steps, start[1] + (end[1] - start[1]) * i / steps)
        for i in range(steps + 1)
    )
    return any(box.left < x < box.right and box.top < y < box.bottom for x, y in points)
