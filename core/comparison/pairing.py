"""Beat pairs: each beat of one recording with the beat of the other that is most like it."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline
from scipy.optimize import linear_sum_assignment

from core.beats.alignment import lags_to_template
from core.comparison.laid import LARGEST_LAG_S, LaidBeats
from core.measures.report import RecordingReport


@dataclass(frozen=True, slots=True)
class BeatPair:
    """Indices of two beats, and how much later than the earlier R the later R lies.

    The lag is that at which the two QRS fit best, R being at the same point of every beat of
    one recording.
    """

    earlier: int
    later: int
    lag_ms: float

    def to_dict(self) -> dict[str, int | float]:
        """The pair as JSON writes it."""
        return {"earlier": self.earlier, "later": self.later, "lag_ms": self.lag_ms}


def pair_beats(
    earlier: RecordingReport, later: RecordingReport, laid: LaidBeats
) -> tuple[BeatPair, ...]:
    """Pair the used beats so that the preceding intervals differ least in all.

    ST and T follow the preceding interval, so beats after like intervals compare best.
    """
    cost = np.abs(_preceding_rr(earlier)[:, None] - _preceding_rr(later)[None, :])
    rows, columns = linear_sum_assignment(cost)
    lags = _lags_ms(earlier, later, laid, rows, columns)
    first, second = earlier.analysis.used, later.analysis.used
    return tuple(
        BeatPair(first[row], second[column], lag)
        for row, column, lag in zip(rows.tolist(), columns.tolist(), lags.tolist(), strict=True)
    )


def _preceding_rr(report: RecordingReport) -> NDArray[np.float64]:
    """Interval before each used beat, in s; the usual one before the first of all."""
    times = np.array([beat.r_time_s for beat in report.analysis.beats])
    before = np.concatenate([[np.median(np.diff(times))], np.diff(times)])
    return np.asarray(before[list(report.analysis.used)])


def _lags_ms(
    earlier: RecordingReport,
    later: RecordingReport,
    laid: LaidBeats,
    rows: NDArray[np.int64],
    columns: NDArray[np.int64],
) -> NDArray[np.float64]:
    """Lag of each pair, on the earlier recording's time axis."""
    reach = max(2, round(LARGEST_LAG_S * earlier.recording.sampling_rate_hz))
    start = max(laid.qrs.start, reach)
    stop = min(laid.qrs.stop, laid.time_ms.size - reach)
    spline = CubicSpline(later.time_ms, later.analysis.aligned_mv[columns], axis=2)
    inside_ms = np.clip(
        laid.time_ms[start - reach : stop + reach] + laid.lag_ms,
        later.time_ms[0],
        later.time_ms[-1],
    )
    lags = lags_to_template(
        spline(inside_ms), earlier.analysis.aligned_mv[rows][:, :, start:stop], reach
    )
    return laid.lag_ms + lags * earlier.step_ms
