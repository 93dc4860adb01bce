"""What the sections of a site report say."""
