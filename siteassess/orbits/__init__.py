"""Where satellites are."""
