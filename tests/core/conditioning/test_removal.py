"""What conditioning takes out of a recording, and that it leaves ST alone."""

from __future__ import annotations

import numpy as np
import pytest

from core import measure
from core.conditioning.calm import calm_outside_qrs
from core.conditioning.mains import estimate_mains
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.synthetic import QRS_OFF_MS, as_recording, beat_mv, synthetic


def st_uv(signal_mv: np.ndarray, rate_hz: float) -> np.ndarray:
    return 1000 * measure(as_recording(signal_mv, rate_hz)).values["st_mv"]


def test_wander_moves_st_by_less_than_10_uv():
    clean = synthetic(noise_mv=0.002, st_mv=0.1).recording
    time = np.arange(clean.n_samples) / clean.sampling_rate_hz
    # Other phases in other leads, as breathing gives.
    phase = np.linspace(0, np.pi, 12)[None]
    wander = 0.5 * np.sin(2 * np.pi * 0.3 * time[:, None] + phase)
    moved = st_uv(clean.signal_mv + wander, 500.0) - st_uv(clean.signal_mv, 500.0)
    assert np.abs(moved).max() < 10.0  # uV, at 0.3 Hz and 0.5 mV


@pytest.mark.parametrize("mains_hz", [50.0, 60.0])
def test_mains_hum_is_taken_out_of_st(mains_hz):
    clean = synthetic(noise_mv=0.002, st_mv=0.1).recording
    time = np.arange(clean.n_samples) / clean.sampling_rate_hz
    hum = 0.1 * np.sin(2 * np.pi * mains_hz * time + 0.4)[:, None]
    before = measure(clean)
    after = measure(as_recording(clean.signal_mv + hum, 500.0))
    moved = 1000 * (after.values["st_mv"] - before.values["st_mv"])
    # 5 uV: a fifth of the least repeat noise of ST.
    assert np.abs(moved).max() < 5.0


def test_no_hum_is_invented_where_there_is_none():
    made = synthetic(noise_mv=0.01)
    residual = np.random.default_rng(0).normal(0, 0.01, (8, made.recording.n_samples))
    hum = estimate_mains(
        residual, np.zeros(residual.shape[1], dtype=bool), lambda basis: basis, sampling_rate_hz=500
    )
    assert (hum == 0).all()


def test_st_is_read_as_it_was_made():
    rate = 1000.0
    report = measure(synthetic(rate_hz=rate, noise_mv=0.001, st_mv=0.15, jitter_s=0.0).recording)
    row = TWELVE_LEADS.index("V4")
    # The fiducials decide where J is; J+60 then lies on the level stretch up to T's onset.
    expected = beat_mv(np.array([QRS_OFF_MS + 60.0]), st_mv=0.15)[5, 0]
    assert report.values["st_mv"][row] == pytest.approx(expected, abs=0.005)


def test_calming_leaves_the_qrs_to_the_bit_and_quiets_the_rest():
    rng = np.random.default_rng(4)
    noisy = rng.normal(0, 0.02, (3, 600))
    calm = calm_outside_qrs(noisy, 250, 300, sampling_rate_hz=500.0)
    np.testing.assert_array_equal(calm[:, 245:306], noisy[:, 245:306])
    # White noise keeps the share of the band below the cutoff: sqrt(40/250), a little less.
    assert calm[:, :200].std() < 0.5 * noisy[:, :200].std()
