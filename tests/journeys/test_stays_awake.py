from __future__ import annotations

import time
from itertools import pairwise

from PySide6.QtCore import QTimer

from app.state.bench_state import Phase
from tests.journeys.stories import pair

TICK_MS = 5


def test_the_window_stays_awake_while_the_engine_works(bench, until, qtbot):
    at = []
    timer = QTimer()
    timer.setInterval(TICK_MS)
    timer.timeout.connect(lambda: at.append((time.monotonic(), bench.state.phase)))
    bench.runner.finished.connect(timer.stop)
    timer.start()
    started = time.monotonic()
    bench.open_pair(*pair("raised"))
    until(Phase.JUDGED)
    working = [when for when, phase in at if phase is Phase.WORKING]
    took = at[-1][0] - started
    # On the window's own thread the engine would let through no tick at all. It shares Python's
    # lock, so ticks come late, but at least one in ten must come.
    assert len(working) >= 0.1 * took / (TICK_MS / 1000)
    gaps = [after - before for before, after in pairwise(working)]
    # s: what a reader would call stuck. The longest stretch in which the engine holds the lock is
    # under 0.1 s; a busy machine may be several times as slow.
    assert max(gaps) < 1.0


def test_progress_is_seen_on_the_way(bench, until, qtbot):
    seen = []
    bench.state.progress_changed.connect(
        lambda: seen.append((bench.verdict.bar.value(), bench.verdict.next_step.text()))
    )
    bench.open_pair(*pair("raised"))
    until(Phase.JUDGED)
    values = [value for value, _ in seen]
    assert values == sorted(values)
    assert len({text for _, text in seen}) >= 5
    assert (values[0], values[-1]) == (0, 100)
