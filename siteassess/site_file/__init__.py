"""What the user wrote."""
