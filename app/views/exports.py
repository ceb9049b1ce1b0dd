"""Write a comparison to files."""

from __future__ import annotations

from pathlib import Path

from app.report.report import write_report
from core.comparison.results import Comparison
from core.comparison.table import comparison_csv
from core.files import write_atomically
from core.json_numbers import as_json


def write_pdf(path: Path, comparison: Comparison) -> None:
    """Write the comparison report."""
    write_atomically(path, write_report(comparison))


def write_json(path: Path, comparison: Comparison) -> None:
    """Write the comparison as JSON."""
    write_atomically(path, as_json(comparison.to_dict()))


def write_csv(path: Path, comparison: Comparison) -> None:
    """Write the table of measures."""
    write_atomically(path, comparison_csv(comparison).encode())
