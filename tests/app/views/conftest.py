from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace

import pytest
from PySide6.QtCore import Qt
from PySide6.QtWidgets import QApplication

from app.jobs.compare_job import CompareRunner
from app.views.bench_window import BenchWindow
from app.views.theme import dress, use_scheme
from core import Comparison, compare, read_recording
from core.recordings.leads import TWELVE_LEADS
from core.shipped_files import samples_folder
from tests.app.views.showing import nothing_to_do


@pytest.fixture
def light(qapp: QApplication) -> Iterator[None]:
    """The light palette, whatever the system's is."""
    use_scheme(Qt.ColorScheme.Light)
    dress(qapp)
    yield
    use_scheme(None)
    dress(qapp)


@pytest.fixture
def bench(qtbot, light) -> Iterator[BenchWindow]:
    """The bench at its smallest supported size; no work is ever done, results are put in."""
    made = BenchWindow(CompareRunner(nothing_to_do))
    qtbot.addWidget(made)
    made.resize(1280, 720)
    made.show()
    qtbot.waitExposed(made)
    yield made
    made.runner.shut_down()


@pytest.fixture(scope="session")
def four_flat() -> Comparison:
    """Four chest leads of the later recording hold nothing."""
    earlier, later = (
        read_recording(samples_folder() / f"raised-{which}.hea") for which in ("earlier", "later")
    )
    signal = later.signal_mv.copy()
    signal[:, [TWELVE_LEADS.index(lead) for lead in ("V1", "V3", "V4", "V6")]] = 0.0
    return compare(earlier, replace(later, signal_mv=signal))
