"""The readings in the order in which they were entered or measured."""

from collections.abc import Mapping

from meanlab.core.results import Analysis
from meanlab.pictures.axis import Scale, below, upright, widest
from meanlab.pictures.drawing import Drawing, Mark, Stroke, Words, line, together
from meanlab.pictures.entries import entries_of
from meanlab.pictures.measure import shortened
from meanlab.pictures.readings import span_of
from meanlab.wording.names import short_noun

WIDTH, HEIGHT = 500.0, 220.0
TOP, SIDE, ROOM_BELOW = 34.0, 10.0, 40.0
KEY_ROOM = 120.0


def run_order_picture(analysis: Analysis, width: float = WIDTH, height: float = HEIGHT) -> Drawing:
    """Return the readings against their place among all entries, with mean (dashed) and target (dotted)."""
    entries = entries_of(analysis)
    low, high = span_of(analysis, entries)
    base, right = height - ROOM_BELOW, width - SIDE - KEY_ROOM
    values = Scale(low, high, base, TOP)
    left = widest(values, entries.sign) + 4
    chosen, left_out = entries.kept, entries.left_out
    places = [entry.place for entry in (*chosen, *left_out)] or [1]
    order = Scale(min(places) - 0.5, max(places) + 0.5, left, right)
    kept = [(order.px(entry.place), values.px(entry.value)) for entry in chosen]
    strokes = [Stroke(tuple(kept), width=0.8, faint=True)] if len(kept) > 1 else []
    marks = [Mark(x, y, "dot", 6, entries.said(entry)) for (x, y), entry in zip(kept, chosen, strict=True)]
    marks += [
        Mark(order.px(entry.place), values.px(entry.value), "cross", 9, f"{entries.said(entry)}, left out")
        for entry in left_out
        if values.holds(entry.value)
    ]
    noun, target = short_noun(analysis.question.target_kind), float(analysis.question.exact_target)
    levels = {"mean": analysis.summary.mean, noun: target}
    drawn = {name: values.px(value) for name, value in levels.items() if value is not None and values.holds(value)}
    strokes += [line(left, y, right, y, "dash" if name == "mean" else "dot") for name, y in drawn.items()]
    title = "order of measurement" if analysis.question.run_order else "order of the entries"
    unit = shortened(entries.unit, width / 3, 12) or "readings"
    axis = below(order, base, title, entries.sign, width=width)
    return together(
        width, height,
        (upright(values, left, unit, entries.sign, right), axis,
         Drawing(width, height, tuple(strokes), marks=tuple(marks), words=_names(drawn, right))),
        f"{entries.count} readings in {title}, with mean and {noun}.",
    )  # fmt: skip


def _names(drawn: Mapping[str, float], right: float) -> tuple[Words, ...]:
    """Return the names of the levels at their right ends, moved apart where they would touch."""
    words: list[Words] = []
    for text, y in sorted(drawn.items(), key=lambda one: one[1]):
        lowest = words[-1].y + 16 if words else y
        words.append(Words(right + 6, max(y, lowest), text, "left"))
    return tuple(words)
