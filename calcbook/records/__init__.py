"""The data that crosses stages: plain frozen records, and the written form of formulas."""
