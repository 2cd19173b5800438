"""meanlab: does the mean agree with the target, on which evidence, with which uncertainty?"""
