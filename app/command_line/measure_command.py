"""``samespot measure RECORDING``."""

from __future__ import annotations

import argparse
import sys
from typing import Any

from app.command_line.outputs import harmless, write_output
from app.command_line.recording_arguments import RECORDING_HELP, add_recording_options, read_named
from app.command_line.summaries import recording_summary
from core import measure
from core.json_numbers import as_json


def add_to(commands: Any) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser("measure", help="measure one recording")
    parser.add_argument("recording", metavar="RECORDING", help=RECORDING_HELP)
    parser.add_argument("--json", metavar="FILE", help="write the recording report as JSON")
    add_recording_options(parser)
    parser.set_defaults(run=run)


def run(options: argparse.Namespace) -> None:
    """Measure, and write the report or print a summary."""
    report = measure(read_named(options.recording, options))
    if options.json:
        write_output(options.json, as_json(report.to_dict()))
    else:
        sys.stdout.write(harmless(recording_summary(report)))
