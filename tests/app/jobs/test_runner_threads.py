from __future__ import annotations

import threading
from pathlib import Path

import pytest

from app.jobs.compare_job import CompareRequest, CompareRunner
from core import Settings
from core.errors import RecordingError, Stopped


def request(name: str) -> CompareRequest:
    return CompareRequest(Path(f"{name}-earlier"), Path(f"{name}-later"), Settings())


class Work:
    """Made-up work that runs until it is let go, and remembers who asked it to stop."""

    def __init__(self) -> None:
        self.let_go = threading.Event()
        self.began: list[str] = []
        self.asked_to_stop: list[str] = []
        self.ended: list[str] = []
        self.threads: set[int] = set()

    def __call__(self, asked, report, should_stop) -> str:
        name = asked.earlier.name
        self.threads.add(threading.get_ident())
        self.began.append(name)
        report(0.1, name)
        while not self.let_go.wait(0.002):
            if should_stop():
                self.asked_to_stop.append(name)
                self.ended.append(name)
                raise Stopped("stopped")
        self.ended.append(name)
        return name


@pytest.fixture
def work() -> Work:
    return Work()


@pytest.fixture
def runner(qtbot, work):
    made = CompareRunner(work)
    yield made
    made.shut_down()


@pytest.fixture
def heard(runner) -> list[tuple]:
    told: list[tuple] = []
    runner.progressed.connect(lambda share, name: told.append(("progress", name)))
    runner.finished.connect(lambda result: told.append(("result", result)))
    runner.failed.connect(lambda reason, stops: told.append(("failure", reason)))
    return told


def test_work_runs_beside_the_thread_of_the_window(runner, work, qtbot):
    work.let_go.set()
    with qtbot.waitSignal(runner.finished):
        runner.start(request("a"))
    assert work.threads
    assert threading.get_ident() not in work.threads


def test_a_replaced_request_is_asked_to_stop(runner, work, qtbot):
    runner.start(request("old"))
    qtbot.waitUntil(lambda: work.began == ["old-earlier"])
    runner.start(request("new"))
    qtbot.waitUntil(lambda: "new-earlier" in work.began)
    assert work.asked_to_stop == ["old-earlier"]


def test_of_many_requests_only_the_last_is_heard(runner, work, heard, qtbot):
    names = [f"pair{number}" for number in range(12)]
    for name in names[:-1]:
        runner.start(request(name))
    work.let_go.set()
    with qtbot.waitSignal(runner.finished):
        runner.start(request(names[-1]))
    runner.shut_down()
    qtbot.wait(10)
    assert {name for _, name in heard} == {f"{names[-1]}-earlier"}
    assert [kind for kind, _ in heard] == ["progress", "result"]


def test_progress_of_a_cancelled_comparison_is_not_heard(runner, work, heard, qtbot):
    runner.start(request("old"))
    qtbot.waitUntil(lambda: bool(work.began))
    heard.clear()
    runner.cancel()
    runner.shut_down()
    qtbot.wait(10)
    assert heard == []


def test_cancelling_nothing_is_harmless(runner, heard, qtbot):
    runner.cancel()
    runner.cancel()
    runner.shut_down()
    assert heard == []


def test_a_stopped_runner_can_start_again(runner, work, qtbot):
    runner.start(request("old"))
    runner.cancel()
    work.let_go.set()
    with qtbot.waitSignal(runner.finished) as came:
        runner.start(request("new"))
    assert came.args == ["new-earlier"]


def test_a_runner_goes_on_after_a_failure(qtbot):
    def fails_once(asked, report, should_stop):
        if asked.earlier.name == "bad-earlier":
            raise RecordingError("bad-earlier: the file is empty. Export the recording again.")
        return asked.earlier.name

    runner = CompareRunner(fails_once)
    with qtbot.waitSignal(runner.failed):
        runner.start(request("bad"))
    with qtbot.waitSignal(runner.finished) as came:
        runner.start(request("good"))
    assert came.args == ["good-earlier"]
    runner.shut_down()


def test_shutting_down_waits_until_work_has_left_its_thread(runner, work, heard, qtbot):
    runner.start(request("a"))
    qtbot.waitUntil(lambda: bool(work.began))
    runner.shut_down()
    assert work.ended == ["a-earlier"]
    heard.clear()
    qtbot.wait(10)
    assert heard == []


def test_requests_that_were_replaced_before_they_began_are_not_worked_on(qtbot):
    began, let_go = [], threading.Event()

    def work(asked, report, should_stop) -> str:
        began.append(asked.earlier.name)
        let_go.wait(5)  # s: only a fault lets it run out
        return asked.earlier.name

    runner = CompareRunner(work)
    runner.start(request("first"))
    qtbot.waitUntil(lambda: bool(began))
    for number in range(5):
        runner.start(request(f"passing{number}"))
    with qtbot.waitSignal(runner.finished):
        runner.start(request("last"))
        let_go.set()
    runner.shut_down()
    assert began == ["first-earlier", "last-earlier"]


@pytest.mark.parametrize("fault", [MemoryError, RuntimeError, KeyError, RecursionError])
def test_any_fault_of_the_program_becomes_one_line_without_a_trace(qtbot, fault):
    def work(asked, report, should_stop):
        raise fault("in /some/folder of Invented Ash")

    runner = CompareRunner(work)
    with qtbot.waitSignal(runner.failed) as came:
        runner.start(request("a"))
    reason, stops = came.args
    assert stops == ()
    assert fault.__name__ in reason
    for private in ("\n", "Traceback", "File ", "/some/folder", "Invented Ash"):
        assert private not in reason
    runner.shut_down()
