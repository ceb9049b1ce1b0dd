"""``samespot open [EARLIER LATER]``, and ``samespot`` alone."""

from __future__ import annotations

import argparse
from typing import Any

from app.command_line.display import refuse_without_display
from app.command_line.failures import CommandFailed


def add_to(commands: Any) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser("open", help="open the workstation")
    parser.add_argument("earlier", metavar="EARLIER", nargs="?")
    parser.add_argument("later", metavar="LATER", nargs="?")
    parser.set_defaults(run=run)


def run(options: argparse.Namespace) -> None:
    """Open the workstation, with two recordings if they were given."""
    if (options.earlier is None) != (options.later is None):
        raise CommandFailed("open takes two recordings or none. Name the earlier and the later.")
    refuse_without_display()
    from app.workstation import run_workstation

    pair = None if options.earlier is None else (options.earlier, options.later)
    run_workstation(pair)
