"""LUDB 1.0.1, where it lies beside the project: recordings and the readers' beats.

Kalyakulina et al. 2020, IEEE Access 8:186181; Goldberger et al. 2000, Circulation 101:e215.
"""

from __future__ import annotations

from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording
from tests.helpers.synthetic import as_recording

FOLDER = Path(__file__).resolve().parents[2].parent / "shared" / "data" / "ludb"
RATE_HZ = 500.0
SAME_BEAT_S = 0.15


def ludb_recording(number: int) -> Recording:
    """A recording from its raw counts, 1 uV each; each lead's header gain is its own."""
    import wfdb

    record = wfdb.rdrecord(str(FOLDER / str(number)), physical=False)
    counts = np.asarray(record.d_signal, dtype=np.float64)
    return as_recording(counts / 1000.0, RATE_HZ, name=str(number))


def marked_beats_s(number: int) -> NDArray[np.float64]:
    """Times of the QRS complexes that were marked in at least half of the leads."""
    import wfdb

    marks = []
    for lead in TWELVE_LEADS:
        annotation = wfdb.rdann(str(FOLDER / str(number)), lead.lower())
        beats = [symbol == "N" for symbol in annotation.symbol]
        marks.append(annotation.sample[beats] / RATE_HZ)
    times = np.sort(np.concatenate(marks))
    groups = np.split(times, np.flatnonzero(np.diff(times) > SAME_BEAT_S) + 1)
    return np.array([np.median(group) for group in groups if group.size >= 6])
