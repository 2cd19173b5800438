"""Checks of the readings: each says what was seen, and what it can and cannot see at this n; none changes the route."""

from meanlab.checks.all import all_checks
from meanlab.checks.facts import Facts

__all__ = ["Facts", "all_checks"]
