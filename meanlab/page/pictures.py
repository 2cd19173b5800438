"""The pictures on the page: each made once for the same drawing, with its sentence for those who do not see it."""

from functools import lru_cache
from typing import Any

import pandas as pd  # noqa: F401  # whole before the first picture: plotly took it half imported by another thread
import streamlit as st

from meanlab import pictures as described
from meanlab.core.results import Analysis, Plan
from meanlab.pictures.for_page import PICTURE_CONFIG, figure
from meanlab.wording.names import short_noun

SAMPLING_HEIGHT, READINGS_HEIGHT = 178.0, 130.0


def panel(analysis: Analysis) -> None:
    """Draw the two pictures of the panel: the sampling distribution over the readings."""
    with st.container(key="pictures"):
        if analysis.test is not None:
            noun, sign = short_noun(analysis.question.target_kind), analysis.readings.decimal_sign
            draw(described.sampling_distribution(analysis.test, sign, noun, height=SAMPLING_HEIGHT), "sampling")
        draw(described.readings_picture(analysis, height=READINGS_HEIGHT), "readings")


def agreement(analysis: Analysis) -> None:
    """Draw the interval of the difference against the limits."""
    place, _ = st.columns([3, 2], gap="medium")
    with place:
        draw(described.agreement_picture(analysis), "agreement")


def normality(analysis: Analysis) -> None:
    """Draw the normal probability plot, and the readings in their order where it is the order of measurement."""
    draw(described.normality_picture(analysis), "normality")
    if analysis.question.run_order:
        draw(described.run_order_picture(analysis), "run_order")


def missed(analysis: Analysis) -> None:
    """Draw the risk to miss a true difference (operating characteristic curve)."""
    draw(described.operating_characteristic_picture(analysis), "missed")


def course(plan: Plan, kind: str, unit: str, sign: str) -> None:
    """Draw the course of a plan with the number of readings."""
    draw(described.course_picture(plan, kind, unit, sign), "course")


def draw(drawing: described.Drawing | None, name: str) -> None:
    """Draw one picture in the width of its place; nothing where there is none."""
    if drawing is not None:
        chart = _figure(drawing)
        st.plotly_chart(chart, theme=None, key=f"picture_{name}", config=dict(PICTURE_CONFIG), alt=drawing.alt)


@lru_cache(maxsize=16)
def _figure(drawing: described.Drawing) -> Any:
    return figure(drawing)
