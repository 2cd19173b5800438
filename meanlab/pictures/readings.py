"""The readings on one scale with mean, interval and target."""

from meanlab.core.results import Analysis
from meanlab.pictures.drawing import Drawing


def readings_picture(analysis: Analysis, width: float = 620, height: float = 132) -> Drawing:
    return Drawing(width, height)
