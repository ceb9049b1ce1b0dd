"""Recordings of known shape: waves of raised cosines, and a level ST."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.recordings.leads import TWELVE_LEADS, twelve_from_independent
from core.recordings.recording import Recording, Source

# Milliseconds after the QRS onset, which is the beat's own zero.
P_ON_MS, P_OFF_MS = -160.0, -60.0
R_MS, R_OFF_MS, S_ON_MS, QRS_OFF_MS = 28.0, 56.0, 44.0, 88.0
T_ON_MS, T_PEAK_MS, T_OFF_MS = 180.0, 290.0, 400.0
R_MV = np.array([0.7, 1.1, 0.2, 0.5, 0.9, 1.5, 1.4, 1.1])
S_MV = np.array([-0.1, -0.2, -1.0, -1.4, -0.8, -0.3, -0.2, -0.1])
T_MV = np.array([0.2, 0.3, 0.1, 0.5, 0.5, 0.45, 0.4, 0.3])
P_MV = np.array([0.05, 0.12, 0.06, 0.06, 0.05, 0.05, 0.04, 0.04])


@dataclass(frozen=True, slots=True, eq=False)
class Synthetic:
    """A recording and what is known of it."""

    recording: Recording
    onsets_s: NDArray[np.float64]

    @property
    def r_times_s(self) -> NDArray[np.float64]:
        return self.onsets_s + R_MS / 1000.0


def beat_mv(
    since_ms: NDArray[np.float64], *, st_mv: float = 0.0, t_scale: float = 1.0
) -> NDArray[np.float64]:
    """Eight leads at times after the QRS onset, shape (8, n)."""

    def hump(start: float, stop: float) -> NDArray[np.float64]:
        share = np.clip((since_ms - start) / (stop - start), 0.0, 1.0)
        return 0.5 - 0.5 * np.cos(2 * np.pi * share)

    # ST falls back to the baseline under the T wave.
    st = (
        np.interp(since_ms, [S_ON_MS, QRS_OFF_MS, T_PEAK_MS, T_OFF_MS], [0.0, 1.0, 1.0, 0.0])
        * st_mv
    )
    leads = []
    for r, s, t, p in zip(R_MV, S_MV, T_MV, P_MV, strict=True):
        qrs = r * hump(0.0, R_OFF_MS) + s * hump(S_ON_MS, QRS_OFF_MS)
        leads.append(qrs + st + p * hump(P_ON_MS, P_OFF_MS) + t_scale * t * hump(T_ON_MS, T_OFF_MS))
    return np.array(leads)


def synthetic(
    *,
    rate_hz: float = 500.0,
    duration_s: float = 10.0,
    rr_s: float = 0.85,
    jitter_s: float = 0.02,
    noise_mv: float = 0.005,
    st_mv: float = 0.0,
    seed: int = 0,
) -> Synthetic:
    """A regular recording of identical beats in white noise."""
    rng = np.random.default_rng(seed)
    onsets = np.arange(0.35, duration_s - 0.5, rr_s)
    onsets = onsets + rng.uniform(-jitter_s, jitter_s, onsets.size)
    time_ms = np.arange(round(duration_s * rate_hz)) * 1000.0 / rate_hz
    signal = np.zeros((8, time_ms.size))
    for onset in onsets:
        signal += beat_mv(time_ms - 1000.0 * onset, st_mv=st_mv)
    signal += rng.normal(0.0, noise_mv, signal.shape)
    return Synthetic(as_recording(twelve_from_independent(signal).T, rate_hz), onsets)


def as_recording(
    signal_mv: NDArray[np.float64], rate_hz: float, *, name: str = "synthetic"
) -> Recording:
    """A recording around an array of twelve leads, shape (n_samples, 12)."""
    return Recording(
        signal_mv=signal_mv,
        sampling_rate_hz=rate_hz,
        leads_present=TWELVE_LEADS,
        leads_derived=(),
        counts_per_mv=(1000.0,) * 12,
        source=Source(name, "synthetic", "0" * 64),
    )
