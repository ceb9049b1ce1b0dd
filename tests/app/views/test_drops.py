from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import QMimeData, QPoint, QPointF, Qt, QUrl
from PySide6.QtGui import QDragEnterEvent, QDropEvent

from app.state.bench_state import Phase
from tests.app.views.showing import show

A, B, C = Path("/invented/a.hea"), Path("/invented/b.dcm"), Path("/invented/c.edf")


@pytest.fixture
def asked(bench, monkeypatch):
    """What the bench asks to be compared."""
    requests = []
    monkeypatch.setattr(bench.runner, "start", requests.append)
    return requests


def mime(*urls: str) -> QMimeData:
    data = QMimeData()
    data.setUrls([QUrl(url) for url in urls])
    return data


def drop(bench, data: QMimeData) -> None:
    copy, left, none = (
        Qt.DropAction.CopyAction,
        Qt.MouseButton.LeftButton,
        Qt.KeyboardModifier.NoModifier,
    )
    enter = QDragEnterEvent(QPoint(9, 9), copy, data, left, none)
    bench.dragEnterEvent(enter)
    if enter.isAccepted():
        bench.dropEvent(QDropEvent(QPointF(9, 9), copy, data, left, none))


def files(*paths: Path) -> QMimeData:
    return mime(*(QUrl.fromLocalFile(str(path)).toString() for path in paths))


def test_two_files_are_a_pair_whose_order_their_times_decide(bench, asked):
    drop(bench, files(A, B))
    (request,) = asked
    assert {request.earlier, request.later} == {A, B}
    assert request.order_by_time


def test_the_first_of_two_is_the_earlier_and_the_second_the_later(bench, asked):
    drop(bench, files(A))
    assert asked == []
    assert (bench.state.earlier, bench.state.later) == (A, None)
    drop(bench, files(B))
    (request,) = asked
    assert (request.earlier, request.later) == (A, B)


def test_a_third_takes_the_place_of_the_later(bench, asked):
    drop(bench, files(A))
    drop(bench, files(B))
    drop(bench, files(C))
    assert (asked[-1].earlier, asked[-1].later) == (A, C)


def test_the_files_of_one_wfdb_record_are_one_recording(bench, asked):
    drop(bench, files(A, A.with_suffix(".dat")))
    assert asked == []
    assert bench.state.earlier == A


@pytest.mark.parametrize("already", [False, True], ids=["empty", "with a result"])
def test_three_recordings_are_refused_in_a_sentence(bench, asked, raised, already):
    if already:
        show(bench, raised)
    drop(bench, files(A, B, C))
    assert asked == []
    assert bench.state.phase is Phase.REFUSED
    assert bench.verdict.sentence.text().startswith("3 recordings were dropped")
    assert not bench.wall.isVisible()


def test_what_is_no_file_of_this_machine_is_left_alone(bench, asked):
    drop(bench, mime("https://example.org/a.hea"))
    drop(bench, QMimeData())
    assert asked == []
    assert bench.state.phase is Phase.EMPTY
    assert bench.state.earlier is None


def test_while_a_pair_is_compared_three_recordings_end_that(bench, qtbot, monkeypatch, asked):
    ended = []
    monkeypatch.setattr(bench.runner, "cancel", lambda: ended.append(True))
    drop(bench, files(A, B))
    drop(bench, files(A, B, C))
    assert bench.state.phase is Phase.REFUSED
    assert ended, "the first pair's result would come in under the refusal"
