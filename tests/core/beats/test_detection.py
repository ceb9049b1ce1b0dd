from __future__ import annotations

import numpy as np
import pytest

from core.beats.detection import detect_beats
from core.recordings.leads import independent_from_twelve
from tests.helpers.synthetic import synthetic


def found_s(made, extra: np.ndarray | float = 0.0) -> np.ndarray:
    signal = independent_from_twelve(made.recording.signal_mv.T) + extra
    return detect_beats(signal, made.recording.sampling_rate_hz) / made.recording.sampling_rate_hz


@pytest.mark.parametrize("rate_hz", [100.0, 250.0, 500.0, 1000.0, 8000.0])
@pytest.mark.parametrize("rr_s", [0.32, 0.6, 0.85, 1.6])
def test_every_beat_is_found_and_nothing_else(rate_hz, rr_s):
    made = synthetic(rate_hz=rate_hz, rr_s=rr_s, jitter_s=0.01, noise_mv=0.02)
    found = found_s(made)
    assert found.size == made.onsets_s.size
    # The middle of the QRS lies within its 85 ms.
    assert np.abs(found - made.onsets_s - 0.0425).max() < 0.045


def test_wander_and_noise_make_no_beats():
    made = synthetic(noise_mv=0.06)
    time = np.arange(made.recording.n_samples) / 500.0
    assert found_s(made, np.sin(2 * np.pi * 0.4 * time)).size == made.onsets_s.size


def test_a_tall_t_wave_is_no_beat():
    made = synthetic(noise_mv=0.01)
    time_ms = np.arange(made.recording.n_samples) * 2.0
    tall = np.zeros((8, time_ms.size))
    for onset in made.onsets_s:
        share = np.clip((time_ms - 1000 * onset - 180) / 220, 0, 1)
        tall += (0.5 - 0.5 * np.cos(2 * np.pi * share)) * 1.0
    assert found_s(made, tall).size == made.onsets_s.size


def test_silence_has_no_beats():
    assert detect_beats(np.zeros((8, 5000)), 500.0).size == 0
    assert detect_beats(np.zeros((8, 20)), 500.0).size == 0
