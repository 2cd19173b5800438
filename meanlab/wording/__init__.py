"""Numbers as text, and sentences: the facts of an analysis in the words of a report."""
