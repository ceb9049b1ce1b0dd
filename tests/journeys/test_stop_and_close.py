from __future__ import annotations

import threading

import pytest
from PySide6.QtCore import Qt

from app.state.bench_state import Phase
from app.views.bench_window import BenchWindow
from tests.journeys.stories import on_show, pair


def test_a_running_comparison_can_be_stopped(bench, qtbot):
    bench.open_pair(*pair("raised"))
    assert bench.state.phase is Phase.WORKING
    qtbot.mouseClick(bench.verdict.cancel, Qt.MouseButton.LeftButton)
    assert bench.state.phase is Phase.EMPTY
    # Its thread has left when this returns; nothing of it may come in late.
    bench.runner.shut_down()
    qtbot.wait(50)
    assert bench.state.phase is Phase.EMPTY
    assert bench.state.comparison is None
    assert "in reach" not in on_show(bench)


@pytest.mark.parametrize("steps", [0, 3])  # closed at once, and in the middle of the work
def test_a_window_closed_while_it_works_ends_its_work(qtbot, steps):
    window, told = BenchWindow(), []
    qtbot.addWidget(window)
    window.show()
    window.runner.progressed.connect(lambda share, words: told.append(share))
    window.open_pair(*pair("raised"))
    qtbot.waitUntil(lambda: len(told) >= steps, timeout=60_000)
    window.close()
    assert window.runner._pool.activeThreadCount() == 0
    qtbot.wait(50)
    assert not window.isVisible()
    assert window.state.comparison is None


def test_a_window_that_is_closed_at_rest_leaves_no_thread(qtbot):
    before = set(threading.enumerate())
    window = BenchWindow()
    qtbot.addWidget(window)
    window.show()
    window.close()
    assert set(threading.enumerate()) == before
