"""The beat that stands for all: a trimmed mean over aligned beats."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

# One bad beat in five falls to the trimming; three or four beats give the median.
TRIMMED_SHARE = 0.2


def trimmed_at_each_end(n_beats: int) -> int:
    """How many of the sorted values are left out at each end."""
    return min(int(np.ceil(TRIMMED_SHARE * n_beats)), (n_beats - 1) // 2)


def representative_of(aligned: NDArray[np.float64]) -> NDArray[np.float64]:
    """Trimmed mean over beats, sample by sample and lead by lead.

    Parameters
    ----------
    aligned : ndarray, shape (n_beats, n_leads, n)

    Returns
    -------
    ndarray, shape (n_leads, n)
    """
    n = aligned.shape[0]
    cut = trimmed_at_each_end(n)
    ordered = np.sort(aligned, axis=0)
    return np.asarray(ordered[cut : n - cut].mean(axis=0))


def beat_locked_part(
    representative: NDArray[np.float64],
    r_index: int,
    r_samples: NDArray[np.int64],
    n_samples: int,
) -> NDArray[np.float64]:
    """The representative beat laid at every R, straight lines between beats.

    Parameters
    ----------
    representative : ndarray, shape (n_leads, n)
    r_index : int
        Sample of R within it.
    r_samples : ndarray of int, shape (n_beats,)
        Where R lies in the recording, ascending.

    Returns
    -------
    ndarray, shape (n_leads, n_samples)
    """
    n = representative.shape[1]
    after = n - r_index
    sample = np.arange(n_samples)
    # A beat owns the samples from where its window starts to where the next one's starts.
    owner = np.clip(
        np.searchsorted(r_samples - r_index, sample, side="right") - 1, 0, r_samples.size - 1
    )
    offset = sample - r_samples[owner]
    laid = representative[:, np.clip(offset + r_index, 0, n - 1)]
    between = offset >= after
    if between.any() and r_samples.size > 1:
        following = np.minimum(owner + 1, r_samples.size - 1)
        gap = np.maximum(r_samples[following] - r_index - (r_samples[owner] + after) + 1, 1)
        share = np.where(following > owner, (offset - after + 1) / gap, 0.0)
        start, end = representative[:, :1], representative[:, -1:]
        laid[:, between] = (end + (start - end) * share[None, :])[:, between]
    return np.asarray(laid)
