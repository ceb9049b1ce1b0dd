"""What a table does not say of itself is said by options."""

from __future__ import annotations

import pytest

from app.command_line.main import main
from core.shipped_files import samples_folder
from tests.helpers.tables import bare_table

RECORD = samples_folder() / "raised-earlier"


@pytest.fixture(scope="module")
def table(tmp_path_factory):
    """The sample in mV, with neither a unit nor times."""
    return str(bare_table(tmp_path_factory.mktemp("table"), RECORD.name))


def commands(table, folder) -> list[list[str]]:
    move = ["--electrode", "V2", "--up-mm", "9", "--out", str(folder / "moved")]
    return [["measure", table], ["compare", table, str(RECORD)], ["move", table, *move]]


def test_unit_and_rate_are_taken_by_every_command(table, tmp_path, capsys):
    for arguments in commands(table, tmp_path):
        assert main([*arguments, "--unit", "mV", "--rate-hz", "500"]) == 0, arguments
    assert "No lead changed beyond repeat noise" in capsys.readouterr().out


@pytest.mark.parametrize(
    ("options", "part"),
    [
        ([], "raised-earlier.csv"),
        ([], "state both with --unit mV --rate-hz 500."),
        (["--unit", "mV"], "state it with --rate-hz 500."),
        (["--rate-hz", "500"], "state it with --unit mV."),
        (["--unit", "mmHg", "--rate-hz", "500"], "mmHg"),
        (["--unit", "mV", "--rate-hz", "nan"], "nan"),
        (["--unit", "mV", "--rate-hz", "0"], "0"),
        (["--unit", "mV", "--rate-hz=-500"], "500"),
    ],
)
def test_what_is_missing_or_wrong_is_one_line(table, options, part, tmp_path, capsys):
    for arguments in commands(table, tmp_path):
        assert main([*arguments, *options]) == 2
        captured = capsys.readouterr()
        assert captured.out == ""
        assert len(captured.err.splitlines()) == 1
        assert part in captured.err
        assert "Traceback" not in captured.err
