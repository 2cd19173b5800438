"""An interval as a bar: closed ends with a crossbar, an end without bound as an arrow."""

from collections.abc import Mapping
from types import MappingProxyType

from meanlab.pictures.axis import Scale
from meanlab.pictures.drawing import Drawing, Mark, line

BOUNDS: Mapping[str, str] = MappingProxyType({"greater": "lower bound", "less": "upper bound"})
NO_BOUND = "no bound on this side"


def interval_bar(low: float | None, high: float | None, scale: Scale, y: float, half: float = 6.0) -> Drawing:
    """Return the bar of an interval at height y; an empty drawing where it has no end at all."""
    if low is None and high is None:
        return Drawing(scale.end, y)
    left, right = scale.start if low is None else scale.px(low), scale.end if high is None else scale.px(high)
    strokes = [line(left, y, right, y, width=2.0)]
    strokes += [line(x, y - half, x, y + half, width=1.6) for end, x in ((low, left), (high, right)) if end is not None]
    marks = [Mark(left, y, "left", 9, NO_BOUND)] if low is None else []
    marks += [Mark(right, y, "right", 9, NO_BOUND)] if high is None else []
    return Drawing(scale.end, y, tuple(strokes), marks=tuple(marks))
