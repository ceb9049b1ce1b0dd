from __future__ import annotations

from dataclasses import replace
from datetime import datetime

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Subject
from core.recordings.wfdb_writer import write_wfdb
from tests.helpers.synthetic import as_recording
from tests.helpers.wfdb_files import write_record


def test_a_copy_is_identical_to_the_bit(tmp_path):
    counts = np.random.default_rng(5).integers(-3000, 3000, (1500, 12))
    counts[7, 3] = -32768
    original = read_recording(
        write_record(tmp_path, "first", counts, list(TWELVE_LEADS), gain=417.0, baseline=-11)
    )
    write_wfdb(original, tmp_path / "second")
    again = read_recording(tmp_path / "second")
    np.testing.assert_array_equal(again.signal_mv, original.signal_mv)
    assert again.sampling_rate_hz == original.sampling_rate_hz


def test_who_and_when_are_kept(tmp_path):
    recording = replace(
        as_recording(np.zeros((600, 12)), 500.0),
        subject=Subject("P-1", "Tess Tester", "female", 61.0),
        recorded_at=datetime(2030, 1, 2, 3, 4, 5),
    )
    write_wfdb(recording, tmp_path / "who")
    again = read_recording(tmp_path / "who")
    assert again.subject == recording.subject
    assert again.recorded_at == recording.recorded_at


def test_a_signal_too_large_for_16_bits_gets_more(tmp_path):
    signal = np.zeros((600, 12))
    signal[5, 0] = 50.0  # 50 000 steps
    write_wfdb(as_recording(signal, 500.0), tmp_path / "large")
    assert read_recording(tmp_path / "large").signal_mv[5, 0] == 50.0


def test_a_name_that_wfdb_does_not_allow_is_refused(tmp_path):
    with pytest.raises(RecordingError, match="letters, digits"):
        write_wfdb(as_recording(np.zeros((600, 12)), 500.0), tmp_path / "a b")


def test_nothing_is_left_behind_where_writing_fails(tmp_path):
    with pytest.raises(OSError, match="No such file"):
        write_wfdb(as_recording(np.zeros((600, 12)), 500.0), tmp_path / "nowhere" / "x")
    assert list(tmp_path.iterdir()) == []
