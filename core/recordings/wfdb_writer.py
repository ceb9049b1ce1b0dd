"""Write a recording as a WFDB record, in the steps of the file it came from."""

from __future__ import annotations

import re
import tempfile
from datetime import datetime
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from core.errors import RecordingError
from core.recordings.all_leads import all_leads_mv, steps_of_all_leads
from core.recordings.comments import said_of
from core.recordings.recording import Recording

# WFDB's own mark for a sample that isn't there, by storage format.
_MISSING = {"16": -(1 << 15), "24": -(1 << 23), "32": -(1 << 31)}


def write_wfdb(recording: Recording, stem: Path) -> tuple[Path, Path]:
    """Write a header and a signal file; both appear whole or not at all.

    Parameters
    ----------
    recording : Recording
    stem : Path
        Folder and record name, without an ending.

    Returns
    -------
    tuple of Path
        The header and the signal file.

    Raises
    ------
    RecordingError
        If the record name holds a character that WFDB does not allow, or the signal does not
        fit into 32 bits.
    OSError
        If the folder cannot be written to.
    """
    if not re.fullmatch(r"[-\w]+", stem.name):
        raise RecordingError(
            f"{stem.name}: a WFDB record name may hold letters, digits, - and _ only. "
            "Choose another name."
        )
    leads_mv, counts_per_mv = all_leads_mv(recording), steps_of_all_leads(recording)
    counts, storage = _counts(recording.source.name, leads_mv, counts_per_mv)
    import wfdb

    with tempfile.TemporaryDirectory(dir=stem.parent, prefix=".samespot-") as folder:
        wfdb.wrsamp(
            stem.name,
            fs=recording.sampling_rate_hz,
            units=["mV"] * counts.shape[1],
            sig_name=[*recording.leads, *recording.further_leads],
            d_signal=counts,
            fmt=[storage] * counts.shape[1],
            adc_gain=counts_per_mv,
            baseline=[0] * counts.shape[1],
            comments=[f"{key}: {value}" for key, value in said_of(recording)],
            base_datetime=_whole_second(recording.recorded_at),
            write_dir=folder,
        )
        # The header last: a record without its header is no record.
        written = [stem.with_name(stem.name + ending) for ending in (".dat", ".hea")]
        for path in written:
            (Path(folder) / path.name).replace(path)
    return written[1], written[0]


def _counts(
    name: str, leads_mv: NDArray[np.float64], counts_per_mv: list[float]
) -> tuple[NDArray[np.int64], str]:
    """Whole steps of every lead, and the smallest storage format that holds them."""
    steps = leads_mv * np.array(counts_per_mv)
    missing = np.isnan(steps)
    counts = np.rint(np.where(missing, 0.0, steps))
    largest = float(np.abs(counts).max())
    storage = next((fmt for fmt, mark in _MISSING.items() if largest < -mark), None)
    if storage is None:
        raise RecordingError(
            f"{name}: the signal does not fit into 32 bits at the file's "
            "own steps. Export the recording again at 1 µV a step."
        )
    whole = counts.astype(np.int64)
    whole[missing] = _MISSING[storage]
    return whole, storage


def _whole_second(at: datetime | None) -> datetime | None:
    return None if at is None else at.replace(microsecond=0)
