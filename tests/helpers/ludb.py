"""LUDB 1.0.1, where it lies beside the project: recordings and the readers' beats.

Kalyakulina et al. 2020, IEEE Access 8:186181; Goldberger et al. 2000, Circulation 101:e215.
"""

from __future__ import annotations

from dataclasses import dataclass
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


@dataclass(frozen=True, slots=True)
class MarkedBeat:
    """Marks of one beat over the leads, in s; NaN where fewer than six leads have one.

    Onsets are the second-earliest over the leads, offsets the second-latest.
    """

    r_s: float
    p_onset: float
    p_offset: float
    qrs_onset: float
    qrs_offset: float
    t_offset: float


# Of each mark: the wave's symbol, which end of it, and where its peak lies from R, in s.
_MARKS = {
    "p_onset": ("p", 0, (-0.40, -0.04)),
    "p_offset": ("p", 2, (-0.40, -0.04)),
    "qrs_onset": ("N", 0, (-0.15, 0.15)),
    "qrs_offset": ("N", 2, (-0.15, 0.15)),
    "t_offset": ("t", 2, (0.08, 0.70)),
}
LEAST_LEADS = 6


def marked_beats(number: int) -> list[MarkedBeat]:
    """The beats of a recording as its readers marked them."""
    waves = [_waves(number, lead) for lead in TWELVE_LEADS]
    found = []
    for r_s in marked_beats_s(number):
        marks = {
            name: _over_leads(waves, symbol, end, r_s + np.array(span))
            for name, (symbol, end, span) in _MARKS.items()
        }
        found.append(MarkedBeat(float(r_s), **marks))
    return found


def _waves(number: int, lead: str) -> list[tuple[str, float, float, float]]:
    """Symbol, onset, peak and offset of every wave; NaN where an end is not marked."""
    import wfdb

    annotation = wfdb.rdann(str(FOLDER / str(number)), lead.lower())
    symbols, times = annotation.symbol, annotation.sample / RATE_HZ
    waves = []
    for at, symbol in enumerate(symbols):
        if symbol not in "pNt":
            continue
        onset = times[at - 1] if at > 0 and symbols[at - 1] == "(" else np.nan
        closed = at + 1 < len(symbols) and symbols[at + 1] == ")"
        waves.append((symbol, onset, times[at], times[at + 1] if closed else np.nan))
    return waves


def _over_leads(
    waves: list[list[tuple[str, float, float, float]]], symbol: str, end: int, span: NDArray
) -> float:
    """The second-earliest onset (end 0) or the second-latest offset (end 2)."""
    times = []
    for lead in waves:
        inside = [w for w in lead if w[0] == symbol and span[0] <= w[2] <= span[1]]
        if inside and not np.isnan(inside[0][1 + end]):
            times.append(inside[0][1 + end])
    if len(times) < LEAST_LEADS:
        return np.nan
    return sorted(times)[1 if end == 0 else -2]
