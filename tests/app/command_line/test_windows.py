"""Commands that open the workstation; the window itself is not opened here."""

from __future__ import annotations

import subprocess

import pytest

from app import workstation
from app.command_line import demo_command, display
from app.command_line.main import main
from core.shipped_files import samples_folder


@pytest.fixture
def opened(monkeypatch) -> list:
    pairs: list = []
    monkeypatch.setattr(workstation, "run_workstation", pairs.append)
    monkeypatch.setenv("QT_QPA_PLATFORM", "offscreen")
    return pairs


@pytest.mark.parametrize("arguments", [[], ["open"]])
def test_without_recordings_it_opens_empty(arguments, opened, capsys):
    assert main(arguments) == 0
    assert opened == [None]
    assert capsys.readouterr() == ("", "")


def test_two_recordings_are_opened_in_their_order(opened):
    assert main(["open", "one.hea", "other.dcm"]) == 0
    assert opened == [("one.hea", "other.dcm")]


def test_one_recording_alone_opens_nothing(opened, capsys):
    assert main(["open", "one.hea"]) == 2
    assert opened == []
    error = capsys.readouterr().err
    assert len(error.splitlines()) == 1
    assert "two recordings or none" in error


def test_the_demo_opens_the_sample_pair_where_a_display_answers(opened, monkeypatch, tmp_path):
    monkeypatch.setattr(demo_command, "display_answers", lambda: True)
    monkeypatch.chdir(tmp_path)
    assert main(["demo"]) == 0
    assert opened == [tuple(str(samples_folder() / name) for name in demo_command.PAIR)]
    assert list(tmp_path.iterdir()) == []


def test_the_demo_opens_no_window_where_files_were_asked_for(opened, monkeypatch, tmp_path):
    monkeypatch.setattr(demo_command, "display_answers", lambda: True)
    folder = tmp_path / "made" / "for it"
    assert main(["demo", "--out", str(folder)]) == 0
    assert opened == []
    names = {path.name for path in folder.iterdir()}
    assert names == {"comparison.json", "comparison.pdf"}


@pytest.mark.parametrize("variable", ["DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"])
@pytest.mark.parametrize("platform", ["linux", "freebsd14"])
def test_a_display_is_named_by_any_of_the_variables(monkeypatch, variable, platform):
    monkeypatch.setattr("sys.platform", platform)
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    assert not display.display_named()
    assert not display.display_answers()
    monkeypatch.setenv(variable, ":0")
    assert display.display_named()


@pytest.mark.parametrize("platform", ["win32", "darwin"])
def test_where_windows_are_always_there_no_variable_is_needed(monkeypatch, platform):
    monkeypatch.setattr("sys.platform", platform)
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    assert display.display_named()


@pytest.mark.parametrize(
    "trouble", [OSError("no interpreter"), subprocess.TimeoutExpired("probe", 20)]
)
def test_a_display_that_cannot_be_asked_does_not_answer(monkeypatch, trouble):
    def ask(*_: object, **__: object) -> None:
        raise trouble

    monkeypatch.setenv("QT_QPA_PLATFORM", "offscreen")
    monkeypatch.setattr(subprocess, "run", ask)
    assert not display.display_answers()
