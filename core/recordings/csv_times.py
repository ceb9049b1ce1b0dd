"""The sampling rate that a time column shows."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

from core.recordings.assemble import SAMPLING_RATE_RANGE_HZ

# A step may differ from the usual one by so much: the writer's arithmetic, not a lost sample.
EVEN_WITHIN = 0.05
# Times written to whole ms are uneven at 360 Hz. As long as the written step is well below the
# sampling interval, a lost sample still stands out from rounding.
COARSEST = 0.75
_MOST_DECIMALS = 9
# No unit of time makes steps that small out of a sampling interval.
FINEST_STEP = 1e-9
# s, ms and µs: rates that an electrocardiograph can have leave only one of them possible.
_POSSIBLE_UNITS_S = (1.0, 1e-3, 1e-6)


class TimeError(ValueError):
    """Times that give no rate; the message says why, ``row`` where."""

    def __init__(self, message: str, row: int) -> None:
        super().__init__(message)
        self.row = row


def rate_of_times_hz(times: NDArray[np.float64], seconds_per_unit: float | None) -> float:
    """The rate of evenly spaced times.

    Parameters
    ----------
    times : ndarray, shape (n,)
        At least two.
    seconds_per_unit : float, optional
        Where it is not stated, the one unit is taken that gives a rate an ECG can have.

    Raises
    ------
    TimeError
        If a time is missing, or the times are not evenly spaced.
    """
    missing = np.flatnonzero(np.isnan(times))
    if missing.size:
        raise TimeError("holds no time", int(missing[0]))
    steps = np.diff(times)
    usual = float(np.median(steps))
    if usual < FINEST_STEP:
        raise TimeError(_WORDS_BACKWARD, int(np.argmin(steps)) + 1)
    if np.all(np.abs(steps - usual) <= EVEN_WITHIN * usual):
        step = float(times[-1] - times[0]) / steps.size
    else:
        step = _step_behind_rounding(times, usual)
    return _rate_hz(times, step, seconds_per_unit)


_WORDS_BACKWARD = "is not later than the line before it"


def _step_behind_rounding(times: NDArray[np.float64], usual: float) -> float:
    """The step of evenly spaced times that were rounded when they were written."""
    # Times of so many significant digits lose decimals as they grow.
    written_step = 10.0 ** -min(decimals_of(times[:1000]), decimals_of(times[-100:]))
    numbers = np.arange(times.size)
    step, start = (float(value) for value in np.polyfit(numbers, times, 1))
    # Rounding moves a time by half of the written step; the fit is not exact either.
    off = np.abs(times - start - step * numbers) > 0.55 * written_step
    if written_step > COARSEST * usual or off.any():
        steps = np.diff(times)
        worst = int(np.argmax(np.abs(steps - usual)))
        raise TimeError(
            f"comes {steps[worst]:.6g} after the line before it, where {usual:.6g} is usual",
            worst + 1,
        )
    return step


def _rate_hz(times: NDArray[np.float64], step: float, seconds_per_unit: float | None) -> float:
    if seconds_per_unit is None:
        low_hz, high_hz = SAMPLING_RATE_RANGE_HZ
        seconds_per_unit = next(
            # A step of 0.01 s or 0.125 ms is exact only as far as times are.
            (
                unit
                for unit in _POSSIBLE_UNITS_S
                if 0.99 * low_hz <= 1 / (step * unit) <= 1.01 * high_hz
            ),
            1.0,
        )
    rate_hz = 1.0 / (step * seconds_per_unit)
    # Whole numbers are usual; taken where they explain the last time as well.
    whole_hz = float(round(rate_hz))
    if whole_hz > 0:
        strayed = abs(1.0 / (whole_hz * seconds_per_unit) - step) * (times.size - 1)
        if strayed <= max(EVEN_WITHIN * step, 10.0 ** -decimals_of(times[-100:])):
            return whole_hz
    return float(f"{rate_hz:.9g}")


def decimals_of(values: NDArray[np.float64]) -> int:
    """Decimals that the values were written with: the fewest that keep them, at most nine."""
    known = values[np.isfinite(values)]
    for decimals in range(_MOST_DECIMALS):
        scaled = known * 10.0**decimals
        if np.all(np.abs(scaled - np.rint(scaled)) <= 1e-6 + 1e-14 * np.abs(scaled)):
            return decimals
    return _MOST_DECIMALS


def agree(one_hz: float, other_hz: float) -> bool:
    """Whether two statements of a rate can be the same, one of them rounded."""
    return math.isclose(one_hz, other_hz, rel_tol=0.01)
