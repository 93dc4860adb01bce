"""Outlines of buildings and trees, as obstacles seen from the antenna."""
