"""What leaves the page: the result panel as a picture for the report."""

from meanlab.records.panel import panel_png, panel_svg

__all__ = ["panel_png", "panel_svg"]
