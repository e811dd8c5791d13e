"""Electrical formulas and their derivations, one module a subject; knows nothing of notebooks."""
