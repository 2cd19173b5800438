"""The operating characteristic curve: the risk to miss a true difference, against that difference."""

from meanlab.core.results import Analysis
from meanlab.pictures.axis import Scale, below, upright, widest
from meanlab.pictures.drawing import Drawing, Stroke, Words, line, together
from meanlab.pictures.places import kept_inside
from meanlab.planning import operating_characteristic
from meanlab.wording.names import counted, short_noun, unit_of

WIDTH, HEIGHT = 560.0, 250.0
TOP, SIDE, ROOM_BELOW = 46.0, 14.0, 40.0
MATTERS = 36.0
KINDS = {"approximate": " (approximate)", "upper bound": " (at least)"}


def operating_characteristic_picture(
    analysis: Analysis, width: float = WIDTH, height: float = HEIGHT
) -> Drawing | None:
    """Return the risk to miss a true difference (in %) against that difference; None where nothing was tested."""
    test, s = analysis.test, analysis.power.planning_s
    if test is None or not s:
        return None
    differences, missed = operating_characteristic(test.n, s, analysis.question, test.procedure)
    sign, unit, noun = analysis.readings.decimal_sign, unit_of(analysis), short_noun(analysis.question.target_kind)
    base = height - ROOM_BELOW
    heights = Scale(0.0, 100.0, base, TOP)
    left = widest(heights, sign) + 4
    scale = Scale(float(differences[0]), float(differences[-1]), left, width - SIDE)
    curve = tuple((scale.px(float(d)), heights.px(100 * float(m))) for d, m in zip(differences, missed, strict=True))
    units = counted(test.n, "reading" if analysis.readings.preparations is None else "preparation")
    title = f"risk to miss it with {units}, %{KINDS.get(analysis.power.kind, '')}"
    across = f"true difference from the {noun}" + (f", {unit}" if unit else "")
    parts = (
        upright(heights, left, title, sign, width - SIDE),
        below(scale, base, across, sign, width=width),
        Drawing(width, height, (Stroke(curve, width=1.8),)),
        _that_matters(analysis.power.difference_that_matters, scale, base, width),
    )
    return together(width, height, parts, f"Operating characteristic: risk to miss a true difference with {units}.")


def _that_matters(difference: float | None, scale: Scale, base: float, width: float) -> Drawing:
    """Return dashed lines at the difference that matters, as far as they lie on the axis."""
    places = [] if difference is None else [scale.px(d) for d in (-difference, difference) if scale.holds(d)]
    if not places:
        return Drawing(width, base)
    words = kept_inside(Words(places[-1], TOP - MATTERS, "difference that matters"), width)
    return Drawing(width, base, tuple(line(x, TOP, x, base, "dash") for x in places), words=(words,))
