"""How commands name recordings, and what a table does not say of itself."""

from __future__ import annotations

import argparse

from app.command_line.failures import CommandFailed
from core import Recording, TableIncomplete, read_recording

RECORDING_HELP = "a file, or a WFDB record name"
STATED_BY = {"unit": "--unit mV", "rate": "--rate-hz 500"}


def add_recording_options(parser: argparse.ArgumentParser) -> None:
    """Add the options for tables (CSV) that state no unit or no rate, and for a long recording."""
    _add_table_options(parser)
    _add_stretch(parser, "--stretch", "the recording")


def add_pair_options(parser: argparse.ArgumentParser) -> None:
    """Add the same for two recordings."""
    _add_table_options(parser)
    for which in ("earlier", "later"):
        _add_stretch(parser, f"--{which}-stretch", f"the {which} recording")


def _add_stretch(parser: argparse.ArgumentParser, option: str, what: str) -> None:
    parser.add_argument(
        option,
        nargs=2,
        type=float,
        metavar=("START", "STOP"),
        help=f"use {what} between these times only, in s from its start",
    )


def _add_table_options(parser: argparse.ArgumentParser) -> None:
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
    return _read(path, options, options.stretch)


def read_pair(options: argparse.Namespace) -> tuple[Recording, Recording]:
    """Read the earlier and the later recording."""
    earlier = _read(options.earlier, options, options.earlier_stretch)
    return earlier, _read(options.later, options, options.later_stretch)


def _read(path: str, options: argparse.Namespace, stretch_s: list[float] | None) -> Recording:
    try:
        return read_recording(
            path,
            unit=options.unit,
            sampling_rate_hz=options.rate_hz,
            stretch_s=None if stretch_s is None else (stretch_s[0], stretch_s[1]),
        )
    except TableIncomplete as error:
        named = " ".join(STATED_BY[what] for what in error.missing)
        raise CommandFailed(error.stating_it(f"with {named}")) from error
