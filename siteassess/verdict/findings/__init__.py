"""Each criterion held against the site."""
