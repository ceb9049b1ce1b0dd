"""What the commands write, and where."""

from __future__ import annotations

import csv
import json
import subprocess
import sys

import pytest

from app.command_line.main import main
from core.recordings.leads import TWELVE_LEADS
from core.shipped_files import samples_folder
from core.wording.caution import CAUTIONS, PLACEMENT_CAVEAT
from tests.helpers.schemas import validate

PAIR = [str(samples_folder() / f"raised-{which}") for which in ("earlier", "later")]


def test_compare_without_an_output_prints_a_readable_summary(capsys):
    assert main(["compare", *PAIR]) == 0
    out = capsys.readouterr().out
    for part in ("in reach, backed", "V1 about", "noise", *CAUTIONS):
        assert part in out
    assert PLACEMENT_CAVEAT in out
    assert len([line for line in out.splitlines() if line.startswith(tuple(TWELVE_LEADS))]) >= 12


def test_compare_writes_json_csv_and_pdf(tmp_path, capsys):
    files = {kind: tmp_path / f"out.{kind}" for kind in ("json", "csv", "pdf")}
    options = [part for kind, path in files.items() for part in (f"--{kind}", str(path))]
    assert main(["compare", *PAIR, *options]) == 0
    captured = capsys.readouterr()
    assert captured.out == ""
    content = json.loads(files["json"].read_text())
    validate("comparison", content)
    assert content["overall"]["judgement"] == "in-reach-backed"
    rows = list(csv.DictReader(files["csv"].read_text().splitlines()))
    assert {row["lead"] for row in rows} == set(TWELVE_LEADS)
    assert files["pdf"].read_bytes().startswith(b"%PDF")


def test_a_cold_start_writes_json_alone_to_standard_output():
    program = (
        "import sys; from app.command_line.main import main; status = main(); "
        "sys.exit(3 if 'PySide6' in sys.modules else status)"  # no report, so no Qt
    )
    done = subprocess.run(
        [sys.executable, "-W", "ignore", "-c", program, "compare", *PAIR, "--json", "-"],
        capture_output=True,
        check=False,
    )
    assert (done.returncode, done.stderr) == (0, b"")
    validate("comparison", json.loads(done.stdout))


def test_a_wider_spread_is_taken_and_told(capfdbinary):
    assert main(["compare", *PAIR, "--spread-mm", "30", "--json", "-"]) == 0
    content = json.loads(capfdbinary.readouterr().out)
    assert content["settings"]["spread_mm"] == {"left": 30.0, "up": 30.0}


def test_measure_prints_or_writes_the_report(tmp_path, capsys):
    assert main(["measure", PAIR[0]]) == 0
    assert CAUTIONS[0] in capsys.readouterr().out
    target = tmp_path / "report.json"
    assert main(["measure", PAIR[0], "--json", str(target)]) == 0
    validate("recording", json.loads(target.read_text()))


@pytest.mark.parametrize(
    "moves",
    [
        ["--electrode", "V2", "--up-mm", "500"],
        ["--electrode", "V2", "--up-mm", "nan"],
        ["--electrode", "V2", "--up-mm", "1", "--electrode", "V2", "--up-mm", "2"],
    ],
)
def test_an_impossible_move_is_one_line(tmp_path, capsys, moves):
    assert main(["move", PAIR[0], *moves, "--out", str(tmp_path / "m")]) == 2
    error = capsys.readouterr().err
    assert len(error.splitlines()) == 1
    assert list(tmp_path.iterdir()) == []


def test_demo_without_a_window_writes_report_and_json(tmp_path, capsys):
    assert main(["demo", "--no-window", "--out", str(tmp_path / "out")]) == 0
    captured = capsys.readouterr()
    assert captured.out == ""  # messages go to standard error
    assert "in reach, backed" in captured.err
    validate("comparison", json.loads((tmp_path / "out" / "comparison.json").read_text()))
    assert (tmp_path / "out" / "comparison.pdf").read_bytes().startswith(b"%PDF")


def test_demo_without_a_display_says_so_and_writes(tmp_path, monkeypatch, capsys):
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    monkeypatch.chdir(tmp_path)
    assert main(["demo"]) == 0
    assert "No display" in capsys.readouterr().err
    assert (tmp_path / "samespot-demo" / "comparison.pdf").is_file()


def test_open_without_a_display_says_what_to_do(monkeypatch, capsys):
    for name in ("DISPLAY", "WAYLAND_DISPLAY", "QT_QPA_PLATFORM"):
        monkeypatch.delenv(name, raising=False)
    for arguments in (["open", *PAIR], []):
        assert main(arguments) == 2
        assert "samespot compare" in capsys.readouterr().err


def test_help_and_version(capsys):
    for arguments, part in ((["--help"], CAUTIONS[0].split()[0]), (["--version"], "samespot ")):
        with pytest.raises(SystemExit) as ended:
            main(arguments)
        assert ended.value.code == 0
        assert part in capsys.readouterr().out


def test_a_stop_is_told_with_what_lifts_it(capsys, tmp_path):
    other = str(samples_folder() / "steady-later")
    target = tmp_path / "out.json"
    assert main(["compare", PAIR[0], other, "--json", str(target)]) == 1
    error = capsys.readouterr().err
    assert len(error.splitlines()) == 1
    assert "--lift-stop identifiers-differ" in error
    validate("comparison", json.loads(target.read_text()))
    assert main(["compare", PAIR[0], other, "--lift-stop", "identifiers-differ"]) == 0
    assert "lifted by the user" in capsys.readouterr().out
