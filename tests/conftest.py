"""One hypothesis profile for the gate: the same examples at each run, no deadline on a busy machine."""

from hypothesis import settings

settings.register_profile("gate", max_examples=50, deadline=None, derandomize=True, database=None)
settings.load_profile("gate")
