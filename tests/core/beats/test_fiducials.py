from __future__ import annotations

import numpy as np
import pytest

from core import measure
from core.beats.fiducials import first_quiet
from core.recordings.leads import twelve_from_independent
from tests.helpers.synthetic import P_ON_MS, QRS_OFF_MS, T_OFF_MS, as_recording, synthetic


@pytest.mark.parametrize("rate_hz", [250.0, 500.0, 1000.0, 2000.0])
def test_intervals_of_a_known_beat(rate_hz):
    report = measure(synthetic(rate_hz=rate_hz, noise_mv=0.004).recording)
    # The readers' margins are 4 ms on either side, and a velocity threshold finds the foot of a
    # raised cosine a few ms late or early.
    assert report.qrs_ms == pytest.approx(QRS_OFF_MS, abs=12)
    assert report.pr_ms == pytest.approx(-P_ON_MS, abs=15)
    # A raised cosine ends more gently than its steepest tangent: 20 ms early is its geometry.
    assert report.qt_ms == pytest.approx(T_OFF_MS, abs=25)


def test_no_p_wave_is_called_absent_and_said_so():
    made = synthetic(noise_mv=0.005)
    signal = made.recording.signal_mv.copy()
    time_ms, rng = np.arange(signal.shape[0]) * 2.0, np.random.default_rng(1)
    for onset in made.onsets_s:
        before = (time_ms > 1000 * onset - 200) & (time_ms < 1000 * onset - 40)
        signal[before] = twelve_from_independent(rng.normal(0, 0.005, (8, before.sum()))).T
    report = measure(as_recording(signal, 500.0))
    assert report.pr_ms is None
    assert report.axes_deg()["p"] is None
    assert np.isnan(report.p_mv).all()
    assert "no-p-wave" in [notice.code for notice in report.notices]


def test_quiet_begins_where_it_lasts():
    velocity = np.array([9, 9, 0, 9, 0, 0, 0, 0, 9.0])
    assert first_quiet(velocity, 1.0, 3, otherwise=-1) == 4
    assert first_quiet(velocity, 1.0, 5, otherwise=-1) == -1
    assert first_quiet(velocity[:2], 1.0, 3, otherwise=-1) == -1
