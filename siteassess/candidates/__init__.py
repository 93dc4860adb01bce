"""Many sites, and one site twice."""
