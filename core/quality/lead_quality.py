"""Leads that hold no usable tracing: missing, flat or clipped."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.recordings.recording import Recording

# Peak-to-peak over the whole recording under which a lead is no tracing: the QRS is under
# 0.1 mV only where an electrode is off (common practice, no source), and noise adds to it.
FLAT_MV = 0.03
# Share of missing samples above which too few beats are whole.
MOST_MISSING = 0.2
# Share of samples that lie exactly on the lead's extreme value: a tracing touches its own
# extreme once a beat, a clipped one stays there.
CLIPPED_SHARE = 0.02
SAMPLES_MISSING = "samples missing"


@dataclass(frozen=True, slots=True)
class LeadQuality:
    """Whether a lead can be judged, and why not."""

    lead: str
    usable: bool
    reason: str | None = None


def grade_leads(recording: Recording) -> tuple[LeadQuality, ...]:
    """Grade each of the twelve leads of a recording.

    The other four limb leads are computed from I and II throughout, so they fall with either.
    """
    grades = {
        lead: _grade(lead, recording.signal_mv[:, column])
        for column, lead in enumerate(recording.leads)
    }
    for source in ("I", "II"):
        if grades[source].usable:
            continue
        reason = f"computed from lead {source}, which is {grades[source].reason}"
        for lead in ("III", "aVR", "aVL", "aVF"):
            if grades[lead].usable:
                grades[lead] = LeadQuality(lead, usable=False, reason=reason)
    return tuple(grades.values())


def _grade(lead: str, samples_mv: NDArray[np.float64]) -> LeadQuality:
    missing = np.isnan(samples_mv)
    if missing.mean() > MOST_MISSING:
        return LeadQuality(lead, usable=False, reason=SAMPLES_MISSING)
    held = samples_mv[~missing]
    high, low = float(held.max()), float(held.min())
    if high - low < FLAT_MV:
        return LeadQuality(lead, usable=False, reason="flat")
    for extreme in (high, low):
        if np.mean(held == extreme) > CLIPPED_SHARE:
            return LeadQuality(lead, usable=False, reason="clipped")
    return LeadQuality(lead, usable=True)
