"""pydicom's real recording against what its own recorder measured and marked on it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pydicom
import pytest
from pydicom.waveforms.numpy_handler import multiplex_array

from core import measure
from core.recordings.leads import TWELVE_LEADS


@dataclass(frozen=True)
class Recorder:
    numbers: dict[str, float]
    r_samples: np.ndarray
    median_beat_mv: np.ndarray


@pytest.fixture(scope="module")
def recorder(real_file) -> Recorder:
    dataset = pydicom.dcmread(real_file)
    numbers, marks = {}, []
    for item in dataset.WaveformAnnotationSequence:
        name = item.ConceptNameCodeSequence[0].CodeMeaning if "ConceptNameCodeSequence" in item else ""
        if "NumericValue" in item:
            numbers[name] = float(item.NumericValue)
        elif name == "Fiducial Point" and int(item.AnnotationGroupNumber) >= 100:
            marks.append(int(item.ReferencedSamplePositions))
    return Recorder(numbers, np.array(marks), multiplex_array(dataset, 1, as_raw=False).T / 1000)


@pytest.fixture(scope="module")
def report(real_recording):
    return measure(real_recording)


def test_all_ten_beats_are_found_within_10_ms(report, recorder):
    found = np.array([beat.r_time_s for beat in report.analysis.beats]) * 1000
    assert found.size == recorder.r_samples.size == 10
    assert np.abs(found - recorder.r_samples).max() < 10


def test_intervals(report, recorder):
    numbers = recorder.numbers
    assert report.rr_s * 1000 == pytest.approx(numbers["RR Interval"], abs=5)
    # 12 and 15 ms: about twice the scatter of expert readers (CSE 1985, from memory).
    assert report.pr_ms == pytest.approx(numbers["PR Interval"], abs=12)
    assert report.qrs_ms == pytest.approx(numbers["QRS Duration"], abs=12)
    assert report.qt_ms == pytest.approx(numbers["QT Interval"], abs=15)


def test_axes_within_10_degrees(report, recorder):
    axes = report.axes_deg()
    for wave, name in (("p", "P Axis"), ("qrs", "QRS Axis"), ("t", "T Axis")):
        assert axes[wave] == pytest.approx(recorder.numbers[name], abs=10)


def test_the_representative_beat_is_the_recorders(report, recorder):
    theirs, ours = recorder.median_beat_mv, report.beat_mv
    n = ours.shape[1]
    lags = range(theirs.shape[1] - n + 1)
    lag = max(lags, key=lambda k: np.corrcoef(ours.ravel(), theirs[:, k : k + n].ravel())[0, 1])
    large = 0
    for row, lead in enumerate(TWELVE_LEADS):
        stretch = theirs[row, lag : lag + n]
        if np.ptp(stretch) > 0.3:
            large += 1
            assert np.corrcoef(ours[row], stretch)[0, 1] >= 0.99, lead
    assert large == 12
