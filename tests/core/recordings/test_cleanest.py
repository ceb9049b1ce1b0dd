from __future__ import annotations

import numpy as np
import pytest

from core import measure
from core.recordings.cleanest import cleanest_stretch
from tests.helpers.synthetic import as_recording, synthetic

RATE_HZ = 250.0
QUIET = 17  # which ten seconds of the six minutes are quiet


@pytest.fixture(scope="module")
def monitoring():
    """Six minutes of noise, wander and lost electrodes; one stretch is quiet."""
    made = synthetic(rate_hz=RATE_HZ, duration_s=360.0, noise_mv=0.002).recording.signal_mv.copy()
    rng = np.random.default_rng(5)
    length = round(10 * RATE_HZ)
    time_s = np.arange(length) / RATE_HZ
    for piece in range(36):
        if piece == QUIET:
            continue
        stretch = made[piece * length : (piece + 1) * length]
        stretch += rng.normal(0, 0.02, stretch.shape)
        stretch += (0.4 * np.sin(2 * np.pi * 0.15 * time_s + piece))[:, None]
    made[5 * length : 6 * length, 8] = 0.0  # off
    made[20 * length + 3, 2] = np.nan
    return as_recording(made, RATE_HZ)


def test_the_quiet_stretch_is_taken_and_said(monitoring):
    cut = cleanest_stretch(monitoring)
    length = round(10 * RATE_HZ)
    np.testing.assert_array_equal(
        cut.signal_mv, monitoring.signal_mv[QUIET * length : (QUIET + 1) * length]
    )
    notice = cut.notices[-1]
    assert notice.code == "stretch-chosen"
    assert "from 0:02:50 (h:min:s) on" in notice.text


def test_a_stretch_with_a_lead_off_is_never_taken(monitoring):
    signal = monitoring.signal_mv.copy()
    length = round(10 * RATE_HZ)
    signal[QUIET * length : (QUIET + 1) * length, 4] = 0.3
    cut = cleanest_stretch(monitoring.with_signal(signal, name="off"))
    assert np.ptp(cut.signal_mv, axis=0).min() > 0.1


def test_a_resting_recording_stays_whole():
    made = synthetic(duration_s=60.0).recording
    assert cleanest_stretch(made) is made


def test_a_long_recording_is_measured_over_that_stretch(monitoring):
    report = measure(monitoring)
    assert report.recording.duration_s == 10.0
    assert "stretch-chosen" in [notice.code for notice in report.notices]
