"""Start the workstation."""

from __future__ import annotations

import sys
from pathlib import Path

from PySide6.QtWidgets import QApplication

from app.views.bench_window import BenchWindow
from app.views.theme import dress
from core.version import PROGRAM_NAME


def run_workstation(pair: tuple[str, str] | None) -> None:
    """Open the bench, with a pair if one is given, until its window is closed."""
    application = QApplication.instance() or QApplication(sys.argv[:1])
    assert isinstance(application, QApplication)
    application.setApplicationName(PROGRAM_NAME)
    dress(application)
    application.styleHints().colorSchemeChanged.connect(lambda _: dress(application))
    window = BenchWindow()
    window.show()
    if pair is not None:
        window.open_pair(Path(pair[0]), Path(pair[1]))
    application.exec()
