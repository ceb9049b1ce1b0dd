"""Parse the command line and run a command.

Exit status: 0 done; 1 read but not comparable; 2 wrong arguments or an unreadable file.
"""

from __future__ import annotations

import argparse
import io
import sys
from collections.abc import Sequence

from app.command_line import (
    compare_command,
    demo_command,
    export_command,
    measure_command,
    move_command,
    open_command,
)
from app.command_line.failures import CommandFailed
from app.command_line.outputs import PLAINER_SIGNS, harmless
from core.errors import ComparisonError, ModelError, RecordingError
from core.version import program_version
from core.wording.caution import CAUTION

_COMMANDS = (
    open_command,
    compare_command,
    measure_command,
    move_command,
    export_command,
    demo_command,
)
DONE, NOT_COMPARABLE, WRONG_USE = 0, 1, 2


def build_parser() -> argparse.ArgumentParser:
    """The parser of all commands."""
    parser = argparse.ArgumentParser(
        prog="samespot",
        description=(
            "Two ECGs of one person differ: is it the heart, or did the electrodes move? "
            "Without a command, opens the workstation."
        ),
        epilog=CAUTION,
    )
    parser.add_argument("--version", action="version", version=f"samespot {program_version()}")
    commands = parser.add_subparsers(metavar="COMMAND")
    for module in _COMMANDS:
        module.add_to(commands)
    parser.set_defaults(run=open_command.run, earlier=None, later=None)
    return parser


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command and answer its exit status."""
    for stream in (sys.stdout, sys.stderr):
        # A terminal that lacks a character shows another in its place; it does not end the work.
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors=PLAINER_SIGNS)
    parser = build_parser()
    options = parser.parse_args(arguments)
    try:
        options.run(options)
    except ComparisonError as error:
        return _fail(NOT_COMPARABLE, error)
    except (RecordingError, ModelError, CommandFailed) as error:
        return _fail(WRONG_USE, error)
    except BrokenPipeError:
        # Whoever read the output has stopped reading; that is no failure of ours.
        sys.stderr.close()
        return DONE
    except KeyboardInterrupt:
        return _fail(NOT_COMPARABLE, "stopped before it was done")
    return DONE


def run() -> None:
    """Entry point of the installed command."""
    sys.exit(main())


def _fail(status: int, reason: object) -> int:
    line = harmless(" ".join(str(reason).split()))
    sys.stderr.write(f"samespot: {line}\n")
    return status
