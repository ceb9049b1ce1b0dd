"""``samespot compare EARLIER LATER``."""

from __future__ import annotations

import argparse
import sys
from typing import Any

from app.command_line.failures import CommandFailed
from app.command_line.outputs import harmless, refuse_two_to_standard_output, write_output
from app.command_line.recording_arguments import RECORDING_HELP, add_pair_options, read_pair
from app.command_line.summaries import comparison_summary
from core import Comparison, Settings, Spread, compare
from core.comparison.refused import refused_comparison
from core.comparison.table import comparison_csv
from core.errors import ComparisonError, NotComparable
from core.json_numbers import as_json


def add_to(commands: Any) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser("compare", help="compare two recordings of one person")
    parser.add_argument("earlier", metavar="EARLIER", help=RECORDING_HELP)
    parser.add_argument("later", metavar="LATER")
    parser.add_argument("--json", metavar="FILE", help="write the comparison as JSON")
    parser.add_argument("--pdf", metavar="FILE", help="write the comparison report")
    parser.add_argument("--csv", metavar="FILE", help="write the table of measures")
    parser.add_argument(
        "--spread-mm",
        metavar="N",
        type=float,
        help="how far electrodes are off their sites, standard deviation in each direction "
        f"(default {Spread().up:g})",
    )
    parser.add_argument(
        "--lift-stop",
        metavar="CODE",
        action="append",
        default=[],
        help="compare in spite of the stop of this name, such as identifiers-differ; "
        "the result says so",
    )
    add_pair_options(parser)
    parser.set_defaults(run=run)


def run(options: argparse.Namespace) -> None:
    """Compare, and write what was asked for; a readable summary if nothing was."""
    refuse_two_to_standard_output(options.json, options.pdf, options.csv)
    settings = _settings(options.spread_mm, tuple(options.lift_stop))
    earlier, later = read_pair(options)
    try:
        comparison = compare(earlier, later, settings)
    except ComparisonError as error:
        if options.json:
            refused = refused_comparison(earlier, later, settings, error)
            write_output(options.json, as_json(refused))
        if isinstance(error, NotComparable):
            lifts = " ".join(f"--lift-stop {code}" for code in error.stops)
            raise ComparisonError(f"{error} (To compare all the same: {lifts}.)") from error
        raise
    if options.json:
        write_output(options.json, as_json(comparison.to_dict()))
    if options.csv:
        write_output(options.csv, comparison_csv(comparison).encode())
    if options.pdf:
        write_output(options.pdf, report_pdf(comparison))
    if not (options.json or options.csv or options.pdf):
        sys.stdout.write(harmless(comparison_summary(comparison)))


def report_pdf(comparison: Comparison) -> bytes:
    """The comparison report, made without any display."""
    # Imported here: a comparison without a report needs no Qt.
    from app.report.without_display import make_report

    return make_report(comparison)


def _settings(spread_mm: float | None, lifted_stops: tuple[str, ...]) -> Settings:
    spread = Spread()
    if spread_mm is not None:
        try:
            spread = Spread(left=spread_mm, up=spread_mm)
        except ValueError as error:
            raise CommandFailed(f"--spread-mm: {error}") from error
    return Settings(spread_mm=spread, lifted_stops=lifted_stops)
