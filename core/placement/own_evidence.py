"""Interchanged electrodes, looked for in one recording alone.

The eight leads of a heart in a trunk agree with each other in a way that rearranged leads do
not: undoing an interchange then raises the torso ensemble's evidence. Unusual hearts can look
rearranged too, so this is a hint; another recording of the person is a far better witness.
"""

from __future__ import annotations

from collections.abc import Sequence
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray
from scipy.special import logsumexp

from core.measures.report import RecordingReport
from core.placement.foretell import INDEPENDENT_ROWS
from core.placement.person import MODEL_NOISE, TEMPER
from core.quality.interchange import Interchange, chest_interchanges, limb_interchanges
from core.torso.ensemble import TorsoEnsemble

# By how much the log evidence of QRS and T together must rise. On LUDB records 1-50 no
# recording as it is comes so far.
RISE = 2.0
# Leads I and II trade places and III turns over; hearts do that among themselves.
NOT_TOLD = ("LA", "LL")
# T is taken from so long after the QRS: ST of an injury has sources that the prior does not.
AFTER_QRS_S = 0.040
_AS_RECORDED = np.eye(8)[None]


def interchange_by_own_evidence(
    report: RecordingReport, ensemble: TorsoEnsemble
) -> Interchange | None:
    """The interchange whose undoing makes a recording's leads agree best, if clearly so."""
    candidates = [
        one for one in (*limb_interchanges(), *chest_interchanges()) if one.electrodes != NOT_TOLD
    ]
    rises = rise_by_undoing(report, ensemble, candidates)
    best = int(np.argmax(rises))
    return candidates[best] if rises[best] > RISE else None


def rise_by_undoing(
    report: RecordingReport, ensemble: TorsoEnsemble, candidates: Sequence[Interchange]
) -> NDArray[np.float64]:
    """By how much the log evidence rises if each interchange is undone, shape (n_candidates,)."""
    undoing = np.array([np.eye(8), *(np.linalg.inv(one.matrix) for one in candidates)])
    evidence = log_evidence(report, ensemble, undoing)
    return np.asarray(evidence[1:] - evidence[0])


def log_evidence(
    report: RecordingReport,
    ensemble: TorsoEnsemble,
    undoing: NDArray[np.float64] = _AS_RECORDED,
) -> NDArray[np.float64]:
    """Log evidence of a recording's QRS and T, mean over the ensemble, scale at its best.

    Parameters
    ----------
    undoing : ndarray, shape (k, 8, 8)
        What the eight leads are multiplied by first.

    Returns
    -------
    ndarray, shape (k,)
    """
    beat = report.beat_mv[INDEPENDENT_ROWS]
    f = report.points.fiducials
    first_t = f.qrs_offset + round(AFTER_QRS_S * report.recording.sampling_rate_hz)
    stretches = beat[:, f.qrs_onset : f.qrs_offset + 1], beat[:, first_t : f.t_offset + 1]
    whole = np.zeros(undoing.shape[0])
    for stretch in stretches:
        if stretch.shape[1] > 1:
            whole += _of_scatters(undoing @ (stretch @ stretch.T) @ undoing.mT, ensemble)
    return whole


def _of_scatters(scatters: NDArray[np.float64], ensemble: TorsoEnsemble) -> NDArray[np.float64]:
    """Log evidence of leads by their scatter, shape (k, 8, 8)."""
    precision, log_determinant = _prior(ensemble)
    size = np.trace(scatters, axis1=1, axis2=2)
    scaled = scatters * (8.0 / np.maximum(size, 1e-12))[:, None, None]
    n = scaled.shape[0]
    misfit = scaled.reshape(n, 64) @ precision.reshape(-1, 64).T / 8.0
    evidence = -0.5 * (log_determinant + 8.0 * np.log(misfit))
    mean = logsumexp(TEMPER * evidence, axis=1) - np.log(precision.shape[0])
    return np.asarray(mean) / TEMPER


@lru_cache(maxsize=2)
def _prior(ensemble: TorsoEnsemble) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Inverse covariance of the eight leads and its log determinant, for every variant."""
    precisions, log_determinants = [], []
    for index in range(ensemble.n_variants):
        sites = ensemble.sites_mm[index]
        chest = ensemble.chest_factors(index, sites[:, 0], sites[:, 1])
        factors = np.concatenate([ensemble.limb[index].astype(np.float64), chest])
        factors /= np.sqrt(np.sum(factors**2) / 8.0)
        covariance = factors @ factors.T + MODEL_NOISE**2 * np.eye(8)
        precisions.append(np.linalg.inv(covariance))
        log_determinants.append(float(np.linalg.slogdet(covariance)[1]))
    return np.array(precisions), np.array(log_determinants)
