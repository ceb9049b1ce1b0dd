"""Make a report where there is no display."""

from __future__ import annotations

from app.command_line.failures import CommandFailed
from core.comparison.results import Comparison


def make_report(comparison: Comparison) -> bytes:
    """The report as the bytes of a PDF.

    Raises
    ------
    CommandFailed
        If Qt cannot be loaded because the system lacks a library that it needs.
    """
    try:
        from PySide6.QtGui import QGuiApplication

        from app.report.report import write_report
    except ImportError as error:
        raise CommandFailed(
            f"the report cannot be written: Qt does not load ({error}). "
            "Install the system libraries that README names."
        ) from error
    if QGuiApplication.instance() is not None:
        return write_report(comparison)
    application = QGuiApplication(["samespot", "-platform", "offscreen"])
    content = write_report(comparison)
    application.shutdown()
    return content
