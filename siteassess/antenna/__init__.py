"""What the antenna does with direction."""
