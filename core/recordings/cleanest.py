"""Ten seconds of a long recording: the stretch with the least noise and wander."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from core.recordings.recording import Recording
from core.wording import notices as say

# A recording longer than this is no resting ECG but a stretch of monitoring.
LONGEST_WHOLE_S = 300.0
STRETCH_S = 10.0
# A lead that moves less than this in ten seconds is off.
LEAST_MV = 0.1


def cleanest_stretch(recording: Recording) -> Recording:
    """The recording itself, or the cleanest ten seconds of one that is longer than five minutes.

    Each stretch is ranked by its noise (the median absolute second difference) and by its wander
    (how far the median of its seconds moves), as shares of what is usual in the recording; the
    smallest sum over all leads is taken. Stretches with missing samples or a lead that is off
    come last.
    """
    if recording.duration_s <= LONGEST_WHOLE_S:
        return recording
    rate = recording.sampling_rate_hz
    length = round(STRETCH_S * rate)
    n = recording.n_samples // length
    pieces = recording.signal_mv[: n * length].reshape(n, length, -1)
    cost = np.array([_cost(piece, round(rate)) for piece in pieces])  # (n, 2)
    usual = np.nanmedian(np.where(np.isfinite(cost), cost, np.nan), axis=0)
    ranked = (cost / np.maximum(usual, 1e-9)).sum(axis=1)
    start_s = int(np.argmin(ranked)) * length / rate
    cut = recording.stretch(start_s, start_s + STRETCH_S)
    notice = say.stretch_chosen(start_s, STRETCH_S, recording.duration_s)
    return replace(cut, notices=(*cut.notices, notice))


def _cost(piece_mv: NDArray[np.float64], one_second: int) -> tuple[float, float]:
    """Noise and wander of a stretch, mean over the leads; infinite where a lead is off."""
    if np.isnan(piece_mv).any() or np.ptp(piece_mv, axis=0).min() < LEAST_MV:
        return np.inf, np.inf
    noise = float(np.mean(np.median(np.abs(np.diff(piece_mv, n=2, axis=0)), axis=0)))
    seconds = piece_mv[: piece_mv.shape[0] // one_second * one_second]
    levels = np.median(seconds.reshape(-1, one_second, piece_mv.shape[1]), axis=1)
    return noise, float(np.mean(np.ptp(levels, axis=0)))
