"""Leads whose QRS cannot be told from what disturbs them: an electrode is off or hardly holds."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from core.beats.alignment import cut_windows
from core.beats.detection import slope_power, stands_out

QRS_HALF_S = 0.07
# Share of the power around the QRS that returns from beat to beat, under which it is no QRS. Of
# LUDB records 1-50, 95 leads in 100 have more than 0.6; hum at the phases that eight beats meet by
# chance has more than 0.45 once in fifty times (exp(-8 x 0.52)).
LEAST_RETURNING = 0.45


def drowned_leads(
    signal_mv: NDArray[np.float64], centres: NDArray[np.int64], sampling_rate_hz: float
) -> NDArray[np.bool_]:
    """Leads in which nothing stands out and nothing returns from beat to beat.

    Both must fail: in a fast rhythm of wide QRS nothing stands out, in a rhythm of many shapes
    little returns. If no lead passes, none is called drowned.

    Parameters
    ----------
    signal_mv : ndarray, shape (n_leads, n_samples)
    centres : ndarray of int, shape (n_beats,)
        Where the QRS complexes of the other leads are; two or more.

    Returns
    -------
    ndarray of bool, shape (n_leads,)
    """
    hidden = ~stands_out(slope_power(signal_mv, sampling_rate_hz))
    half = round(QRS_HALF_S * sampling_rate_hz)
    drowned = hidden & (
        returning_share(cut_windows(signal_mv, centres, half, half)) < LEAST_RETURNING
    )
    return np.asarray(drowned & ~drowned.all())


def returning_share(windows: NDArray[np.float64]) -> NDArray[np.float64]:
    """Share of a lead's power that is the same in every window; around 0 for noise.

    Parameters
    ----------
    windows : ndarray, shape (n_beats, n_leads, n)

    Returns
    -------
    ndarray, shape (n_leads,)
    """
    centred = windows - windows.mean(axis=-1, keepdims=True)
    power = np.sum(centred**2, axis=(0, 2))
    n = windows.shape[0]
    varying = np.sum((centred - centred.mean(axis=0)) ** 2, axis=(0, 2)) * n / (n - 1)
    return np.asarray(1.0 - varying / np.where(power > 0, power, 1.0))
