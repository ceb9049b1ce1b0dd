"""What is drawn of one lead: its two beats, and the bands around them if it is judged."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.comparison.results import Comparison
from core.recordings.leads import TWELVE_LEADS


@dataclass(frozen=True, slots=True, eq=False)
class LeadBands:
    """Bands of one lead around no change, and the change that the shift would make; in mV."""

    noise: NDArray[np.float64]
    reach_low: NDArray[np.float64]
    reach_high: NDArray[np.float64]
    expected: NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class LeadCurves:
    """One lead over the stretch of the beat that is shown.

    Attributes
    ----------
    time_ms, earlier_mv, later_mv : ndarray, shape (n,)
        A beat is NaN where its recording doesn't hold it.
    bands : LeadBands, optional
        None for a further lead, which has none.
    """

    time_ms: NDArray[np.float64]
    earlier_mv: NDArray[np.float64]
    later_mv: NDArray[np.float64]
    bands: LeadBands | None

    @property
    def roles(self) -> tuple[str, ...]:
        """Which of ``"earlier"`` and ``"later"`` there is a beat of."""
        beats = {"earlier": self.earlier_mv, "later": self.later_mv}
        return tuple(role for role, beat_mv in beats.items() if not np.isnan(beat_mv).all())


def shown_times_ms(comparison: Comparison) -> tuple[float, float]:
    """Stretch of the beat that is shown: a little before P to a little after T."""
    f, time = comparison.earlier.points.fiducials, comparison.laid.time_ms
    first = time[f.p_onset] - 40.0 if f.p_onset is not None else time[f.qrs_onset] - 120.0
    return max(float(first), float(time[0])), min(float(time[f.t_offset]) + 60.0, float(time[-1]))


def curves_of(comparison: Comparison, lead: str) -> LeadCurves:
    """The curves of one of the twelve leads, or of a further one."""
    laid, bands = comparison.laid, comparison.bands
    first, last = shown_times_ms(comparison)
    shown = (laid.time_ms >= first) & (laid.time_ms <= last)
    time_ms = laid.time_ms[shown]
    if lead in comparison.further:
        further = comparison.further[lead]
        return LeadCurves(time_ms, further.earlier_mv[shown], further.later_mv[shown], None)
    row = TWELVE_LEADS.index(lead)
    return LeadCurves(
        time_ms,
        laid.earlier_mv[row, shown],
        laid.later_mv[row, shown],
        LeadBands(
            noise=bands.noise_mv[row, shown],
            reach_low=bands.reach_low_mv[row, shown],
            reach_high=bands.reach_high_mv[row, shown],
            expected=bands.expected_mv[row, shown],
        ),
    )
