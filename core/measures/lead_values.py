"""Amplitudes and areas of each lead, for one beat or for thousands at once."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from core.beats.fiducials import Fiducials

# The measures that a comparison compares, in the order of its tables.
COMPARED = ("j_mv", "st_mv", "st_slope_mv_per_s", "t_mv", "r_mv", "s_mv", "qrs_net_mv_ms")
# A deflection smaller than this is no Q, R or S wave (common practice, no source).
SMALLEST_WAVE_MV = 0.020
SLOPE_FROM_S, SLOPE_TO_S = 0.020, 0.080  # after J
T_FROM_S = 0.080  # after J, so that the ST segment is not taken for T
T_BEFORE_PEAK_S = 0.120
ISOELECTRIC_S = 0.012  # just before the QRS
AROUND_POINT_S = 0.004  # a level is the mean of so much on either side


@dataclass(frozen=True, slots=True)
class Points:
    """Samples between which beats are measured: those of one representative beat."""

    rate_hz: float
    fiducials: Fiducials
    st_point_ms: float

    @property
    def j(self) -> int:
        """J: the end of the QRS."""
        return self.fiducials.qrs_offset

    @property
    def st(self) -> int:
        """The ST point, so long after J as the settings say."""
        return self.j + round(self.st_point_ms / 1000.0 * self.rate_hz)

    def starting_at(self, sample: int) -> Points:
        """The same points of beats that are cut to start at a sample."""
        f = self.fiducials
        moved = replace(
            f,
            qrs_onset=f.qrs_onset - sample,
            qrs_offset=f.qrs_offset - sample,
            t_peak=f.t_peak - sample,
            t_offset=f.t_offset - sample,
            p_onset=None,
            p_offset=None,
        )
        return replace(self, fiducials=moved)

    def isoelectric_window(self) -> slice:
        """Just before the QRS."""
        onset = self.fiducials.qrs_onset
        start = max(0, onset - round(ISOELECTRIC_S * self.rate_hz))
        return slice(start, max(onset, start + 1))

    def t_window(self) -> slice:
        """Where the T wave's extreme is looked for."""
        start = max(
            self.j + round(T_FROM_S * self.rate_hz),
            self.fiducials.t_peak - round(T_BEFORE_PEAK_S * self.rate_hz),
        )
        return slice(min(start, self.fiducials.t_offset), self.fiducials.t_offset + 1)

    def qrs_window(self) -> slice:
        """The QRS, both ends included."""
        return slice(self.fiducials.qrs_onset, self.j + 1)


def measure_lead_values(
    beats_mv: NDArray[np.float64], points: Points
) -> dict[str, NDArray[np.float64]]:
    """The compared measures of each lead of each beat.

    Levels are relative to the isoelectric line, the mean of the 12 ms before the QRS.

    Parameters
    ----------
    beats_mv : ndarray, shape (..., n)
        One lead of one beat along the last axis.

    Returns
    -------
    dict of name to ndarray, shape (...)
        NaN where a wave isn't there. A QRS without R (a QS complex) has its depth in ``s_mv``.
    """
    rate = points.rate_hz
    level = isoelectric_level(beats_mv, points)
    around = max(0, round(AROUND_POINT_S * rate))
    qrs = beats_mv[..., points.qrs_window()] - level
    r, s, _ = qrs_waves(qrs)
    t_segment = beats_mv[..., points.t_window()] - level
    return {
        "j_mv": _level_at(beats_mv, points.j, around) - level[..., 0],
        "st_mv": _level_at(beats_mv, points.st, around) - level[..., 0],
        "st_slope_mv_per_s": _slope(beats_mv, points),
        "t_mv": signed_extreme(t_segment),
        "r_mv": r,
        "s_mv": s,
        "qrs_net_mv_ms": qrs.sum(axis=-1) * (1000.0 / rate),
    }


def isoelectric_level(beats_mv: NDArray[np.float64], points: Points) -> NDArray[np.float64]:
    """Level just before the QRS, last axis kept with length 1."""
    return np.asarray(beats_mv[..., points.isoelectric_window()].mean(axis=-1, keepdims=True))


def signed_extreme(segment: NDArray[np.float64]) -> NDArray[np.float64]:
    """The value farthest from 0 along the last axis, with its sign."""
    high, low = segment.max(axis=-1), segment.min(axis=-1)
    return np.asarray(np.where(high >= -low, high, low))


def qrs_waves(
    qrs: NDArray[np.float64],
) -> tuple[NDArray[np.float64], NDArray[np.float64], NDArray[np.float64]]:
    """Heights of R, S and Q: the highest point, the deepest after it, the deepest before it.

    Parameters
    ----------
    qrs : ndarray, shape (..., n)
        Relative to the isoelectric line.

    Returns
    -------
    tuple of ndarray (r, s, q), each of shape (...)
        NaN where the wave isn't there.
    """
    r = qrs.max(axis=-1)
    has_r = r >= SMALLEST_WAVE_MV
    at_r = np.where(has_r, qrs.argmax(axis=-1), -1)
    sample = np.arange(qrs.shape[-1])
    after = sample > at_r[..., None]
    s = np.min(qrs, axis=-1, where=after, initial=0.0)
    q = np.min(qrs, axis=-1, where=~after, initial=0.0)
    nan = np.nan
    return (
        np.where(has_r, r, nan),
        np.where(s <= -SMALLEST_WAVE_MV, s, nan),
        np.where(q <= -SMALLEST_WAVE_MV, q, nan),
    )


def _level_at(beats_mv: NDArray[np.float64], sample: int, around: int) -> NDArray[np.float64]:
    last = beats_mv.shape[-1] - 1
    sample = min(sample, last)
    window = beats_mv[..., max(0, sample - around) : min(last, sample + around) + 1]
    return np.asarray(window.mean(axis=-1))


def _slope(beats_mv: NDArray[np.float64], points: Points) -> NDArray[np.float64]:
    """Least-squares slope of the ST segment, mV/s."""
    start = points.j + round(SLOPE_FROM_S * points.rate_hz)
    stop = min(points.j + round(SLOPE_TO_S * points.rate_hz) + 1, beats_mv.shape[-1])
    time_s = np.arange(stop - start) / points.rate_hz
    weight = time_s - time_s.mean()
    return np.asarray(beats_mv[..., start:stop] @ weight / (weight @ weight))
