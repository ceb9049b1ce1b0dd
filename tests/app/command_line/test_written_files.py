"""Results are written whole or not at all, and only where they can be."""

from __future__ import annotations

import os

import pytest

from app.command_line import compare_command
from app.command_line.main import main
from core.shipped_files import samples_folder

PAIR = [str(samples_folder() / f"raised-{which}") for which in ("earlier", "later")]
MOVE = ["--electrode", "V2", "--up-mm", "20"]


@pytest.fixture(autouse=True)
def compared(raised, monkeypatch):
    monkeypatch.setattr(compare_command, "compare", lambda *_: raised)


def error_line(capsys) -> str:
    captured = capsys.readouterr()
    assert captured.out == ""
    lines = captured.err.splitlines()
    assert len(lines) == 1, captured.err
    assert lines[0].startswith("samespot: ")
    assert lines[0].endswith(".")
    return lines[0]


def commands(target: str) -> list[list[str]]:
    return [
        *(["compare", *PAIR, option, target] for option in ("--json", "--csv", "--pdf")),
        ["measure", PAIR[0], "--json", target],
    ]


def test_an_earlier_file_is_replaced(tmp_path):
    target = tmp_path / "out.json"
    target.write_text("old")
    assert main(["compare", *PAIR, "--json", str(target)]) == 0
    assert target.read_text().startswith("{")
    assert list(tmp_path.iterdir()) == [target]


def test_an_earlier_file_is_kept_where_writing_fails(tmp_path, monkeypatch, capsys):
    target = tmp_path / "out.json"
    target.write_text("old")

    def full(*_: object) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(os, "fsync", full)
    for arguments in commands(str(target)):
        assert main(arguments) == 2
        assert "No space left on device" in error_line(capsys)
        assert target.read_text() == "old"
        assert list(tmp_path.iterdir()) == [target]


def test_a_file_in_no_folder_is_one_line(tmp_path, capsys):
    for arguments in commands(str(tmp_path / "no such folder" / "out")):
        assert main(arguments) == 2
        assert "no such folder" in error_line(capsys)


def test_a_folder_where_a_file_was_meant_is_one_line(tmp_path, capsys):
    for arguments in commands(str(tmp_path)):
        assert main(arguments) == 2
        assert tmp_path.name in error_line(capsys)


@pytest.mark.parametrize("target", [".", "..", os.sep])
def test_a_target_without_a_name_is_one_line(target, tmp_path, monkeypatch, capsys):
    monkeypatch.chdir(tmp_path)
    for arguments in commands(target):
        assert main(arguments) == 2
        assert f"{target}: " in error_line(capsys)
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("stem", ["no such folder/moved", "a b", "moved.hea", "."])
def test_a_record_that_cannot_be_written_is_one_line_and_leaves_nothing(
    stem, tmp_path, monkeypatch, capsys
):
    monkeypatch.chdir(tmp_path)
    assert main(["move", PAIR[0], *MOVE, "--out", stem]) == 2
    assert "Choose another" in error_line(capsys)
    assert list(tmp_path.iterdir()) == []


@pytest.mark.skipif(
    not hasattr(os, "geteuid") or os.geteuid() == 0, reason="a root user may write anywhere"
)
def test_a_folder_that_may_not_be_written_is_one_line(tmp_path, capsys):
    tmp_path.chmod(0o500)
    target = str(tmp_path / "out")
    for arguments in [*commands(target), ["move", PAIR[0], *MOVE, "--out", target]]:
        assert main(arguments) == 2
        assert "Permission denied" in error_line(capsys)


def test_the_demo_says_where_its_folder_cannot_be_made(tmp_path, capsys):
    (tmp_path / "file").touch()
    assert main(["demo", "--no-window", "--out", str(tmp_path / "file" / "demo")]) == 2
    assert "--out" in error_line(capsys)
