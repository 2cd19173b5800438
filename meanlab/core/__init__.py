"""Frozen facts, exact decimals and complaints: the words every other part speaks. Standard library only."""
