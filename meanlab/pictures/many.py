"""Many samples beside each other: the difference of each from its target with its interval, against 0 and ± E."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from types import MappingProxyType

import numpy as np

from meanlab.pictures.axis import Scale, upright, widest
from meanlab.pictures.drawing import Drawing, Mark, Shape, Stroke, Words, line, together
from meanlab.pictures.measure import width_of
from meanlab.wording.numbers import significant

WIDTH, HEIGHT = 1280.0, 300.0
TOP, BELOW, SIDE = 46.0, 24.0, 12.0
MOST = 400
SHAPES: Mapping[str, Shape] = MappingProxyType({"differs": "dot", "cannot tell": "circle", "agrees": "diamond"})


@dataclass(frozen=True)
class Compared:
    """One sample: name, difference from its target, ends of its interval minus target (None: no bound), outcome."""

    name: str
    difference: float
    low: float | None
    high: float | None
    outcome: str


def many_picture(
    samples: Sequence[Compared],
    limit: float | None,
    sign: str = ".",
    unit: str = "",
    noun: str = "target",
    words: Mapping[str, str] = MappingProxyType({}),
) -> Drawing | None:
    """Return all differences in rising order with their intervals; None where there is none.

    Of more than 400 samples all that differ are drawn, and of the others as many as have room, evenly by rank.
    ``words`` are what the outcomes are called where it is not by their keys.
    """
    rising = sorted(samples, key=lambda one: one.difference)
    drawn = _chosen(rising)
    if not drawn:
        return None
    scale = _scale(drawn, limit)
    left = widest(scale, sign) + 4
    right, step = WIDTH - SIDE, (WIDTH - SIDE - left - 8) / len(drawn)
    title = f"difference from the {noun}" + (f", {unit}" if unit else "")
    parts = [upright(scale, left, title, sign, right), _guides(scale, limit, left, right)]
    parts += [
        _sample(one, scale, left + 8 + step * (place + 0.5), step, sign, words) for place, one in enumerate(drawn)
    ]
    said = f"{len(samples):,} samples" if len(drawn) == len(samples) else f"{len(drawn)} of {len(samples):,} samples"
    parts += [
        _key(drawn, words),
        Drawing(WIDTH, HEIGHT, words=(Words(left, HEIGHT - 10, f"{said}, by difference", "left"),)),
    ]
    return together(WIDTH, HEIGHT, parts, _alt(samples, drawn, limit, words))


def _chosen(rising: Sequence[Compared]) -> list[Compared]:
    if len(rising) <= MOST:
        return list(rising)
    differing = [place for place, one in enumerate(rising) if one.outcome == "differs"]
    if len(differing) >= MOST:
        kept = [differing[i] for i in np.linspace(0, len(differing) - 1, MOST).round().astype(int)]
    else:
        others = [place for place, one in enumerate(rising) if one.outcome != "differs"]
        chosen = np.linspace(0, len(others) - 1, MOST - len(differing)).round().astype(int)
        kept = sorted({*differing, *(others[i] for i in chosen)})
    return [rising[place] for place in kept]


def _scale(drawn: Sequence[Compared], limit: float | None) -> Scale:
    ends = [end for one in drawn for end in (one.difference, one.low, one.high) if end is not None]
    values = [0.0, *ends, *([] if limit is None else [-limit, limit])]
    low, high = min(values), max(values)
    room = 0.05 * (high - low) or abs(high) or 1.0
    return Scale(low - room, high + room, HEIGHT - BELOW, TOP)


def _guides(scale: Scale, limit: float | None, left: float, right: float) -> Drawing:
    zero = scale.px(0.0)
    strokes: list[Stroke] = [line(left, zero, right, zero, "dot", 1.6)]
    words = []
    for end, name in () if limit is None else ((limit, "+ E"), (-limit, "− E")):
        y = scale.px(end)
        strokes.append(line(left, y, right, y, "dash", 1.2))
        words.append(Words(right, y - 8, name, "right"))
    return Drawing(right, scale.start, tuple(strokes), words=tuple(words))


def _sample(one: Compared, scale: Scale, x: float, step: float, sign: str, words: Mapping[str, str]) -> Drawing:
    low = scale.start if one.low is None else scale.px(one.low)
    high = scale.end if one.high is None else scale.px(one.high)
    width = 1.0 if step > 4 else 0.7
    size = max(3.0, min(8.0, step))
    says = f"{one.name}: {significant(one.difference, 3, sign)}, {words.get(one.outcome, one.outcome)}"
    mark = Mark(x, scale.px(one.difference), SHAPES.get(one.outcome, "circle"), size, says)
    return Drawing(x, scale.start, (line(x, low, x, high, width=width),), marks=(mark,))


def _key(drawn: Sequence[Compared], called: Mapping[str, str]) -> Drawing:
    """What the marks mean, right above the picture."""
    marks, words, x = [], [], WIDTH - SIDE
    for outcome, shape in reversed(list(SHAPES.items())):
        if any(one.outcome == outcome for one in drawn):
            name = called.get(outcome, outcome)
            words.append(Words(x, TOP - 28, name, "right"))
            x -= width_of(name, 12.0) + 12
            marks.append(Mark(x, TOP - 28, shape, 8.0))
            x -= 20
    return Drawing(WIDTH, TOP, marks=tuple(marks), words=tuple(words))


def _alt(samples: Sequence[Compared], drawn: Sequence[Compared], limit: float | None, words: Mapping[str, str]) -> str:
    counts = [(outcome, sum(one.outcome == outcome for one in samples)) for outcome in SHAPES]
    said = ", ".join(f"{count:,} {words.get(outcome, outcome)}" for outcome, count in counts if count)
    low, high = drawn[0].difference, drawn[-1].difference
    against = "" if limit is None else f", held against ± E = {significant(limit, 3)}"
    part = "" if len(drawn) == len(samples) else f" {len(drawn)} are drawn: those that differ first."
    return (
        f"Differences of {len(samples):,} samples from their targets with their intervals, from "
        f"{significant(low, 3)} to {significant(high, 3)}{against}: {said}.{part}"
    )
