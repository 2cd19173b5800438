"""Below the panel: one part at a time, chosen by a control that remembers."""

PARTS = {}


def draw() -> None:
    """Draw the control and the part it names."""
