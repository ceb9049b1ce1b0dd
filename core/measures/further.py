"""Leads beyond the twelve, averaged and measured; they are not judged."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from core.beats.analyse import BeatAnalysis
from core.beats.further import average_further_leads
from core.conditioning.calm import calm_outside_qrs
from core.json_numbers import number_or_none
from core.measures.lead_values import Points, isoelectric_level, measure_lead_values
from core.quality.lead_quality import LeadQuality, grade_further_leads
from core.recordings.recording import Recording


@dataclass(frozen=True, slots=True, eq=False)
class FurtherMeasures:
    """What is measured on the further leads of one recording.

    Attributes
    ----------
    leads : tuple of str
    beat_mv : ndarray, shape (n_leads, n)
        On the time axis of the recording's representative beat, as that is measured and drawn;
        NaN in a lead that holds no usable tracing.
    values : dict of name to ndarray, shape (n_leads,)
        The compared measures; NaN likewise.
    """

    leads: tuple[str, ...]
    beat_mv: NDArray[np.float64]
    values: dict[str, NDArray[np.float64]]
    quality: tuple[LeadQuality, ...]

    def to_dict(self) -> dict[str, Any]:
        """The measures as JSON writes them."""
        return {
            lead: {name: number_or_none(values[row]) for name, values in self.values.items()}
            for row, lead in enumerate(self.leads)
        }


def measure_further_leads(
    recording: Recording, analysis: BeatAnalysis, points: Points
) -> FurtherMeasures:
    """Measure the further leads at the points that the twelve leads told."""
    if not recording.further_leads:
        return FurtherMeasures((), np.empty((0, analysis.representative_mv.shape[1])), {}, ())
    quality = grade_further_leads(recording)
    average = average_further_leads(recording.further_mv.T, analysis)
    f = points.fiducials
    calm = calm_outside_qrs(
        average, f.qrs_onset, f.qrs_offset, sampling_rate_hz=recording.sampling_rate_hz
    )
    beat_mv = calm - isoelectric_level(calm, points)
    values = measure_lead_values(beat_mv, points)
    for row, grade in enumerate(quality):
        if not grade.usable:
            beat_mv[row] = np.nan
            for measured in values.values():
                measured[row] = np.nan
    return FurtherMeasures(recording.further_leads, beat_mv, values, quality)
