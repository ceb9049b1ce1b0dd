"""The moved tracing is the recording with the moved leads foretold, and nothing else changed."""

from __future__ import annotations

import numpy as np
import pytest

from app.command_line.main import main
from core import ElectrodeMove, measure, move_electrodes, read_recording
from core.recordings.leads import TWELVE_LEADS
from core.shipped_files import samples_folder

SOURCES = ["raised-earlier", "medial-earlier.dcm"]


def moved(name: str, folder, *arguments: str):
    """The recording before and after."""
    source = str(samples_folder() / name)
    assert main(["move", source, *arguments, "--out", str(folder / "moved")]) == 0
    return read_recording(source), read_recording(folder / "moved")


def steps_mv(recording) -> np.ndarray:
    return 1.0 / np.array(recording.counts_per_mv)


@pytest.mark.parametrize("name", SOURCES)
def test_several_groups_are_what_the_python_face_foretells(name, tmp_path):
    groups = ["--electrode", "V2", "--up-mm", "24", "--left-mm=-10", "--electrode", "V5"]
    before, after = moved(name, tmp_path, *groups, "--left-mm", "-30")
    moves = [ElectrodeMove("V2", up_mm=24, left_mm=-10), ElectrodeMove("V5", left_mm=-30)]
    foretold = move_electrodes(before, moves)
    # Written in the file's own steps: off by half of one at most.
    off = np.abs(after.signal_mv - foretold.signal_mv)
    assert (off <= 0.5001 * steps_mv(before)).all()
    change = np.abs(after.signal_mv - before.signal_mv).max(axis=0)
    for lead, largest, step in zip(TWELVE_LEADS, change, steps_mv(before), strict=True):
        # Leads that were not moved were whole steps before, but for the arithmetic of scaling.
        assert largest > 10 * step if lead in ("V2", "V5") else largest < 1e-6 * step, lead


@pytest.mark.parametrize("name", SOURCES)
def test_rate_length_subject_and_time_stay(name, tmp_path):
    before, after = moved(name, tmp_path, "--electrode", "V3", "--up-mm", "15")
    for what in ("sampling_rate_hz", "n_samples", "counts_per_mv", "recorded_at"):
        assert getattr(after, what) == getattr(before, what), what
    assert after.subject.id == before.subject.id
    measure(after)


def test_a_move_by_nothing_changes_no_sample(tmp_path):
    before, after = moved("raised-earlier", tmp_path, "--electrode", "V1")
    np.testing.assert_array_equal(after.signal_mv, before.signal_mv)


def test_up_is_not_down_and_left_is_not_right(tmp_path):
    changes = []
    for direction in ("--up-mm", "--left-mm"):
        for size in ("20", "-20"):
            before, after = moved("raised-earlier", tmp_path, "--electrode", "V2", direction, size)
            changes.append((after.signal_mv - before.signal_mv)[:, TWELVE_LEADS.index("V2")])
    together = np.corrcoef(changes)
    assert together[0, 1] < 0  # opposite shifts change the lead in opposite ways
    assert together[2, 3] < 0
    assert abs(together[0, 2]) < 0.99  # up is not left


def test_the_message_says_what_was_written_and_not_where(tmp_path, capsys):
    moved("raised-earlier", tmp_path, "--electrode", "V2", "--up-mm", "10")
    captured = capsys.readouterr()
    assert captured.out == ""
    assert "moved.hea" in captured.err
    assert str(tmp_path) not in captured.err


@pytest.mark.parametrize(
    ("arguments", "part"),
    [
        (["--electrode", "V7", "--up-mm", "1", "--out", "m"], "V7"),
        (["--electrode", "aVR", "--up-mm", "1", "--out", "m"], "aVR"),
        (["--electrode", "V2", "--up-mm", "far", "--out", "m"], "far"),
        (["--up-mm", "1", "--electrode", "V2", "--out", "m"], "--up-mm must follow"),
        (["--left-mm", "1", "--electrode", "V2", "--out", "m"], "--left-mm must follow"),
        (["--electrode", "V2", "--up-mm", "1"], "--out"),
    ],
)
def test_wrong_arguments_are_told(arguments, part, tmp_path, monkeypatch, capsys):
    monkeypatch.chdir(tmp_path)
    with pytest.raises(SystemExit) as ended:
        main(["move", str(samples_folder() / "raised-earlier"), *arguments])
    captured = capsys.readouterr()
    assert (ended.value.code, captured.out) == (2, "")
    assert part in captured.err.splitlines()[-1]
    assert list(tmp_path.iterdir()) == []
