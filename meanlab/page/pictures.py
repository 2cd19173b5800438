"""The pictures on the page: each drawn once for the same result, with its sentence for those who do not see it."""

from functools import lru_cache
from typing import Any

import streamlit as st

from meanlab.core.results import Analysis
from meanlab.pictures import Drawing, readings_picture, sampling_distribution
from meanlab.pictures.for_page import PICTURE_CONFIG, figure
from meanlab.wording.names import short_noun

SAMPLING_HEIGHT, READINGS_HEIGHT = 178.0, 130.0


def panel(analysis: Analysis) -> None:
    """Draw the two pictures of the panel: the sampling distribution over the readings."""
    if analysis.test is not None:
        noun = short_noun(analysis.question.target_kind)
        sign = analysis.readings.decimal_sign
        draw(sampling_distribution(analysis.test, sign, noun, height=SAMPLING_HEIGHT), "picture_sampling")
    draw(readings_picture(analysis, height=READINGS_HEIGHT), "picture_readings")


def draw(drawing: Drawing, key: str) -> None:
    """Draw one picture in the width of its place."""
    st.plotly_chart(_figure(drawing), theme=None, key=key, config=dict(PICTURE_CONFIG), alt=drawing.alt)


def agreement(analysis: Analysis) -> None:
    """Draw the interval of the difference against the limits."""


def normality(analysis: Analysis) -> None:
    """Draw the normal probability plot."""


@lru_cache(maxsize=16)
def _figure(drawing: Drawing) -> Any:
    return figure(drawing)
