"""Further leads of a pair, beside each other: measured, not judged."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline

from core.comparison.laid import LaidBeats
from core.json_numbers import number_or_none
from core.measures.report import RecordingReport
from core.recordings.leads import FURTHER_LEADS
from core.wording import further as say


@dataclass(frozen=True, slots=True, eq=False)
class FurtherLead:
    """A lead beyond the twelve that at least one of the recordings holds.

    Attributes
    ----------
    earlier_mv, later_mv : ndarray, shape (n,)
        The representative beats on the time axis of the laid ones; NaN where a recording does
        not hold the lead, or no usable tracing in it.
    earlier, later : dict of measure to float or None, or None
        The compared measures, None where a recording does not hold the lead.
    reason : str
        The numbers, and why they are not judged, in a sentence.
    """

    earlier_mv: NDArray[np.float64]
    later_mv: NDArray[np.float64]
    earlier: dict[str, float | None] | None
    later: dict[str, float | None] | None
    reason: str


def further_leads_of(
    first: RecordingReport, second: RecordingReport, laid: LaidBeats
) -> dict[str, FurtherLead]:
    """The further leads of either recording, the later beats laid as the twelve leads' are."""
    return {
        lead: _further_lead(lead, first, second, laid)
        for lead in FURTHER_LEADS
        if lead in first.further.leads or lead in second.further.leads
    }


def _further_lead(
    lead: str, first: RecordingReport, second: RecordingReport, laid: LaidBeats
) -> FurtherLead:
    earlier_mv, later_mv = (_beat_mv(lead, report) for report in (first, second))
    if np.isfinite(later_mv).all():
        spline = CubicSpline(second.time_ms, later_mv, extrapolate=False)
        later_mv = np.asarray(spline(laid.time_ms + laid.lag_ms))
    else:
        later_mv = np.full(laid.time_ms.size, np.nan)
    earlier, later = (_measures(lead, report) for report in (first, second))
    faults = {
        which: fault
        for which, report in (("earlier", first), ("later", second))
        if (fault := _fault(lead, report)) is not None
    }
    reason = say.reason_of_further_lead(earlier, later, faults)
    return FurtherLead(earlier_mv, later_mv, earlier, later, reason)


def _beat_mv(lead: str, report: RecordingReport) -> NDArray[np.float64]:
    if lead not in report.further.leads:
        return np.full(report.time_ms.size, np.nan)
    return np.asarray(report.further.beat_mv[report.further.leads.index(lead)])


def _measures(lead: str, report: RecordingReport) -> dict[str, float | None] | None:
    if lead not in report.further.leads:
        return None
    row = report.further.leads.index(lead)
    return {name: number_or_none(values[row]) for name, values in report.further.values.items()}


def _fault(lead: str, report: RecordingReport) -> str | None:
    return next((grade.reason for grade in report.further.quality if grade.lead == lead), None)
