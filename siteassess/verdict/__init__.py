"""Whether it is good enough."""
