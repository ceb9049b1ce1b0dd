"""How commands name recordings, and what a table does not say of itself."""

from __future__ import annotations

import argparse

from core import Recording, read_recording

RECORDING_HELP = "a file, or a WFDB record name"


def add_table_options(parser: argparse.ArgumentParser) -> None:
    """Add the options for tables (CSV) that state no unit or no rate."""
    parser.add_argument(
        "--unit", metavar="UNIT", help="unit of a table that states none: mV, uV, V or nV"
    )
    parser.add_argument(
        "--rate-hz",
        metavar="N",
        type=float,
        help="samples a second of a table without times",
    )


def read_named(path: str, options: argparse.Namespace) -> Recording:
    """Read the recording that an argument names."""
    return read_recording(path, unit=options.unit, sampling_rate_hz=options.rate_hz)
