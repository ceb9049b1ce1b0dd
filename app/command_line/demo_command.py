"""``samespot demo``: the main job on the shipped sample pair."""

from __future__ import annotations

import argparse
from pathlib import Path
from typing import Any

from app.command_line.compare_command import report_pdf
from app.command_line.display import display_answers
from app.command_line.failures import CommandFailed
from app.command_line.outputs import say, write_output
from app.command_line.summaries import comparison_summary
from core import compare, read_recording
from core.json_numbers import as_json
from core.shipped_files import samples_folder

DEFAULT_FOLDER = "samespot-demo"
PAIR = ("raised-earlier", "raised-later")


def add_to(commands: Any) -> None:
    """Add the command to the parser."""
    parser = commands.add_parser("demo", help="run the main job on the shipped sample pair")
    parser.add_argument(
        "--no-window", action="store_true", help="write the report and the JSON instead"
    )
    parser.add_argument(
        "--out", metavar="FOLDER", help=f"where to write them (default {DEFAULT_FOLDER})"
    )
    parser.set_defaults(run=run)


def run(options: argparse.Namespace) -> None:
    """Open the sample pair; without a window, write its report and JSON."""
    earlier, later = (str(samples_folder() / name) for name in PAIR)
    if not options.no_window and options.out is None:
        if display_answers():
            from app.workstation import run_workstation

            run_workstation((earlier, later))
            return
        say("No display here, so no window: writing the report and the JSON instead.")
    folder = Path(options.out or DEFAULT_FOLDER)
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        raise CommandFailed(
            f"{folder}: cannot be made ({error.strerror or error}). Choose another with --out."
        ) from error
    comparison = compare(read_recording(earlier), read_recording(later))
    say(comparison_summary(comparison))
    for name, content in (
        ("comparison.json", as_json(comparison.to_dict())),
        ("comparison.pdf", report_pdf(comparison)),
    ):
        write_output(str(folder / name), content)
        say(f"wrote {folder / name}")
