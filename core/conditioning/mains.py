"""Mains interference, fitted to a recording together with its beats.

A notch filter rings after every QRS, right where ST is measured. Here a hum whose amplitude and
phase may drift slowly is fitted by least squares to what is left when the beats are taken away,
and subtracted; a beat cannot excite it. Averaging beats keeps a part of the hum, so the same
part is taken from the hum's own basis before the fit (Frisch & Waugh 1933, Econometrica 1:387):
the result is that of fitting beats and hum at once.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

MAINS_HZ = (50.0, 60.0)
# Amplitude and phase are given anew this often, and run smoothly between.
KNOT_S = 4.0
# Hum stands out when the fit explains this many times what it explains beside the mains.
STANDS_OUT = 6.0
BESIDE_HZ = (-5.0, -3.0, 3.0, 5.0)
# Where even the plain fit, which beats and hum share, stands out by less than this, none is there.
WORTH_A_LOOK = 2.0


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

    def stand_out(fits: list[_Fit], times: float) -> NDArray[np.bool_]:
        """In which leads the first fit explains so much more than the others usually do."""
        beside = np.median([fit.explained for fit in fits[1:]], axis=0)
        return np.asarray(fits[0].explained > times * beside)

    for mains_hz in MAINS_HZ:
        if mains_hz + max(BESIDE_HZ) >= 0.5 * sampling_rate_hz:
            continue
        bases = [
            _basis(residual_mv.shape[1], mains_hz + away, sampling_rate_hz)
            for away in (0.0, *BESIDE_HZ)
        ]
        plain = [_fit(residual_mv, here, basis, basis) for basis in bases]
        if not stand_out(plain, WORTH_A_LOOK).any():
            continue
        fits = [_fit(residual_mv, here, basis, less_locked_part(basis)) for basis in bases]
        hum += np.where(stand_out(fits, STANDS_OUT)[:, None], fits[0].wave_mv, 0.0)
    return hum


@dataclass(frozen=True, slots=True, eq=False)
class _Fit:
    """The fitted wave of every lead, shape (n_leads, n_samples), and the power it explains."""

    basis: NDArray[np.float64]
    coefficients: NDArray[np.float64]
    explained: NDArray[np.float64]

    @property
    def wave_mv(self) -> NDArray[np.float64]:
        return np.asarray(self.coefficients.T @ self.basis)


def _fit(
    residual_mv: NDArray[np.float64],
    here: NDArray[np.bool_],
    basis: NDArray[np.float64],
    seen: NDArray[np.float64],
) -> _Fit:
    """Fit what is *seen* of a basis where the beats have been subtracted."""
    seen = seen * here
    gram = seen @ seen.T
    solved = np.linalg.lstsq(gram, seen @ residual_mv.T, rcond=1e-10)[0]
    coefficients = np.asarray(solved, dtype=np.float64)
    explained = np.einsum("kl,km,ml->l", coefficients, gram, coefficients)
    return _Fit(basis, coefficients, explained)


def _basis(n_samples: int, hz: float, rate_hz: float) -> NDArray[np.float64]:
    """Cosine and sine, each under raised-cosine humps that add up to 1, shape (k, n)."""
    time_s = np.arange(n_samples) / rate_hz
    n_knots = max(2, round(n_samples / rate_hz / KNOT_S) + 1)
    knots = np.linspace(0.0, time_s[-1], n_knots)
    away = np.abs(time_s[None, :] - knots[:, None]) / (knots[1] - knots[0])
    humps = np.where(away < 1.0, 0.5 + 0.5 * np.cos(np.pi * np.minimum(away, 1.0)), 0.0)
    angle = 2 * np.pi * hz * time_s
    return np.concatenate([humps * np.cos(angle), humps * np.sin(angle)])
