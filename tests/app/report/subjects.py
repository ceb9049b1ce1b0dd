"""Comparisons of persons and files that test what a report can hold; all invented."""

from __future__ import annotations

from dataclasses import replace
from datetime import datetime

from core.comparison.results import Comparison
from core.measures.report import RecordingReport
from core.notices import Notice
from core.recordings.recording import Subject


def of_person(
    comparison: Comparison,
    subject: Subject,
    *,
    recorded_at: datetime | None = None,
    file_name: str | None = None,
) -> Comparison:
    """Both recordings with another subject, time and file name."""

    def changed(report: RecordingReport) -> RecordingReport:
        recording = report.recording
        source = replace(recording.source, name=file_name or recording.source.name)
        return replace(
            report,
            recording=replace(recording, subject=subject, recorded_at=recorded_at, source=source),
        )

    return replace(comparison, earlier=changed(comparison.earlier), later=changed(comparison.later))


def with_notices(comparison: Comparison, count: int) -> Comparison:
    """So many notices, each of two lines and with a word of its own."""
    notices = tuple(
        Notice(
            f"invented-{number}",
            "caution",
            f"Invented notice number{number} " + "with more to say than fits into a line " * 4,
        )
        for number in range(count)
    )
    return replace(comparison, notices=notices)
