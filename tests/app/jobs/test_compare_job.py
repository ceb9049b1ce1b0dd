"""The runner with made-up work: no engine, no sleeping."""

from __future__ import annotations

import threading
from pathlib import Path

import pytest
from PySide6.QtCore import QTimer

from app.jobs.compare_job import CompareRequest, CompareRunner
from core import Settings
from core.errors import NotComparable, RecordingError, Stopped
from core.notices import Notice
from core.shipped_files import samples_folder


def request(name: str = "pair") -> CompareRequest:
    return CompareRequest(Path(f"{name}-earlier"), Path(f"{name}-later"), Settings())


@pytest.fixture
def runner_of(qtbot):
    made = []

    def make(work) -> CompareRunner:
        made.append(CompareRunner(work))
        return made[-1]

    yield make
    for runner in made:
        runner.shut_down()


def test_the_result_comes(runner_of, qtbot):
    runner = runner_of(lambda request, report, stop: ("result", request.earlier.name))
    with qtbot.waitSignal(runner.finished) as came:
        runner.start(request("a"))
    assert came.args == [("result", "a-earlier")]


def test_progress_comes_in_order(runner_of, qtbot):
    def work(request, report, stop):
        for share in (0.0, 0.3, 1.0):
            report(share, f"at {share}")
        return "done"

    runner, told = runner_of(work), []
    runner.progressed.connect(lambda share, words: told.append((share, words)))
    with qtbot.waitSignal(runner.finished):
        runner.start(request())
    assert told == [(0.0, "at 0.0"), (0.3, "at 0.3"), (1.0, "at 1.0")]


def test_the_newest_request_wins(runner_of, qtbot):
    first_runs, let_go = threading.Event(), threading.Event()

    def work(request, report, stop):
        if request.earlier.name.startswith("old"):
            first_runs.set()
            let_go.wait(5)
        return request.earlier.name

    runner, results = runner_of(work), []
    runner.finished.connect(results.append)
    runner.start(request("old"))
    qtbot.waitUntil(first_runs.is_set)
    with qtbot.waitSignal(runner.finished):
        runner.start(request("new"))
        let_go.set()
    runner.shut_down()
    assert results == ["new-earlier"]


def test_a_cancelled_comparison_is_not_heard_of_again(runner_of, qtbot):
    runs = threading.Event()

    def work(request, report, stop):
        runs.set()
        while not stop():
            pass
        raise Stopped("stopped")

    runner, heard = runner_of(work), []
    for signal in (runner.finished, runner.failed):
        signal.connect(lambda *args: heard.append(args))
    runner.start(request())
    qtbot.waitUntil(runs.is_set)
    runner.cancel()
    runner.shut_down()
    qtbot.wait(10)
    assert heard == []


def test_a_refusal_is_its_sentence(runner_of, qtbot):
    def work(request, report, stop):
        raise RecordingError("x.dcm: the file is empty. Export it again.")

    runner = runner_of(work)
    with qtbot.waitSignal(runner.failed) as came:
        runner.start(request())
    assert came.args == ["x.dcm: the file is empty. Export it again.", ()]


def test_a_stop_tells_what_lifts_it(runner_of, qtbot):
    def work(request, report, stop):
        raise NotComparable("Two persons.", (Notice("identifiers-differ", "stop", "Two persons."),))

    runner = runner_of(work)
    with qtbot.waitSignal(runner.failed) as came:
        runner.start(request())
    assert came.args == ["Two persons.", ("identifiers-differ",)]


def test_a_fault_of_the_program_is_a_sentence_and_its_message_stays_out(runner_of, qtbot, caplog):
    name = "INVENTED" + "-01"

    def work(request, report, stop):
        raise ZeroDivisionError(name)

    runner = runner_of(work)
    with qtbot.waitSignal(runner.failed) as came:
        runner.start(request())
    reason = came.args[0]
    assert "fault of the program (ZeroDivisionError)" in reason
    assert "INVENTED" not in reason + caplog.text
    assert "in work" in caplog.text  # where it happened


def test_the_window_goes_on_while_work_runs(runner_of, qtbot):
    let_go, ticks = threading.Event(), []

    def work(request, report, stop):
        let_go.wait(5)
        return "done"

    runner = runner_of(work)
    timer = QTimer()
    timer.timeout.connect(lambda: ticks.append(1))
    timer.start(1)
    runner.start(request())
    qtbot.waitUntil(lambda: len(ticks) > 20)
    with qtbot.waitSignal(runner.finished):
        let_go.set()
    timer.stop()


def test_shutting_down_leaves_no_thread(runner_of, qtbot):
    before = threading.active_count()
    runner = runner_of(lambda request, report, stop: "done")
    runner.start(request())
    runner.shut_down()
    assert runner._pool.activeThreadCount() == 0
    assert threading.active_count() <= before + 1  # Qt's own thread may still be known


@pytest.mark.parametrize("turned", [True, False])
def test_files_dropped_together_are_ordered_by_their_times(runner_of, qtbot, turned):
    earlier, later = (samples_folder() / f"steady-{which}" for which in ("earlier", "later"))
    runner, worked_on = runner_of(lambda request, report, stop: request.earlier), []
    runner.finished.connect(worked_on.append)
    asked = (later, earlier) if turned else (earlier, later)
    with qtbot.waitSignals([runner.ordered, runner.finished]):
        runner.start(CompareRequest(*asked, Settings(), order_by_time=True))
    assert worked_on == [earlier]
