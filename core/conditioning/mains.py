"""Mains interference, fitted to what is left when the beats are taken away.

A notch filter rings after every QRS, right where ST is measured. Here the hum's amplitude and
phase, free to drift slowly, are estimated from the recording less its beat-locked part and
subtracted; a beat cannot excite it.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from core.conditioning.gaps import bridge_gaps
from core.conditioning.zero_phase import low_pass

MAINS_HZ = (50.0, 60.0)
# How fast amplitude and phase may drift. Narrow enough that little else is taken along.
DRIFT_HZ = 0.5
# Hum stands out when its band holds this many times the power of its neighbours.
STANDS_OUT = 6.0


def estimate_mains(
    residual_mv: NDArray[np.float64], foreign: NDArray[np.bool_], *, sampling_rate_hz: float
) -> NDArray[np.float64]:
    """Hum at 50 or 60 Hz in a recording from which the beats have been subtracted.

    Parameters
    ----------
    residual_mv : ndarray, shape (n_leads, n_samples)
    foreign : ndarray of bool, shape (n_samples,)
        True where the beat-locked part does not describe the recording.

    Returns
    -------
    ndarray, shape (n_leads, n_samples)
        Hum, to be subtracted; exactly 0 in leads where none stands out.
    """
    hum = np.zeros_like(residual_mv)
    bridged = bridge_gaps(residual_mv, foreign)
    time_s = np.arange(residual_mv.shape[1]) / sampling_rate_hz
    for mains_hz in MAINS_HZ:
        if mains_hz >= 0.45 * sampling_rate_hz:
            continue
        at_mains = _narrow_band(bridged, mains_hz, time_s, sampling_rate_hz)
        beside = [
            _power(_narrow_band(bridged, mains_hz + offset, time_s, sampling_rate_hz))
            for offset in (-4.0, -2.5, 2.5, 4.0)
        ]
        stands_out = _power(at_mains) > STANDS_OUT * np.median(beside, axis=0)
        carrier = np.exp(2j * np.pi * mains_hz * time_s)
        hum += np.where(stands_out[:, None], 2 * (at_mains * carrier).real, 0.0)
    return hum


def _narrow_band(
    signal: NDArray[np.float64], centre_hz: float, time_s: NDArray[np.float64], rate_hz: float
) -> NDArray[np.complex128]:
    """Complex amplitude of the band of +-DRIFT_HZ around a frequency."""
    mixed = signal * np.exp(-2j * np.pi * centre_hz * time_s)
    parts = [
        low_pass(part, cutoff_hz=DRIFT_HZ, sampling_rate_hz=rate_hz)
        for part in (mixed.real, mixed.imag)
    ]
    return np.asarray(parts[0] + 1j * parts[1])


def _power(amplitude: NDArray[np.complex128]) -> NDArray[np.float64]:
    return np.asarray(np.mean(np.abs(amplitude) ** 2, axis=1))
