"""Quieting a beat outside its QRS.

P, ST and T hold next to nothing above 40 Hz (common practice, no source), the QRS and the J
point do. The QRS and 10 ms on either side are left as they are; the rest is low-passed at
40 Hz, without phase, with a short passage between the two. ST at J+60 lies so far from the QRS
that none of it leaks in.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from core.conditioning.zero_phase import low_pass

QUIET_CUTOFF_HZ = 40.0
KEPT_BESIDE_QRS_S = 0.010
PASSAGE_S = 0.016


def calm_outside_qrs(
    beats_mv: NDArray[np.float64], qrs_onset: int, qrs_offset: int, *, sampling_rate_hz: float
) -> NDArray[np.float64]:
    """Low-pass beats at 40 Hz except around the QRS.

    Parameters
    ----------
    beats_mv : ndarray, shape (..., n)
    qrs_onset, qrs_offset : int
        Samples, the same for all.

    Returns
    -------
    ndarray, shape (..., n)
    """
    calm = low_pass(beats_mv, cutoff_hz=QUIET_CUTOFF_HZ, sampling_rate_hz=sampling_rate_hz)
    sample = np.arange(beats_mv.shape[-1])
    away = np.maximum(qrs_onset - sample, sample - qrs_offset) / sampling_rate_hz
    share = np.clip((away - KEPT_BESIDE_QRS_S) / PASSAGE_S, 0.0, 1.0)
    weight = 0.5 - 0.5 * np.cos(np.pi * share)
    return np.asarray(beats_mv + weight * (calm - beats_mv))
