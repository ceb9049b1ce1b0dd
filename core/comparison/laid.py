"""Lay the later representative beat on the earlier one."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline

from core.beats.alignment import lags_to_template
from core.measures.report import RecordingReport
from core.recordings.leads import INDEPENDENT_LEADS, TWELVE_LEADS

_ROWS = [TWELVE_LEADS.index(lead) for lead in INDEPENDENT_LEADS]
LARGEST_LAG_S = 0.030
# Chest shifts leave the limb leads alone, so they tell the time best, if they are large enough.
LARGE_ENOUGH_MV = 0.25
BESIDE_QRS_S = 0.010


@dataclass(frozen=True, slots=True, eq=False)
class LaidBeats:
    """Two representative beats on one time axis, that of the earlier.

    Attributes
    ----------
    time_ms : ndarray, shape (n,)
        Relative to the earlier beat's R.
    earlier_mv, later_mv : ndarray, shape (12, n)
        NaN where the later beat's window does not reach.
    lag_ms : float
        How much later than the earlier R the later R lies when the beats fit best.
    qrs : slice
        Samples that hold the QRS of both.
    waves : slice
        Samples from the onset of P, or of the QRS, to the end of T, where both are known.
    """

    time_ms: NDArray[np.float64]
    earlier_mv: NDArray[np.float64]
    later_mv: NDArray[np.float64]
    lag_ms: float
    qrs: slice
    waves: slice

    def qrs_of(self, beat_mv: NDArray[np.float64]) -> NDArray[np.float64]:
        """QRS of the eight independent leads, shape (8, n)."""
        return np.nan_to_num(beat_mv[_ROWS][:, self.qrs])

    def waves_of(self, beat_mv: NDArray[np.float64]) -> NDArray[np.float64]:
        """P to T of the eight independent leads, shape (8, n)."""
        return beat_mv[_ROWS][:, self.waves]


def lay_beats(
    earlier: RecordingReport, later: RecordingReport, *, by_chest: bool = False
) -> LaidBeats:
    """Align the later beat to the earlier by the QRS, to a fraction of a sample.

    By the limb leads, unless they are small or *by_chest* says that they cannot be trusted.
    """
    time_ms = earlier.time_ms
    spline = CubicSpline(later.time_ms, later.beat_mv, axis=1, extrapolate=False)
    rate = earlier.recording.sampling_rate_hz
    reach = max(2, round(LARGEST_LAG_S * rate))
    f = earlier.points.fiducials
    start = max(f.qrs_onset, reach)
    stop = min(f.qrs_offset + 1, time_ms.size - reach)
    template = earlier.beat_mv[_ROWS][:, start:stop]
    around = np.nan_to_num(spline(time_ms[start - reach : stop + reach]))[_ROWS]
    limb_size = min(float(np.ptp(beat[:2], axis=1).max()) for beat in (template, around))
    rows = slice(0, 2) if limb_size >= LARGE_ENOUGH_MV else slice(0, 8)
    if by_chest:
        rows = slice(2, 8)
    lag = float(lags_to_template(around[None, rows], template[rows], reach)[0])
    lag_ms = lag * earlier.step_ms

    later_mv = np.asarray(spline(time_ms + lag_ms))
    g = later.points.fiducials
    beside = BESIDE_QRS_S * 1000.0
    first = min(time_ms[f.qrs_onset], later.time_ms[g.qrs_onset] - lag_ms) - beside
    last = max(time_ms[f.qrs_offset], later.time_ms[g.qrs_offset] - lag_ms) + beside
    qrs = slice(int(np.searchsorted(time_ms, first)), int(np.searchsorted(time_ms, last)))
    known = np.flatnonzero(~np.isnan(later_mv).any(axis=0))
    start = f.qrs_onset if f.p_onset is None else f.p_onset
    waves = slice(max(start, int(known[0])), min(f.t_offset, int(known[-1])) + 1)
    return LaidBeats(time_ms, earlier.beat_mv, later_mv, lag_ms, qrs, waves)
