"""Faults of a lead that leave it usable: hum, muscle noise, wander, steps.

Each is measured on what conditioning and averaging took apart, so a beat counts for none.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.conditioning.zero_phase import low_pass, moving_mean

# Sizes worth a word (common practice, no source): hum and muscle noise that a reader sees beside
# a small P; wander of half a large square; a step of as much within a tenth of a second.
LEAST_HUM_MV = 0.05  # peak to peak
LEAST_NOISE_MV = 0.02  # root mean square
MUSCLE_FROM_HZ = 25.0
TO_STANDARD_DEVIATION = 1.4826  # from the median absolute value, for a normal distribution
LEAST_WANDER_MV = 0.5  # peak to peak
LEAST_STEP_MV = 0.5
STEP_WITHIN_S, LEVEL_OVER_S = 0.10, 0.30


@dataclass(frozen=True, slots=True)
class Fault:
    """What disturbs a lead, and by how much in mV."""

    lead: str
    kind: str  # "mains hum", "muscle noise", "baseline wander" or "a step"
    size_mv: float


def find_faults(
    leads: tuple[str, ...],
    residual_mv: NDArray[np.float64],
    wander_mv: NDArray[np.float64],
    hum_mv: NDArray[np.float64],
    *,
    sampling_rate_hz: float,
) -> tuple[Fault, ...]:
    """Faults of every lead, worst kind by kind.

    Parameters
    ----------
    residual_mv : ndarray, shape (n_leads, n_samples)
        The recording less its beat-locked part.
    wander_mv, hum_mv : ndarray, shape (n_leads, n_samples)
        What was taken out of it.
    """
    sizes = {
        "mains hum": (2 * np.sqrt(2.0) * np.sqrt(np.mean(hum_mv**2, axis=1)), LEAST_HUM_MV),
        "muscle noise": (muscle_noise_mv(residual_mv, sampling_rate_hz), LEAST_NOISE_MV),
        "baseline wander": (np.ptp(wander_mv, axis=1), LEAST_WANDER_MV),
        "a step": (largest_step_mv(residual_mv, sampling_rate_hz), LEAST_STEP_MV),
    }
    return tuple(
        Fault(lead, kind, float(size))
        for kind, (values, least) in sizes.items()
        for lead, size in zip(leads, values, strict=True)
        if size > least
    )


def muscle_noise_mv(
    residual_mv: NDArray[np.float64], sampling_rate_hz: float
) -> NDArray[np.float64]:
    """Root mean square of what lies above 25 Hz, shape (n_leads,).

    By the median, so that a QRS that differs a little from beat to beat doesn't count.
    """
    slow = low_pass(residual_mv, cutoff_hz=MUSCLE_FROM_HZ, sampling_rate_hz=sampling_rate_hz)
    return np.asarray(TO_STANDARD_DEVIATION * np.median(np.abs(residual_mv - slow), axis=1))


def largest_step_mv(
    residual_mv: NDArray[np.float64], sampling_rate_hz: float
) -> NDArray[np.float64]:
    """Largest jump between levels held before and after a tenth of a second, shape (n_leads,).

    What the level drifts by anyway over as long is taken off, so that wander is no step.
    """
    level = moving_mean(residual_mv, round(LEVEL_OVER_S * sampling_rate_hz))
    apart = round((LEVEL_OVER_S + STEP_WITHIN_S) * sampling_rate_hz)
    if residual_mv.shape[1] <= 4 * apart:
        return np.zeros(residual_mv.shape[0])
    jump = level[:, apart:] - level[:, :-apart]
    drift = (jump[:, 2 * apart :] + jump[:, : -2 * apart]) / 2
    return np.asarray(np.abs(jump[:, apart:-apart] - drift).max(axis=1))
