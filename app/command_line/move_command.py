"""``samespot move RECORDING --electrode V2 --up-mm 24 --out STEM``."""

from __future__ import annotations

import argparse
from collections.abc import Sequence
from pathlib import Path
from typing import Any

from app.command_line.failures import CommandFailed
from app.command_line.outputs import say, writing_record
from app.command_line.recording_arguments import RECORDING_HELP, add_recording_options, read_named
from core import ElectrodeMove, move_electrodes
from core.recordings.leads import CHEST_LEADS


class _StartMove(argparse.Action):
    """``--electrode`` starts a group."""

    def __call__(
        self,
        parser: argparse.ArgumentParser,
        namespace: argparse.Namespace,
        values: str | Sequence[Any] | None,
        option_string: str | None = None,
    ) -> None:
        moves = [*(namespace.moves or []), {"electrode": values}]
        namespace.moves = moves


class _SetInMove(argparse.Action):
    """``--up-mm`` and ``--left-mm`` belong to the group that is open."""

    def __call__(
        self,
        parser: argparse.ArgumentParser,
        namespace: argparse.Namespace,
        values: str | Sequence[Any] | None,
        option_string: str | None = None,
    ) -> None:
        if not namespace.moves:
            parser.error(f"{option_string} must follow an --electrode")
        namespace.moves[-1][self.dest] = values


def add_to(commands: Any) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser(
        "move", help="write the tracing that the person would have given with electrodes moved"
    )
    parser.add_argument("recording", metavar="RECORDING", help=RECORDING_HELP)
    parser.add_argument(
        "--electrode",
        dest="moves",
        action=_StartMove,
        choices=CHEST_LEADS,
        required=True,
        help="starts a group; several may follow each other",
    )
    parser.add_argument(
        "--up-mm", action=_SetInMove, type=float, metavar="N", help="towards the head"
    )
    parser.add_argument(
        "--left-mm", action=_SetInMove, type=float, metavar="N", help="towards the patient's left"
    )
    parser.add_argument(
        "--out", metavar="STEM", required=True, help="WFDB record to write, without an ending"
    )
    add_recording_options(parser)
    parser.set_defaults(run=run)


def run(options: argparse.Namespace) -> None:
    """Foretell the moved tracing and write it as a WFDB record."""
    try:
        moves = [ElectrodeMove(**move) for move in options.moves]
        moved = move_electrodes(read_named(options.recording, options), moves)
    except ValueError as error:
        if type(error) is not ValueError:  # a RecordingError speaks for itself
            raise
        raise CommandFailed(f"{error}.") from error
    say(writing_record(moved, Path(options.out)))
