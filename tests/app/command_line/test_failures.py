"""How a command ends when it does not end well."""

from __future__ import annotations

import io
import sys

import pytest

from app.command_line import compare_command
from app.command_line.main import main
from core.errors import ComparisonError, ModelError, RecordingError
from core.shipped_files import samples_folder

PAIR = [str(samples_folder() / f"raised-{which}") for which in ("earlier", "later")]
COMMANDS = ("open", "compare", "measure", "move", "demo")


def fail_with(monkeypatch, error: BaseException) -> None:
    def compare(*_: object) -> None:
        raise error

    monkeypatch.setattr(compare_command, "compare", compare)


@pytest.mark.parametrize(
    ("error", "status"),
    [
        (ComparisonError("Too short. Record again."), 1),
        (KeyboardInterrupt(), 1),
        (RecordingError("Unreadable. Export again."), 2),
        (ModelError("Damaged. Install again."), 2),
    ],
)
def test_every_failure_has_its_status_and_one_line(error, status, monkeypatch, capsys):
    fail_with(monkeypatch, error)
    assert main(["compare", *PAIR]) == status
    captured = capsys.readouterr()
    assert captured.out == ""
    lines = captured.err.splitlines()
    assert len(lines) == 1
    assert lines[0].startswith("samespot: ")
    assert str(error) in lines[0]


def test_a_reason_of_several_lines_becomes_one(monkeypatch, capsys):
    fail_with(monkeypatch, ComparisonError("Too short.\n  Record\tagain."))
    assert main(["compare", *PAIR]) == 1
    assert capsys.readouterr().err == "samespot: Too short. Record again.\n"


def test_a_reader_that_has_gone_is_no_failure(monkeypatch):
    """As in ``samespot compare ... | head``."""
    fail_with(monkeypatch, BrokenPipeError())
    silent = io.StringIO()
    monkeypatch.setattr(sys, "stderr", silent)
    assert main(["compare", *PAIR]) == 0
    assert silent.closed  # so that nothing is said of it at the very end either


def test_a_fault_of_the_program_is_not_hidden(monkeypatch):
    fail_with(monkeypatch, ZeroDivisionError())
    with pytest.raises(ZeroDivisionError):
        main(["compare", *PAIR])


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_explains_itself(command, capsys):
    with pytest.raises(SystemExit) as ended:
        main([command, "--help"])
    assert ended.value.code == 0
    assert f"samespot {command}" in capsys.readouterr().out


def test_help_names_every_command(capsys):
    with pytest.raises(SystemExit):
        main(["--help"])
    out = capsys.readouterr().out
    assert all(command in out for command in COMMANDS)


@pytest.mark.parametrize(
    "arguments",
    [
        ["nonsense"],
        ["compare", PAIR[0]],
        ["compare", *PAIR, "third"],
        ["compare", *PAIR, "--spread-mm", "abc"],
        ["compare", *PAIR, "--spread-mm"],
        ["measure"],
        ["measure", PAIR[0], "--nonsense"],
        ["measure", PAIR[0], "--rate-hz", "fast"],
    ],
)
def test_wrong_arguments_end_with_2_and_nothing_on_standard_output(arguments, capsys):
    with pytest.raises(SystemExit) as ended:
        main(arguments)
    captured = capsys.readouterr()
    assert (ended.value.code, captured.out) == (2, "")
    assert "error: " in captured.err.splitlines()[-1]


@pytest.mark.parametrize("bad", ["-1", "nan", "inf", "101"])
def test_an_impossible_spread_is_refused_before_anything_is_read(bad, capsys):
    assert main(["compare", "missing", "missing", f"--spread-mm={bad}"]) == 2
    captured = capsys.readouterr()
    assert captured.out == ""
    assert len(captured.err.splitlines()) == 1
    assert "--spread-mm" in captured.err
    assert bad.lstrip("-") in captured.err
