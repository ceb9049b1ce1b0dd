from __future__ import annotations

import csv
from dataclasses import replace
from datetime import date, datetime

import numpy as np
import pytest

from core import RecordingError, read_recording
from core.recordings.csv_reader import looks_like_csv, read_csv
from core.recordings.csv_writer import recording_csv
from core.recordings.recording import Filters, Recording, Subject
from tests.helpers.synthetic import as_recording
from tests.helpers.wfdb_files import write_record


def noise(n: int = 700, rate_hz: float = 500.0, seed: int = 8) -> Recording:
    return as_recording(np.random.default_rng(seed).normal(0, 1, (n, 12)), rate_hz)


def copy(recording: Recording, folder) -> Recording:
    path = folder / "copy.csv"
    path.write_bytes(recording_csv(recording))
    assert looks_like_csv(path.read_bytes()[:4096])
    return read_csv(path)


@pytest.mark.parametrize("per_mv", [200.0, 417.0, 1000.0, 5461.25, 1 / 31.25e-6, 1e6])
def test_a_copy_is_within_half_a_step(tmp_path, per_mv):
    recording = replace(noise(), counts_per_mv=(per_mv,) * 11 + (per_mv * 2,))
    again = copy(recording, tmp_path)
    off = np.abs(again.signal_mv - recording.signal_mv) * np.array(recording.counts_per_mv)
    assert off.max() <= 0.5
    assert again.counts_per_mv == recording.counts_per_mv


def test_whole_steps_come_back_to_the_bit(tmp_path):
    counts = np.random.default_rng(5).integers(-3000, 3000, (1500, 8))
    leads = ["I", "II", "V1", "V2", "V3", "V4", "V5", "V6"]
    original = read_recording(write_record(tmp_path, "first", counts, leads, gain=417.0))
    again = copy(original, tmp_path)
    np.testing.assert_array_equal(
        np.rint(again.signal_mv * original.counts_per_mv),
        np.rint(original.signal_mv * original.counts_per_mv),
    )
    # Decimals of 1 µV hold steps of 1 µV as they are.
    in_microvolts = as_recording(np.rint(noise().signal_mv * 1000) / 1000, 500.0)
    np.testing.assert_array_equal(copy(in_microvolts, tmp_path).signal_mv, in_microvolts.signal_mv)


def test_derived_leads_stay_derived(tmp_path):
    counts = np.random.default_rng(6).integers(-3000, 3000, (700, 8))
    leads = ["aVF", "II", "V1", "V2", "V3", "V4", "V5", "V6"]
    original = read_recording(write_record(tmp_path, "eight", counts, leads))
    again = copy(original, tmp_path)
    assert again.leads_derived == original.leads_derived == ("I", "III", "aVR", "aVL")
    np.testing.assert_allclose(again.signal_mv, original.signal_mv, rtol=0, atol=1e-9)


def test_gaps_stay_gaps(tmp_path):
    signal = noise().signal_mv.copy()
    signal[100:120, 4] = np.nan
    signal[:, 9] = np.nan
    signal[500] = np.nan
    recording = as_recording(signal, 500.0)
    np.testing.assert_array_equal(np.isnan(copy(recording, tmp_path).signal_mv), np.isnan(signal))


@pytest.mark.parametrize("rate_hz", [100.0, 128.0, 257.0, 360.0, 1000 / 3, 500.5, 977.0, 8000.0])
def test_the_rate_comes_back_exactly(tmp_path, rate_hz):
    assert copy(noise(rate_hz=rate_hz), tmp_path).sampling_rate_hz == rate_hz


def test_who_when_and_filters_come_back(tmp_path):
    recording = replace(
        noise(),
        subject=Subject("P;1, or so", "Tess\nTester", "female", 61.0, date(1950, 3, 9)),
        recorded_at=datetime(2030, 1, 2, 3, 4, 5, 600000),
        filters=Filters(0.05, 150.0, 50.0),
        further_leads=("V7", "X"),
        further_mv=np.round(np.random.default_rng(1).normal(0, 1, (700, 2)), 3),
    )
    again = copy(recording, tmp_path)
    # What ran over two lines stands on one.
    assert again.subject == replace(recording.subject, name="Tess Tester")
    assert again.recorded_at == recording.recorded_at
    assert again.filters == recording.filters
    assert again.further_leads == ("V7", "X")
    np.testing.assert_array_equal(again.further_mv, recording.further_mv)


def test_other_programs_can_read_it():
    """By Python's csv module: a time column in s, then the leads in mV; no minus zero."""
    signal = np.zeros((600, 12))
    signal[1, 0] = -1e-9
    lines = recording_csv(as_recording(signal, 500.0)).decode().splitlines()
    rows = list(csv.reader(line for line in lines if not line.startswith("#")))
    assert rows[0][:3] == ["time (s)", "I (mV)", "II (mV)"]
    assert rows[2] == ["0.002", "0.00000", *["0.000"] * 11]
    assert len(rows) == 601


def test_an_infinite_sample_is_refused():
    signal = np.zeros((600, 12))
    signal[5, 5] = np.inf
    with pytest.raises(RecordingError, match="infinite"):
        recording_csv(as_recording(signal, 500.0))
