"""Pacing spikes: found by their width, and bridged before anything is measured.

A spike is over within a few milliseconds and leaves the tracing where it was. A QRS, however
narrow, is wider: halfway between two points 16 ms away it stands out far more than halfway
between two points 6 ms away.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.ndimage import label, maximum_filter1d

NARROW_S, WIDE_S = 0.006, 0.016
# Root mean square over the leads. On LUDB records 1-50, of which five are paced, spikes reach
# 0.15 to 2.3 mV, are at least twice as prominent over the narrow span as over the wide, and the
# tracing steps by less than half of a spike across it; no QRS comes near all three.
SMALLEST_MV = 0.10
# A spike and its decay.
BRIDGED_S = 0.010
NARROWNESS = 1.5
LARGEST_STEP = 0.5


def find_spikes(signal_mv: NDArray[np.float64], sampling_rate_hz: float) -> NDArray[np.int64]:
    """Samples of the pacing spikes.

    Parameters
    ----------
    signal_mv : ndarray, shape (n_leads, n_samples)
        No NaN.

    Returns
    -------
    ndarray of int, shape (n_spikes,)
        Ascending.
    """
    narrow, wide = (max(2, round(span * sampling_rate_hz)) for span in (NARROW_S, WIDE_S))
    if signal_mv.shape[1] <= 4 * wide:
        return np.empty(0, dtype=np.int64)
    tall = _prominence(signal_mv, narrow)
    steps = np.full_like(tall, np.inf)
    steps[wide:-wide] = _over_leads(signal_mv[:, 2 * wide :] - signal_mv[:, : -2 * wide])
    spike = (
        (tall > SMALLEST_MV)
        & (tall > NARROWNESS * _prominence(signal_mv, wide))
        & (steps < LARGEST_STEP * tall)
    )
    # Samples of one spike belong together; it is where they and their neighbours stand out most.
    groups, n = label(maximum_filter1d(spike, 2 * narrow + 1))
    tops = [int(np.argmax(np.where(groups == group, tall, 0.0))) for group in range(1, n + 1)]
    return np.array(tops, dtype=np.int64)


def bridge_spikes(
    signal_mv: NDArray[np.float64], spikes: NDArray[np.int64], sampling_rate_hz: float
) -> NDArray[np.float64]:
    """A straight line through every spike.

    Parameters
    ----------
    signal_mv : ndarray, shape (n_leads, n_samples)
    spikes : ndarray of int
        From `find_spikes`.
    """
    if spikes.size == 0:
        return signal_mv
    bridged = signal_mv.copy()
    reach = max(2, round(BRIDGED_S * sampling_rate_hz))
    for spike in spikes.tolist():
        first, last = max(0, spike - reach), min(signal_mv.shape[1] - 1, spike + reach)
        share = np.linspace(0.0, 1.0, last - first + 1)
        ends = signal_mv[:, [first, last]]
        bridged[:, first : last + 1] = ends[:, :1] + (ends[:, 1:] - ends[:, :1]) * share
    return bridged


def _prominence(signal_mv: NDArray[np.float64], span: int) -> NDArray[np.float64]:
    """How far each sample stands out from halfway between those *span* away; 0 at the ends."""
    prominence = np.zeros(signal_mv.shape[1])
    middle = (signal_mv[:, 2 * span :] + signal_mv[:, : -2 * span]) / 2
    prominence[span:-span] = _over_leads(signal_mv[:, span:-span] - middle)
    return prominence


def _over_leads(values: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.asarray(np.sqrt(np.mean(values**2, axis=0)))
