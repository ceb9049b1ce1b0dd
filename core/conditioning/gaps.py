"""Bridging samples that a file does not hold."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray


def bridge_gaps(signal: NDArray[np.float64], missing: NDArray[np.bool_]) -> NDArray[np.float64]:
    """Straight lines across the missing samples of each row; 0 where a whole row is missing.

    Parameters
    ----------
    signal : ndarray, shape (n_rows, n_samples)
    missing : ndarray of bool, shape (n_rows, n_samples) or (n_samples,)

    Returns
    -------
    ndarray, shape (n_rows, n_samples)
        A copy where anything was missing, else *signal* itself.
    """
    missing = np.broadcast_to(missing, signal.shape)
    if not missing.any():
        return signal
    bridged = signal.copy()
    at = np.arange(signal.shape[-1])
    for row, gone in zip(bridged, missing, strict=True):
        if gone.all():
            row[:] = 0.0
        elif gone.any():
            row[gone] = np.interp(at[gone], at[~gone], row[~gone])
    return bridged
