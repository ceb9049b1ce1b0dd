"""Where the QRS complexes are, from all leads together."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.ndimage import maximum_filter1d

from core.conditioning.zero_phase import low_pass, moving_mean

# The QRS is the only wave with much power here; P and T lie below, muscle noise above.
SLOPE_SPAN_S = 0.016
HIGHEST_HZ = 35.0
ENVELOPE_S = 0.09
SHORTEST_RR_S = 0.25  # 240 beats a minute
WINDOW_S = 1.6  # holds at least one beat down to 38 a minute
SMALLEST_SHARE = 0.30  # of the local QRS envelope
# Within this time after a QRS, a wave must be this much of it, or it is its T wave.
T_WAVE_S = 0.42
T_WAVE_SHARE = 0.55
# The envelope of a lead with a QRS is this many times its median at its 97th percentile, within
# the QRS at rates from 20 a minute up. In LUDB records 1-50 no lead is under 3.5; noise, hum and
# wander, however large, reach 2.2.
QRS_PERCENTILE, LEAST_CREST = 97.0, 2.5
SAMPLES_LOOKED_AT = 1000


def slope_power(signal_mv: NDArray[np.float64], sampling_rate_hz: float) -> NDArray[np.float64]:
    """Squared slope of every lead, smoothed over about one QRS.

    Parameters
    ----------
    signal_mv : ndarray, shape (n_leads, n_samples)

    Returns
    -------
    ndarray, shape (n_leads, n_samples)
        In (mV/s)^2.
    """
    smooth = low_pass(signal_mv, cutoff_hz=HIGHEST_HZ, sampling_rate_hz=sampling_rate_hz)
    span = max(1, round(SLOPE_SPAN_S * sampling_rate_hz / 2))
    slope = np.zeros_like(smooth)
    slope[:, span:-span] = (smooth[:, 2 * span :] - smooth[:, : -2 * span]) * (
        sampling_rate_hz / (2 * span)
    )
    smoothed = moving_mean(slope**2, round(ENVELOPE_S * sampling_rate_hz))
    return np.asarray(np.maximum(smoothed, 0.0))


def stands_out(power: NDArray[np.float64]) -> NDArray[np.bool_]:
    """In which leads something stands out from the rest of the tracing as a QRS does.

    Parameters
    ----------
    power : ndarray, shape (n_leads, n_samples)
        As `slope_power` gives it.

    Returns
    -------
    ndarray of bool, shape (n_leads,)
    """
    # Smoothed over a QRS as it is, every few samples tell as much as all.
    few = np.ascontiguousarray(power[:, :: max(1, power.shape[1] // SAMPLES_LOOKED_AT)])
    usual, top = np.percentile(few, (50.0, QRS_PERCENTILE), axis=1)
    return np.asarray((top > 0) & (top >= LEAST_CREST**2 * usual))


def telling_of(chosen: NDArray[np.bool_]) -> NDArray[np.bool_]:
    """The leads chosen, or all where none is."""
    return chosen if chosen.any() else np.ones_like(chosen)


def detect_beats(signal_mv: NDArray[np.float64], sampling_rate_hz: float) -> NDArray[np.int64]:
    """Sample of the middle of each QRS.

    Parameters
    ----------
    signal_mv : ndarray, shape (n_leads, n_samples)
        The independent leads, no NaN; baseline wander does not matter.

    Returns
    -------
    ndarray of int, shape (n_beats,)
        Ascending; empty where nothing like a QRS is found.
    """
    n = signal_mv.shape[1]
    if n < SHORTEST_RR_S * sampling_rate_hz:
        return np.empty(0, dtype=np.int64)
    power = slope_power(signal_mv, sampling_rate_hz)
    # A lead that is noise throughout would hide the beats of the others.
    envelope = np.sqrt(np.mean(power[telling_of(stands_out(power))], axis=0))
    # A filter from scipy.ndimage, because importing scipy.signal takes longer than a comparison.
    reach = max(1, round(SHORTEST_RR_S * sampling_rate_hz))
    highest = envelope == maximum_filter1d(envelope, 2 * reach + 1, mode="nearest")
    rises = np.diff(envelope, prepend=-np.inf) > 0  # of a flat top, the first sample
    peaks = np.flatnonzero(highest & rises & (envelope > 0))
    height = envelope[peaks]
    local = _local_qrs_height(peaks, height, n, sampling_rate_hz)
    keep = height >= SMALLEST_SHARE * local
    peaks, height = peaks[keep], height[keep]
    return _without_t_waves(peaks, height, sampling_rate_hz)


def _local_qrs_height(
    peaks: NDArray[np.int64], height: NDArray[np.float64], n: int, sampling_rate_hz: float
) -> NDArray[np.float64]:
    """Typical QRS height around each peak: median of the tallest of five windows near it.

    The median passes over a window without a beat and over a lone artefact.
    """
    width = WINDOW_S * sampling_rate_hz
    n_windows = max(1, round(n / width))
    window = np.minimum((peaks * n_windows) // n, n_windows - 1)
    tallest = np.zeros(n_windows)
    np.maximum.at(tallest, window, height)
    if n_windows == 1:
        return np.full(peaks.size, tallest[0])
    reach = min(2, (n_windows - 1) // 2)
    padded = np.pad(tallest, reach, mode="reflect") if reach else tallest
    around = np.lib.stride_tricks.sliding_window_view(padded, 2 * reach + 1)
    typical = np.median(around, axis=1)
    return np.asarray(typical[window])


def _without_t_waves(
    peaks: NDArray[np.int64], height: NDArray[np.float64], sampling_rate_hz: float
) -> NDArray[np.int64]:
    kept: list[int] = []
    last_height = 0.0
    for peak, tall in zip(peaks.tolist(), height.tolist(), strict=True):
        near = bool(kept) and peak - kept[-1] < T_WAVE_S * sampling_rate_hz
        if near and tall < T_WAVE_SHARE * last_height:
            continue
        kept.append(peak)
        last_height = tall
    return np.asarray(kept, dtype=np.int64)
