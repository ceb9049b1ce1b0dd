"""Leads that hold no usable tracing: missing, flat, clipped or drowned in noise."""

from __future__ import annotations

from collections.abc import Collection
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
# Longer than any wave of a beat: what rests on its extreme for so long has left the amplifier's
# range altogether.
SATURATED_S = 0.3
SAMPLES_MISSING = "samples missing"
DROWNED = "noise without a QRS (electrode off?)"


@dataclass(frozen=True, slots=True)
class LeadQuality:
    """Whether a lead can be judged, and why not."""

    lead: str
    usable: bool
    reason: str | None = None


def grade_leads(recording: Recording, drowned: Collection[str] = ()) -> tuple[LeadQuality, ...]:
    """Grade each of the twelve leads of a recording.

    The other four limb leads are computed from I and II throughout, so they fall with either.

    Parameters
    ----------
    recording : Recording
    drowned : collection of str
        Leads in which the search for beats found no QRS.
    """
    grades = {}
    for column, lead in enumerate(recording.leads):
        samples_mv = recording.signal_mv[:, column]
        reason = _fault(samples_mv, SATURATED_S * recording.sampling_rate_hz)
        reason = reason or (DROWNED if lead in drowned else None)
        grades[lead] = LeadQuality(lead, usable=reason is None, reason=reason)
    for source in ("I", "II"):
        if grades[source].usable:
            continue
        reason = f"computed from lead {source}, which is {grades[source].reason}"
        for lead in ("III", "aVR", "aVL", "aVF"):
            if grades[lead].usable:
                grades[lead] = LeadQuality(lead, usable=False, reason=reason)
    return tuple(grades.values())


def grade_further_leads(recording: Recording) -> tuple[LeadQuality, ...]:
    """Grade the leads beyond the twelve by their own samples."""
    saturated = SATURATED_S * recording.sampling_rate_hz
    faults = [_fault(samples_mv, saturated) for samples_mv in recording.further_mv.T]
    return tuple(
        LeadQuality(lead, usable=fault is None, reason=fault)
        for lead, fault in zip(recording.further_leads, faults, strict=True)
    )


def _fault(samples_mv: NDArray[np.float64], saturated_samples: float) -> str | None:
    missing = np.isnan(samples_mv)
    if missing.mean() > MOST_MISSING:
        return SAMPLES_MISSING
    held = samples_mv[~missing]
    high, low = float(held.max()), float(held.min())
    if high - low < FLAT_MV:
        return "flat"
    for extreme in (high, low):
        at_extreme = samples_mv == extreme
        if at_extreme.sum() > CLIPPED_SHARE * held.size:
            return "saturated" if _longest_run(at_extreme) > saturated_samples else "clipped"
    return None


def _longest_run(held: NDArray[np.bool_]) -> int:
    """Most successive samples that are true."""
    edges = np.flatnonzero(np.diff(held.astype(np.int8), prepend=0, append=0))
    return int((edges[1::2] - edges[::2]).max(initial=0))
