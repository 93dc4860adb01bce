"""What comes back, what would help, and what could be asked."""
