"""What the antenna hears, and the noise at its port."""
