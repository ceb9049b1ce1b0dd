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
        name = (
            item.ConceptNameCodeSequence[0].CodeMeaning if "ConceptNameCodeSequence" in item else ""
        )
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


def both_beats(report, recorder) -> tuple[np.ndarray, np.ndarray]:
    """Our published representative beat, and the stretch of the recorder's that it lies on."""
    published = report.to_dict()["representative_beat"]["leads"]
    ours, theirs = np.array([published[lead] for lead in TWELVE_LEADS]), recorder.median_beat_mv
    n = ours.shape[1]
    lags = range(theirs.shape[1] - n + 1)
    lag = max(lags, key=lambda k: np.corrcoef(ours.ravel(), theirs[:, k : k + n].ravel())[0, 1])
    return ours, theirs[:, lag : lag + n]


def test_the_representative_beat_is_the_recorders(report, recorder):
    """In every lead with a QRS deflection over 0.3 mV: all but aVL, where R is 0.23 mV."""
    ours, theirs = both_beats(report, recorder)
    fiducials = report.points.fiducials
    deflection = np.abs(ours[:, fiducials.qrs_onset : fiducials.qrs_offset + 1]).max(axis=1)
    large = [lead for lead, size in zip(TWELVE_LEADS, deflection, strict=True) if size > 0.3]
    assert len(large) == 11
    for lead in large:
        row = TWELVE_LEADS.index(lead)
        assert np.corrcoef(ours[row], theirs[row])[0, 1] >= 0.99, lead


def test_the_representative_beat_is_the_recorders_from_p_to_t_in_every_lead(report, recorder):
    """Between the waves a small lead is nothing but two averages of the same noise."""
    ours, theirs = both_beats(report, recorder)
    fiducials = report.points.fiducials
    waves = slice(fiducials.p_onset, fiducials.t_offset + 1)
    for row, lead in enumerate(TWELVE_LEADS):
        assert np.corrcoef(ours[row, waves], theirs[row, waves])[0, 1] >= 0.99, lead
