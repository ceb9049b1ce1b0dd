"""The engine of Samespot: tells a change of the heart from a change of the electrodes."""

from __future__ import annotations

from core.comparison.compare import compare
from core.comparison.results import Comparison
from core.errors import (
    ComparisonError,
    NotComparable,
    NotEnoughBeats,
    RecordingError,
    TableIncomplete,
)
from core.measures.report import RecordingReport
from core.placement.checked import measure_and_check as measure
from core.placement.moved import ElectrodeMove, move_electrodes
from core.recordings.read import read_recording
from core.recordings.recording import Recording
from core.settings import Settings, Spread

__all__ = [
    "Comparison",
    "ComparisonError",
    "ElectrodeMove",
    "NotComparable",
    "NotEnoughBeats",
    "Recording",
    "RecordingError",
    "RecordingReport",
    "Settings",
    "Spread",
    "TableIncomplete",
    "compare",
    "measure",
    "move_electrodes",
    "read_recording",
]
