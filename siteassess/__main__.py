"""Run the command line with ``python -m siteassess``."""

from siteassess.cli import main

main()
