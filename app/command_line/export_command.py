"""``samespot export RECORDING --wfdb STEM --csv FILE``."""

from __future__ import annotations

import argparse
from pathlib import Path
from typing import Any

from app.command_line.failures import CommandFailed
from app.command_line.outputs import say, write_output, writing_record
from app.command_line.recording_arguments import (
    RECORDING_HELP,
    add_recording_options,
    read_named,
)
from core.recordings.csv_writer import recording_csv


def add_to(commands: Any) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser("export", help="write a recording as a WFDB record or a table")
    parser.add_argument("recording", metavar="RECORDING", help=RECORDING_HELP)
    parser.add_argument("--wfdb", metavar="STEM", help="WFDB record to write, without an ending")
    parser.add_argument("--csv", metavar="FILE", help="table of samples to write, in mV")
    add_recording_options(parser)
    parser.set_defaults(run=run)


def run(options: argparse.Namespace) -> None:
    """Write the recording in the forms asked for."""
    if not (options.wfdb or options.csv):
        raise CommandFailed("nothing to write. Name a target with --wfdb or --csv.")
    recording = read_named(options.recording, options)
    if options.csv:
        write_output(options.csv, recording_csv(recording))
    if options.wfdb:
        say(writing_record(recording, Path(options.wfdb)))
