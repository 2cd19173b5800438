"""Text or file → readings: what was typed or exported is read as it is, or refused with the reason.

The way of a text or file, and where to change it:

    sources            what it is, by its content; characters and encodings (`characters`)
      workbooks        sheets of xlsx, xls, xlsb, ods, XML and web pages as cells (`grid`), hostile files kept out
      layout           a text as a table: `lines`, `separators`, what stands before entries (`labels`, `groups`)
    table, blocks      cells with their places; headings, data, computed figures (`heading`, `units`, `words`)
    choosing           the cells that are meant: `roles` of columns, what `remaining` says, what stands `beside`
    column             one column: the grammar of an `entry`, its decimal sign (`numerals`), marks (`suffixes`)
    doubts, sayings    what the technician must see
    found              the Intake;  `reader` is the door, `setting` reads the one number of a field
"""

from meanlab.intake.found import Column, Entries, Entry, Intake
from meanlab.intake.reader import columns, read
from meanlab.intake.setting import read_number

__all__ = ["Column", "Entries", "Entry", "Intake", "columns", "read", "read_number"]
