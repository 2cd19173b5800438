"""The five procedures: numbers in, frozen results out. Arrays have samples along the first axis."""
