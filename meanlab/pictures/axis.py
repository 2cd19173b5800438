"""A horizontal or upright scale: from values to pixels, with round marks whose texts do not touch."""

from dataclasses import dataclass
from decimal import ROUND_CEILING, Context, Decimal
from itertools import pairwise

from meanlab.pictures.drawing import WORDS, Drawing, Stroke, Words, line
from meanlab.pictures.measure import width_of
from meanlab.wording.numbers import decimal_text

MOST_MARKS = 8
GAP = 14.0
EDGE = 1.0
TITLE_ABOVE = 18.0
TICK = 4.0
_CONTEXT = Context(prec=60)


@dataclass(frozen=True)
class Scale:
    """Values from ``low`` to ``high`` on the pixels from ``start`` to ``end`` (upright: start is the lower end)."""

    low: float
    high: float
    start: float
    end: float

    def px(self, value: float) -> float:
        """Return the pixel of a value."""
        span = self.high / 2 - self.low / 2
        return self.start + (self.end - self.start) * (value / 2 - self.low / 2) / span

    def holds(self, value: float) -> bool:
        """Tell whether a value lies on the scale."""
        return self.low <= value <= self.high


@dataclass(frozen=True)
class Marked:
    """A round value on a scale with its text."""

    value: float
    text: str


def round_marks(low: float, high: float, most: int, sign: str = ".") -> tuple[Marked, ...]:
    """Return at most ``most`` round values between low and high, in steps of 1, 2 or 5 times a power of ten.

    >>> [mark.text for mark in round_marks(4.985, 5.052, 4)]
    ['5.00', '5.02', '5.04']
    """
    bottom, top = Decimal(repr(float(low))), Decimal(repr(float(high)))
    step = _first_step((top - bottom) / max(1, most))
    while True:
        first = (bottom / step).to_integral_value(ROUND_CEILING, _CONTEXT)
        count = int((top / step - first).to_integral_value("ROUND_FLOOR", _CONTEXT)) + 1
        if count <= most:
            break
        step = _next_step(step)
    exponent = step.normalize().as_tuple().exponent
    places = -int(exponent)
    values = [(first + i) * step for i in range(count)]
    return tuple(Marked(float(value), decimal_text(value, places, sign)) for value in values)


def _first_step(raw: Decimal) -> Decimal:
    power = Decimal((0, (1,), raw.adjusted()))
    return next(power * times for times in (1, 2, 5, 10) if power * times >= raw)


def _next_step(step: Decimal) -> Decimal:
    first = step.normalize().as_tuple().digits[0]
    return step * (Decimal("2.5") if first == 2 else Decimal(2))


def marks_that_fit(scale: Scale, sign: str, right: float, size: float = WORDS) -> tuple[Marked, ...]:
    """Return as many round values as have room for their texts beside each other between pixels 0 and ``right``."""
    for most in range(MOST_MARKS, 0, -1):
        marks = round_marks(scale.low, scale.high, most, sign)
        if not marks:
            continue
        boxes = [_text_of(mark, scale, 0.0, right, size).box for mark in marks]
        if all(a.right + GAP <= b.left for a, b in pairwise(boxes)) and boxes[-1].right <= right:
            return marks
    return ()


def _text_of(mark: Marked, scale: Scale, y: float, right: float, size: float) -> Words:
    """Return the text of a mark below its place, moved inwards where it would leave the area."""
    half = width_of(mark.text, size) / 2 + EDGE
    return Words(max(half, min(scale.px(mark.value), right - half)), y, mark.text, size=size)


def below(scale: Scale, y: float, title: str, sign: str, size: float = WORDS, width: float | None = None) -> Drawing:
    """Return a horizontal axis at height y: its line, round values below, and its title below those.

    Texts stay between pixel 0 and ``width`` (the end of the scale where it is not given).
    """
    right = scale.end if width is None else width
    marks = marks_that_fit(scale, sign, right, size)
    strokes = [line(scale.start, y, scale.end, y, width=1.0)]
    words = []
    for mark in marks:
        x = scale.px(mark.value)
        strokes.append(line(x, y, x, y + TICK, width=1.0))
        words.append(_text_of(mark, scale, y + TICK + 9, right, size))
    words.append(Words((scale.start + scale.end) / 2, y + TICK + 26, title, size=size))
    return Drawing(right, y + TICK + 34, tuple(strokes), words=tuple(words))


def upright(scale: Scale, x: float, title: str, sign: str, right: float, above: float = TITLE_ABOVE) -> Drawing:
    """Return an upright axis at pixel x with round values left of it, its title above it and faint guides to ``right``.

    The texts of the values need `widest` pixels left of x; the title stands ``above`` pixels over the upper end.
    """
    marks = _marks_up(scale, sign)
    strokes = [line(x, scale.start, x, scale.end, width=1.0)]
    words = [Words(0.0, scale.end - above, title, "left")]
    for mark in marks:
        y = scale.px(mark.value)
        strokes.append(line(x - TICK, y, x, y, width=1.0))
        strokes.append(Stroke(((x, y), (right, y)), width=0.6, faint=True))
        words.append(Words(x - TICK - 3, y, mark.text, "right"))
    return Drawing(right, scale.start, tuple(strokes), words=tuple(words))


def widest(scale: Scale, sign: str) -> float:
    """Return the room that the texts of an upright axis need, in pixels."""
    marks = _marks_up(scale, sign)
    return max((width_of(mark.text, WORDS) for mark in marks), default=0.0) + TICK + 3


def _marks_up(scale: Scale, sign: str) -> tuple[Marked, ...]:
    room = int(abs(scale.start - scale.end) / (WORDS * 2.2))
    return round_marks(scale.low, scale.high, max(2, min(room, MOST_MARKS)), sign)
