"""The sky seen from the site."""
