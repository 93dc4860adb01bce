"""Writes what each command prints for `--help` into docs/cli.md.

Run it from the project folder after a change of the command line:

    python tests/builders/build_command_help.py
"""

import re
from pathlib import Path

import click
from click.testing import CliRunner

from siteassess.cli import main

PAGE = Path("docs/cli.md")
WIDTH = 78  # what click uses of a terminal of 80 columns
BLOCK = re.compile(r"```console\n\$ (siteassess[a-z ]*) --help\n.*?```", re.DOTALL)


def commands() -> list[str]:
    """Every command line that has a help text."""
    assert isinstance(main, click.Group)
    return ["siteassess", *(f"siteassess {name}" for name in main.commands)]


def help_block(command: str) -> str:
    """The fenced block that the page must hold for a command."""
    _, *arguments = command.split()
    result = CliRunner().invoke(
        main, [*arguments, "--help"], prog_name="siteassess", terminal_width=WIDTH, color=False
    )
    assert result.exit_code == 0, result.output
    text = "\n".join(line.rstrip() for line in result.output.rstrip().splitlines())
    return f"```console\n$ {command} --help\n{text}\n```"


def with_help(page: str) -> str:
    """The page with its blocks brought up to date."""
    return BLOCK.sub(lambda found: help_block(found[1]), page)


if __name__ == "__main__":
    PAGE.write_text(with_help(PAGE.read_text(encoding="utf-8")), encoding="utf-8")
