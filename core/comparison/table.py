"""A comparison as a tidy table: one row for each measure of each lead."""

from __future__ import annotations

import csv
import io

from core.comparison.results import Comparison

_NUMBERS = (
    "earlier",
    "later",
    "change",
    "noise_low",
    "noise_high",
    "reach_low",
    "reach_high",
    "expected",
    "remainder",
    "remainder_low",
    "remainder_high",
)


def comparison_csv(comparison: Comparison) -> str:
    """The table as CSV; the measure's name ends in its unit, an empty field is no number."""
    buffer = io.StringIO()
    writer = csv.writer(buffer, lineterminator="\n")
    writer.writerow(["lead", "judgement", "measure", *_NUMBERS])
    for lead, result in comparison.leads.items():
        for name, change in result.measures.items():
            numbers = [getattr(change, number) for number in _NUMBERS]
            writer.writerow([lead, result.judgement, name, *numbers])
    return buffer.getvalue()
