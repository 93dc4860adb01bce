"""Says it."""
