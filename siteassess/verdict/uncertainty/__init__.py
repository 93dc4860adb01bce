"""How sure the verdict is."""
