"""Which beats belong together, and which are left out of the representative beat."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

# Correlation of two QRS over all leads below which they are of different shape; respiration
# and noise leave beats of one kind above 0.95 (common practice, no source).
SAME_SHAPE = 0.90
# A beat this much earlier than the rhythm foretells is premature (common practice, no source).
PREMATURE_SHARE = 0.80
# Above this relative spread of successive intervals the rhythm foretells nothing, as in
# atrial fibrillation, and timing is no reason to leave a beat out.
IRREGULAR_SPREAD = 0.12
# Standard deviation of a normal distribution over its median absolute deviation.
NORMAL_OVER_MEDIAN_DEVIATION = 1.4826
# For the pairwise step; more beats than this are sampled evenly.
MOST_PAIRED = 200


def shape_correlation(
    qrs: NDArray[np.float64], template: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Correlation of each QRS with a template, over all leads at once.

    Parameters
    ----------
    qrs : ndarray, shape (n_beats, n_leads, n)
    template : ndarray, shape (n_leads, n)

    Returns
    -------
    ndarray, shape (n_beats,)
    """
    flat = _unit_rows(qrs)
    return np.asarray(flat @ _unit_rows(template[None])[0])


def dominant_beat(qrs: NDArray[np.float64]) -> int:
    """Index of the beat that most other beats look like."""
    n = qrs.shape[0]
    chosen = np.unique(np.linspace(0, n - 1, min(n, MOST_PAIRED)).round().astype(int))
    flat = _unit_rows(qrs[chosen])
    alike = flat @ flat.T
    company = (alike > SAME_SHAPE).sum(axis=1) + alike.mean(axis=1)
    return int(chosen[np.argmax(company)])


def premature(r_times_s: NDArray[np.float64]) -> NDArray[np.bool_]:
    """Beats that come early in an otherwise regular rhythm; none where it is irregular."""
    early = np.zeros(r_times_s.size, dtype=bool)
    if r_times_s.size < 4:
        return early
    rr = np.diff(r_times_s)
    usual = float(np.median(rr))
    # A slow swing raises the first, one ectopic beat among few the second; fibrillation both.
    about_usual = float(np.median(np.abs(rr - usual)))
    from_beat_to_beat = float(np.median(np.abs(np.diff(rr)))) / np.sqrt(2)
    spread = NORMAL_OVER_MEDIAN_DEVIATION * min(about_usual, from_beat_to_beat) / usual
    if spread <= IRREGULAR_SPREAD:
        early[1:] = rr < PREMATURE_SHARE * usual
    return early


def _unit_rows(qrs: NDArray[np.float64]) -> NDArray[np.float64]:
    centred = qrs - qrs.mean(axis=-1, keepdims=True)
    flat = centred.reshape(qrs.shape[0], -1)
    norm = np.linalg.norm(flat, axis=1, keepdims=True)
    return np.asarray(flat / np.where(norm > 0, norm, 1.0))
