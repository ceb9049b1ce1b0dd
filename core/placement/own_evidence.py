"""Interchanged electrodes, looked for in one recording alone.

The eight leads of a heart in a trunk agree with each other in a way that rearranged leads do
not: undoing an interchange then raises the torso ensemble's evidence. Unusual hearts can look
rearranged too, so this is a hint; another recording of the person is a far better witness.
"""

from __future__ import annotations

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


def interchange_by_own_evidence(
    report: RecordingReport, ensemble: TorsoEnsemble
) -> Interchange | None:
    """The interchange whose undoing makes a recording's leads agree best, if clearly so."""
    plain = log_evidence(report, ensemble)
    candidates = [
        one for one in (*limb_interchanges(), *chest_interchanges()) if one.electrodes != NOT_TOLD
    ]
    rises = [log_evidence(report, ensemble, undoing=one) - plain for one in candidates]
    best = int(np.argmax(rises))
    return candidates[best] if rises[best] > RISE else None


def log_evidence(
    report: RecordingReport, ensemble: TorsoEnsemble, *, undoing: Interchange | None = None
) -> float:
    """Log evidence of a recording's QRS and T, mean over the ensemble, scale at its best."""
    beat = report.beat_mv[INDEPENDENT_ROWS]
    if undoing is not None:
        beat = undoing.undone(beat)
    f = report.points.fiducials
    first_t = f.qrs_offset + round(AFTER_QRS_S * report.recording.sampling_rate_hz)
    stretches = beat[:, f.qrs_onset : f.qrs_offset + 1], beat[:, first_t : f.t_offset + 1]
    return sum(_of_stretch(stretch, ensemble) for stretch in stretches if stretch.shape[1] > 1)


def _of_stretch(leads_mv: NDArray[np.float64], ensemble: TorsoEnsemble) -> float:
    precision, log_determinant = _prior(ensemble)
    scatter = leads_mv @ leads_mv.T
    scatter *= 8.0 / max(float(np.trace(scatter)), 1e-12)
    misfit = np.einsum("vab,ab->v", precision, scatter) / 8.0
    evidence = -0.5 * (log_determinant + 8.0 * np.log(misfit))
    return float(logsumexp(TEMPER * evidence) - np.log(evidence.size)) / TEMPER


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
