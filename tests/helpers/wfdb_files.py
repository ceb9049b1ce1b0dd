"""WFDB records for tests, written by the wfdb package itself and not by the program."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import wfdb
from numpy.typing import NDArray


def write_record(
    folder: Path,
    name: str,
    counts: NDArray[np.int64],
    leads: list[str],
    *,
    rate_hz: float = 500.0,
    gain: float = 1000.0,
    baseline: int = 0,
    unit: str = "mV",
    fmt: str = "16",
    comments: list[str] | None = None,
) -> Path:
    """Write counts, shape (n_samples, n_leads); the record's path without an ending."""
    n = len(leads)
    wfdb.wrsamp(
        name,
        fs=rate_hz,
        units=[unit] * n,
        sig_name=leads,
        d_signal=np.asarray(counts, dtype=np.int64),
        fmt=[fmt] * n,
        adc_gain=[gain] * n,
        baseline=[baseline] * n,
        comments=comments or [],
        write_dir=str(folder),
    )
    return folder / name
