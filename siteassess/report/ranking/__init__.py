"""The report of many sites."""
