"""Mains interference, fitted to a recording together with its beats.

A notch filter rings after every QRS, right where ST is measured. Here a hum whose amplitude and
phase may drift slowly is fitted by least squares to what is left when the beats are taken away,
and subtracted; a beat cannot excite it. Averaging beats keeps a part of the hum, so the same
part is taken from the hum's own basis before the fit (Frisch & Waugh 1933, Econometrica 1:387):
the result is that of fitting beats and hum at once.
"""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

MAINS_HZ = (50.0, 60.0)
# Amplitude and phase are given anew this often, and run smoothly between.
KNOT_S = 4.0
# Hum stands out when the fit explains this many times what it explains beside the mains.
STANDS_OUT = 6.0
BESIDE_HZ = (-5.0, -3.0, 3.0, 5.0)


def estimate_mains(
    residual_mv: NDArray[np.float64],
    foreign: NDArray[np.bool_],
    less_locked_part: Callable[[NDArray[np.float64]], NDArray[np.float64]],
    *,
    sampling_rate_hz: float,
) -> NDArray[np.float64]:
    """Hum at 50 or 60 Hz in a recording from which the beats have been subtracted.

    Parameters
    ----------
    residual_mv : ndarray, shape (n_leads, n_samples)
    foreign : ndarray of bool, shape (n_samples,)
        True where the beat-locked part does not describe the recording.
    less_locked_part : callable
        Takes signals (shape (k, n_samples)) and subtracts from each what repeats with the
        beats, as was done with the recording.

    Returns
    -------
    ndarray, shape (n_leads, n_samples)
        Hum, to be subtracted; exactly 0 in leads where none stands out.
    """
    hum = np.zeros_like(residual_mv)
    here = ~foreign
    for mains_hz in MAINS_HZ:
        if mains_hz + max(BESIDE_HZ) >= 0.5 * sampling_rate_hz:
            continue
        at_mains, explained = _fit(residual_mv, here, less_locked_part, mains_hz, sampling_rate_hz)
        beside = [
            _fit(residual_mv, here, less_locked_part, mains_hz + away, sampling_rate_hz)[1]
            for away in BESIDE_HZ
        ]
        stands_out = explained > STANDS_OUT * np.median(beside, axis=0)
        hum += np.where(stands_out[:, None], at_mains, 0.0)
    return hum


def _fit(
    residual_mv: NDArray[np.float64],
    here: NDArray[np.bool_],
    less_locked_part: Callable[[NDArray[np.float64]], NDArray[np.float64]],
    hz: float,
    rate_hz: float,
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """The fitted wave of every lead, and the power that it explains."""
    basis = _basis(residual_mv.shape[1], hz, rate_hz)
    seen = less_locked_part(basis)[:, here]
    gram = seen @ seen.T
    coefficients = np.linalg.lstsq(gram, seen @ residual_mv[:, here].T, rcond=1e-10)[0]
    explained = np.einsum("kl,km,ml->l", coefficients, gram, coefficients)
    return coefficients.T @ basis, explained


def _basis(n_samples: int, hz: float, rate_hz: float) -> NDArray[np.float64]:
    """Cosine and sine, each under raised-cosine humps that add up to 1, shape (k, n)."""
    time_s = np.arange(n_samples) / rate_hz
    n_knots = max(2, round(n_samples / rate_hz / KNOT_S) + 1)
    knots = np.linspace(0.0, time_s[-1], n_knots)
    away = np.abs(time_s[None, :] - knots[:, None]) / (knots[1] - knots[0])
    humps = np.where(away < 1.0, 0.5 + 0.5 * np.cos(np.pi * np.minimum(away, 1.0)), 0.0)
    angle = 2 * np.pi * hz * time_s
    return np.concatenate([humps * np.cos(angle), humps * np.sin(angle)])
