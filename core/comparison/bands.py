"""Noise, reach and expected change along the beat, for drawing.

The judgement rests on the measures. These bands show the same ranges between them: the repeat
noise is known at J, at the ST point and at the peak of T, and runs straight between.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.measures.report import RecordingReport
from core.placement.expected import Expected
from core.placement.foretell import INDEPENDENT_ROWS
from core.placement.reach import Reach
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.settings import Settings

# The bands are smooth; their quantiles are taken this far apart.
STEP_MS = 8.0


@dataclass(frozen=True, slots=True, eq=False)
class Bands:
    """Ranges of the change from the earlier beat, arrays of shape (12, n), in mV.

    On the time axis of the earlier representative beat. ``noise_mv`` is a half-width; it and
    the reach are NaN outside ST and T, where no judgement is made.
    """

    noise_mv: NDArray[np.float64]
    reach_low_mv: NDArray[np.float64]
    reach_high_mv: NDArray[np.float64]
    expected_mv: NDArray[np.float64]


def change_bands(
    report: RecordingReport,
    noise: dict[str, NDArray[np.float64]],
    reach: Reach,
    expected: Expected,
    settings: Settings,
) -> Bands:
    """Bands along the earlier representative beat."""
    points = report.points
    n = report.beat_mv.shape[1]
    knots = [points.j, points.st, points.fiducials.t_peak, points.fiducials.t_offset]
    inside = np.arange(points.j, points.fiducials.t_offset + 1)
    noise_mv = np.full((12, n), np.nan)
    for row in range(12):
        widths = [noise[name][row] for name in ("j_mv", "st_mv", "t_mv", "st_mv")]
        noise_mv[row, inside] = np.interp(inside, knots, widths)

    low, high = -noise_mv, noise_mv.copy()
    expected_mv = np.zeros((12, n))
    beat = report.beat_mv[INDEPENDENT_ROWS]
    at = inside[:: max(1, round(STEP_MS / report.step_ms))]
    tails = [(1.0 - settings.confidence) / 2, (1.0 + settings.confidence) / 2]
    for lead in CHEST_LEADS:
        row = TWELVE_LEADS.index(lead)
        bounds = np.quantile(reach.gain[lead] @ beat[:, at], tails, axis=0)
        # Shifts and noise are independent: their half-widths add as squares.
        below = np.interp(inside, at, np.minimum(bounds[0], 0.0))
        above = np.interp(inside, at, np.maximum(bounds[1], 0.0))
        low[row, inside] = -np.hypot(below, noise_mv[row, inside])
        high[row, inside] = np.hypot(above, noise_mv[row, inside])
        expected_mv[row] = expected.gain[lead] @ beat
    return Bands(noise_mv, low, high, expected_mv)
