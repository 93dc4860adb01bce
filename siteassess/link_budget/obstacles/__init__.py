"""What edges and leaves cost on the way in."""
