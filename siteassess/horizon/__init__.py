"""What hides the sky."""
