"""The report of two surveys of one spot."""
