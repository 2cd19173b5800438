"""Text of the user as any written file can hold it."""

import re

NO_SIGN = "□"
# What XML 1.0 cannot hold, and the signs that turn the direction of the text around them.
_NOT_PRINTABLE = re.compile("[^\t\n\u0020-\u2029\u202f-\u2065\u206a-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


def printable(text: str) -> str:
    """Return a text with a box for every sign that has no form of its own; lines end with a line feed.

    >>> printable("pH\\x07 7"), printable("two\\r\\nlines")
    ('pH□ 7', 'two\\nlines')
    """
    return _NOT_PRINTABLE.sub(NO_SIGN, text.replace("\r\n", "\n").replace("\r", "\n"))
