"""What the keys of a site file must be to each other."""
