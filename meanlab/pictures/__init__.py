"""What is to be drawn of an analysis, as plain facts; two thin renderers, for_page and for_paper, draw it.

A drawing is laid out in pixels here, with the place of every text, so that page and paper show the same and no label
can land on another.
"""

from meanlab.pictures.drawing import Drawing
from meanlab.pictures.readings import readings_picture
from meanlab.pictures.sampling import sampling_distribution

__all__ = ["Drawing", "readings_picture", "sampling_distribution"]
