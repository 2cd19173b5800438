"""The pictures on the page."""

from meanlab.core.results import Analysis


def agreement(analysis: Analysis) -> None:
    """Draw the interval of the difference against the limits."""


def normality(analysis: Analysis) -> None:
    """Draw the normal probability plot."""
