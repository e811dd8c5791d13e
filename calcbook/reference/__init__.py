"""Published tables as CSV with source headers, and the look-up that cites them to row and column."""
