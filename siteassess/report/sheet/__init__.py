"""The field form of a survey."""
