"""A part of a recording is asked for, read and compared."""

from __future__ import annotations

from pathlib import Path

import pytest

from app.jobs.compare_job import CompareRequest
from app.state.stated import Stated, seconds_of_text
from app.views import dialogs
from app.views.stretch_dialog import StretchDialog
from core import Settings
from core.shipped_files import samples_folder

A, B = Path("/invented/a.hea"), Path("/invented/b.hea")


@pytest.mark.parametrize(
    ("text", "seconds"),
    [
        ("90", 90.0),
        ("2:30", 150.0),
        ("1:02:03", 3723.0),
        (" 0:00:01,5 ", 1.5),
        ("25:00:00", 90_000.0),
        ("1:60", None),
        ("1:2:3:4", None),
        ("-5", None),
        ("nan", None),
        ("ten", None),
        ("", None),
    ],
)
def test_times_as_readers_type_them(text, seconds):
    assert seconds_of_text(text) == seconds


def test_nothing_can_be_used_before_a_start_is_typed(qtbot):
    dialog = StretchDialog(None, "long.dcm")
    qtbot.addWidget(dialog)
    assert not dialog.use.isEnabled()
    dialog.start.setText("1:00:00")
    assert dialog.use.isEnabled()
    assert dialog.stated() == Stated(stretch_s=(3600.0, 3610.0))
    dialog.length.setText("0.5")
    assert not dialog.use.isEnabled()


def test_the_pair_is_compared_with_the_stretch(bench, monkeypatch):
    asked = []
    monkeypatch.setattr(bench.runner, "start", asked.append)
    monkeypatch.setattr(dialogs, "ask_stretch", lambda *_: Stated(stretch_s=(2.0, 8.0)))
    bench.open_pair(A, B)
    bench.state.remember(B, Stated(unit="mV"))
    bench.choose_stretch("later")
    assert asked[-1].stated == {B: Stated("mV", None, (2.0, 8.0))}


def test_without_an_answer_nothing_changes(bench, monkeypatch):
    asked = []
    monkeypatch.setattr(bench.runner, "start", asked.append)
    monkeypatch.setattr(dialogs, "ask_stretch", lambda *_: None)
    bench.open_pair(A, B)
    bench.choose_stretch("earlier")
    assert len(asked) == 1


def test_only_the_stretch_is_read():
    path = samples_folder() / "steady-earlier.hea"
    request = CompareRequest(path, path, Settings(), stated={path: Stated(stretch_s=(2.0, 8.0))})
    assert request.read(path).duration_s == pytest.approx(6.0)
