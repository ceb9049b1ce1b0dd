from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path

import pytest
from PySide6.QtCore import Qt

from app.state.bench_state import Phase
from app.views import dialogs
from app.views.bench_window import BenchWindow
from app.views.theme import dress, use_scheme

# A comparison takes about half a second; a busy machine may be many times as slow.
PATIENCE_MS = 60_000


@pytest.fixture
def bench(qtbot, qapp) -> Iterator[BenchWindow]:
    """The real window with the real engine."""
    use_scheme(Qt.ColorScheme.Light)
    dress(qapp)
    made = BenchWindow()
    qtbot.addWidget(made)
    made.resize(1280, 720)
    made.show()
    qtbot.waitExposed(made)
    yield made
    made.runner.shut_down()
    use_scheme(None)


@pytest.fixture
def until(qtbot, bench) -> Callable[[Phase], None]:
    """Wait until the bench is in a phase."""

    def wait(phase: Phase) -> None:
        qtbot.waitUntil(lambda: bench.state.phase is phase, timeout=PATIENCE_MS)

    return wait


@pytest.fixture
def choose_file(monkeypatch) -> Callable[[Path], None]:
    """What the next file dialogs answer."""

    def answer(path: Path) -> None:
        monkeypatch.setattr(dialogs, "ask_recording", lambda parent, title: path)
        monkeypatch.setattr(dialogs, "ask_file_to_write", lambda *asked: path)

    return answer
