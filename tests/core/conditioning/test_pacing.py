from __future__ import annotations

import numpy as np
import pytest

from core import measure
from core.conditioning.pacing import bridge_spikes, find_spikes
from core.recordings.leads import independent_from_twelve, twelve_from_independent
from tests.helpers.synthetic import as_recording, synthetic

BEFORE_QRS_S = 0.030
# Size of a spike on each lead, mV; over two samples, as a 2 ms pulse is sampled at 500 Hz.
SIZES_MV = np.array([1.2, -0.8, 2.0, 1.5, -1.0, 0.7, 0.6, 0.4])


def paced(rate_hz: float = 500.0):
    made = synthetic(rate_hz=rate_hz)
    leads = independent_from_twelve(made.recording.signal_mv.T).copy()
    at = np.rint((made.onsets_s - BEFORE_QRS_S) * rate_hz).astype(int)
    width = max(1, round(0.002 * rate_hz))
    for offset in range(width):
        leads[:, at + offset] += SIZES_MV[:, None]
    return made, leads, at


@pytest.mark.parametrize("rate_hz", [500.0, 1000.0, 2000.0])
def test_every_spike_is_found_where_it_is(rate_hz):
    _, leads, at = paced(rate_hz)
    found = find_spikes(leads, rate_hz)
    assert found.size == at.size
    assert np.abs(found - at).max() <= 0.002 * rate_hz  # within the spike


def test_no_spike_is_found_in_beats_alone():
    for noise_mv in (0.0, 0.005, 0.02):
        leads = independent_from_twelve(synthetic(noise_mv=noise_mv).recording.signal_mv.T)
        assert find_spikes(leads, 500.0).size == 0


def test_bridging_leaves_everything_else_to_the_bit():
    _, leads, at = paced()
    bridged = bridge_spikes(leads, find_spikes(leads, 500.0), 500.0)
    touched = np.abs(np.arange(leads.shape[1])[:, None] - at[None, :]).min(axis=1) <= 6
    np.testing.assert_array_equal(bridged[:, ~touched], leads[:, ~touched])
    assert np.abs(bridged[:, touched]).max() < 0.05


def test_a_paced_recording_is_measured_as_if_unpaced_and_says_so():
    made, leads, _ = paced()
    report = measure(as_recording(twelve_from_independent(leads).T, 500.0))
    plain = measure(made.recording)
    # White noise of 5 uV, averaged over ten beats and its own bridging: a few uV.
    np.testing.assert_allclose(report.values["st_mv"], plain.values["st_mv"], atol=0.003)
    assert "paced" in [notice.code for notice in report.notices]
    assert "paced" not in [notice.code for notice in plain.notices]


def test_a_recording_of_a_few_samples_has_none():
    assert find_spikes(np.zeros((8, 10)), 500.0).size == 0
