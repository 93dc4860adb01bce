"""How many satellites at once, and how long not."""
