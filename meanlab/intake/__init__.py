"""Text or file → readings: what was typed or exported is read as it is, or refused with the reason."""

from meanlab.intake.found import Column, Entries, Entry, Intake
from meanlab.intake.reader import columns, read
from meanlab.intake.setting import read_number

__all__ = ["Column", "Entries", "Entry", "Intake", "columns", "read", "read_number"]
