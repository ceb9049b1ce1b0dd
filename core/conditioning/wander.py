"""Baseline wander, taken from what is left when the beats are taken away.

A high-pass on the tracing bends ST because QRS and T hold low frequencies too. Here the
low-pass that estimates the wander sees the recording *less its beat-locked part* (the
representative beat laid at every beat), so a wave that repeats with the beat cannot leak into
the wander, and subtracting the wander cannot move ST. What a beat has of its own (an ectopic
beat, an artefact) is bridged before the low-pass.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from core.conditioning.gaps import bridge_gaps
from core.conditioning.zero_phase import low_pass

# Zero-phase, 0.67 Hz is the highest low cut that the 2007 AHA/ACC/HRS recommendations allow;
# here it acts on the residual alone.
WANDER_CUTOFF_HZ = 0.67
WANDER_ORDER = 3


def estimate_wander(
    residual_mv: NDArray[np.float64], foreign: NDArray[np.bool_], *, sampling_rate_hz: float
) -> NDArray[np.float64]:
    """Slow part of a recording from which the beats have been subtracted.

    Parameters
    ----------
    residual_mv : ndarray, shape (n_leads, n_samples)
        Recording less its beat-locked part.
    foreign : ndarray of bool, shape (n_samples,)
        True where the beat-locked part does not describe the recording.

    Returns
    -------
    ndarray, shape (n_leads, n_samples)
        Wander, to be subtracted from the recording.
    """
    return low_pass(
        bridge_gaps(residual_mv, foreign),
        cutoff_hz=WANDER_CUTOFF_HZ,
        sampling_rate_hz=sampling_rate_hz,
        order=WANDER_ORDER,
    )
