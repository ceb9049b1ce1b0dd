"""The tracing that a person would have given with some chest electrodes elsewhere."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.errors import NoTracing
from core.measures.report import RecordingReport, measure
from core.placement.person import Person, shift_electrode, weigh_ensemble
from core.quality.lead_quality import LeadQuality
from core.recordings.leads import CHEST_LEADS, INDEPENDENT_LEADS, TWELVE_LEADS
from core.recordings.recording import Recording
from core.settings import Settings
from core.torso.ensemble import load_ensemble

# As far as the ensemble's chest reaches around every electrode.
FARTHEST_MM = 100.0


@dataclass(frozen=True, slots=True)
class ElectrodeMove:
    """One chest electrode and its displacement along the skin.

    ``up_mm`` is towards the head, ``left_mm`` towards the patient's left.
    """

    electrode: str
    up_mm: float = 0.0
    left_mm: float = 0.0

    def __post_init__(self) -> None:
        if self.electrode not in CHEST_LEADS:
            raise ValueError(
                f"only chest electrodes (V1 to V6) can be moved, not {self.electrode!r}"
            )
        for name, value in (("up", self.up_mm), ("left", self.left_mm)):
            if not abs(value) <= FARTHEST_MM:
                raise ValueError(
                    f"{self.electrode} cannot be moved {value:g} mm {name}; "
                    f"at most {FARTHEST_MM:g} mm either way"
                )


def usable_independent(quality: Iterable[LeadQuality]) -> NDArray[np.bool_]:
    """Which of the eight independent leads hold a tracing, shape (8,)."""
    usable = {grade.lead: grade.usable for grade in quality}
    return np.array([usable[lead] for lead in INDEPENDENT_LEADS])


def ventricular_beat_mv(report: RecordingReport) -> NDArray[np.float64]:
    """QRS to the end of T of the representative beat, shape (8, n)."""
    rows = [TWELVE_LEADS.index(lead) for lead in INDEPENDENT_LEADS]
    fiducials = report.points.fiducials
    return report.beat_mv[rows, fiducials.qrs_onset : fiducials.t_offset + 1]


def move_electrodes(
    recording: Recording, moves: Iterable[ElectrodeMove], settings: Settings | None = None
) -> Recording:
    """Foretell the recording with chest electrodes moved.

    The foretold change, computed from the recording's conditioned leads, is added to the
    recorded lead; all other leads are returned untouched.

    Parameters
    ----------
    recording : Recording
    moves : iterable of ElectrodeMove
        At most one per electrode.

    Returns
    -------
    Recording
        Same sampling rate and length.

    Raises
    ------
    ValueError
        If an electrode is named twice.
    NotEnoughBeats
        If the recording has too few beats to tell how this person's leads vary.
    NoTracing
        If a lead whose electrode is moved holds no usable tracing.
    """
    moves = list(moves)
    electrodes = [move.electrode for move in moves]
    if len(set(electrodes)) < len(electrodes):
        raise ValueError(f"an electrode is moved twice: {', '.join(electrodes)}")
    report = measure(recording, settings)
    for grade in report.quality:
        if grade.lead in electrodes and not grade.usable:
            raise NoTracing(
                f"{recording.source.name}: lead {grade.lead} holds no usable tracing "
                f"({grade.reason}), so moving its electrode foretells nothing. Move another one."
            )
    person = weigh_ensemble(
        load_ensemble(), [ventricular_beat_mv(report)], usable_independent(report.quality)
    )
    signal_mv = recording.signal_mv.copy()
    for move in moves:
        if move.up_mm == 0.0 and move.left_mm == 0.0:
            continue
        gain = mean_gain(person, move)
        column = TWELVE_LEADS.index(move.electrode)
        signal_mv[:, column] += gain @ report.analysis.signal_mv
    signal_mv.setflags(write=False)
    return recording.with_signal(signal_mv, name=f"{recording.source.name}-moved")


def mean_gain(person: Person, move: ElectrodeMove) -> NDArray[np.float64]:
    """Gain of one displacement, mean over the variants by their weights, shape (8,)."""
    electrode = CHEST_LEADS.index(move.electrode)
    left, up = np.array([move.left_mm]), np.array([move.up_mm])
    gains = [
        shift_electrode(person, variant, electrode, left_mm=left, up_mm=up).gain[0]
        for variant in person.variants
    ]
    return np.asarray(person.weights @ np.array(gains))
