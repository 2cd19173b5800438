"""What is to be drawn of an analysis, as plain facts; two thin renderers, for_page and for_paper, draw it.

A drawing is laid out in pixels here, with the place of every text, so that page and paper show the same and no label
can land on another.
"""

from meanlab.pictures.agreement import agreement_picture
from meanlab.pictures.characteristic import operating_characteristic_picture
from meanlab.pictures.course import course_picture
from meanlab.pictures.drawing import Drawing
from meanlab.pictures.normality import normality_picture
from meanlab.pictures.readings import readings_picture
from meanlab.pictures.run_order import run_order_picture
from meanlab.pictures.sampling import sampling_distribution

__all__ = [
    "Drawing",
    "agreement_picture",
    "course_picture",
    "normality_picture",
    "operating_characteristic_picture",
    "readings_picture",
    "run_order_picture",
    "sampling_distribution",
]
