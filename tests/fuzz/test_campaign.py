"""A campaign finds what it looks for."""

from __future__ import annotations

import os
import re
import subprocess
import sys
import tempfile
import time
import warnings
from pathlib import Path

import pytest

pytest.importorskip("resource", reason="the peak of memory is asked of a Unix system")

from core import RecordingError
from core.recordings.read import read_recording
from core.shipped_files import samples_folder
from tests.fuzz import __main__, guided
from tests.fuzz import tally as tally_module
from tests.fuzz.tally import Tally, output_watched
from tests.helpers import watched
from tests.helpers.damage import FORMATS

ROOT = Path(__file__).resolve().parents[2]


def test_the_command_counts_and_ends_well():
    done = subprocess.run(
        [sys.executable, "-m", "tests.fuzz", "csv", "--files", "40", "--seed", "7"],
        cwd=ROOT,
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 0, done.stdout + done.stderr
    counts = re.search(r"csv: 40 files in \d+ s: (\d+) read, (\d+) refused; slowest", done.stdout)
    assert counts is not None
    assert int(counts[1]) + int(counts[2]) == 40


def test_the_command_knows_every_format():
    assert set(__main__.FORMATS) == set(FORMATS)
    assert set(__main__.GUIDED) == set(guided.PACKAGES)


def fails(_path: Path) -> None:
    raise KeyError("a reader's own fault")


def warns(path: Path):
    warnings.warn("a library's remark", stacklevel=1)
    return read_recording(path)


def dawdles(path: Path):
    time.sleep(0.05)
    return read_recording(path)


def hangs(_path: Path) -> None:
    time.sleep(60)


def refusing(message: str):
    def refuse(_path: Path) -> None:
        raise RecordingError(message)

    return refuse


@pytest.mark.parametrize(
    ("reader", "fault"),
    [
        (fails, "KeyError"),
        (warns, "a library's remark"),
        (dawdles, "took 0.1 s"),
        (refusing("steady-earlier.hea: " + "too long " * 50), "too long"),
        (refusing(f"steady-earlier.hea: {samples_folder()} is damaged"), "names a folder"),
        (refusing("this file is damaged"), "which file"),
        (lambda path: read_recording(path).stretch(0, 0), "impossible recording"),
    ],
)
def test_what_no_reader_may_do_is_found(monkeypatch, reader, fault):
    monkeypatch.setattr(watched, "read_recording", reader)
    monkeypatch.setattr(watched, "SLOWEST_S", 0.04)
    reading = watched.read_watched(samples_folder() / "steady-earlier.hea")
    assert any(fault in found for found in reading.faults)


@pytest.mark.skipif(sys.platform == "win32", reason="Windows has no alarm")
def test_a_reading_that_hangs_is_stopped(monkeypatch):
    monkeypatch.setattr(watched, "read_recording", hangs)
    monkeypatch.setattr(watched, "STOPPED_AFTER_S", 1)
    monkeypatch.setattr(watched, "SLOWEST_S", 0.5)
    reading = watched.read_watched(samples_folder() / "steady-earlier.hea")
    assert any("stopped after 1 s" in found for found in reading.faults)
    assert any("took 1.0 s" in found for found in reading.faults)


def test_a_sound_reading_has_no_faults():
    reading = watched.read_watched(samples_folder() / "steady-earlier.hea")
    assert (reading.faults, reading.refusal) == ([], None)


@pytest.mark.parametrize("fault", ["a fault", "printed", "memory"])
def test_a_file_with_a_fault_is_kept_and_ends_badly(tmp_path, monkeypatch, capsys, fault):
    monkeypatch.setattr(tempfile, "tempdir", str(tmp_path))
    folder = tmp_path / "work"
    folder.mkdir()
    (folder / "damaged.csv").write_text("what was read")
    if fault == "memory":
        monkeypatch.setattr(tally_module, "peak_mb", iter([1.0, 501.0, 501.0, 501.0]).__next__)
    tally = Tally("csv")
    reading = watched.Reading(faults=["a fault"] if fault == "a fault" else [])
    tally.add(5, folder, reading, b"words" if fault == "printed" else b"")
    assert tally.report() == 1
    (kept,) = tmp_path.glob("fuzz-csv-*/5")
    assert (kept / "damaged.csv").read_text() == "what was read"
    said = {"a fault": "a fault", "printed": "printed: b'words'", "memory": "took 501 MB"}[fault]
    assert said in (kept / "faults.txt").read_text()
    assert str(kept.parent) in capsys.readouterr().out


def test_what_is_written_to_the_outputs_is_taken(capfd):
    with output_watched() as printed:
        os.write(2, b"by a library ")
        subprocess.run([sys.executable, "-c", "print('by another')"], check=True)
        said = printed.take()
        assert printed.take() == b""
    assert said.split() == b"by a library by another".split()
    assert capfd.readouterr() == ("", "")
