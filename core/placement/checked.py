"""Measure a recording, and look by the torso ensemble whether its leads are rearranged."""

from __future__ import annotations

from dataclasses import replace

from core.measures.report import RecordingReport, measure
from core.placement.own_evidence import interchange_by_own_evidence
from core.recordings.cleanest import cleanest_stretch
from core.recordings.recording import Recording
from core.settings import Settings
from core.torso.ensemble import load_ensemble
from core.wording import notices as say


def measure_and_check(recording: Recording, settings: Settings | None = None) -> RecordingReport:
    """Measure a recording, or the cleanest ten seconds of one longer than five minutes.

    A notice is added where electrodes look interchanged.

    Raises
    ------
    NotEnoughBeats
        If fewer than three beats of one kind can be used.
    """
    report = measure(cleanest_stretch(recording), settings)
    if not all(grade.usable for grade in report.quality):
        return report  # a lead without a tracing looks like a rearranged one
    found = interchange_by_own_evidence(report, load_ensemble())
    if found is None:
        return report
    notice = say.looks_interchanged(found.electrodes, of_limbs=found.of_limbs)
    return replace(report, notices=(*report.notices, notice))
