"""Elevation rasters, as the far skyline."""
