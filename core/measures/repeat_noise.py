"""Repeat noise: how much a measure differs between two recordings of an unchanged heart.

Two parts, added as variances: what the beats of the two recordings scatter, and a floor for
what another posture, breath and day do to an unchanged heart with unchanged electrodes.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.special import ndtri, stdtrit

from core.beats.representative import trimmed_at_each_end
from core.measures.lead_values import COMPARED
from core.measures.report import RecordingReport
from core.settings import Settings

# Under five beats, trimming leaves the median, whose variance is this many times the mean's.
MEDIAN_COST = np.pi / 2


def repeat_noise(
    earlier: RecordingReport, later: RecordingReport, settings: Settings
) -> dict[str, NDArray[np.float64]]:
    """Half-width of the range of each measure's change if nothing had changed.

    Returns
    -------
    dict of name to ndarray, shape (12,)
        In the measure's unit; NaN where a lead has the wave in fewer than two beats.
    """
    z = float(ndtri(0.5 + settings.confidence / 2))
    noise = {}
    for name in COMPARED:
        errors = [_standard_error(report.beat_values[name]) for report in (earlier, later)]
        variance = errors[0].squared + errors[1].squared
        freedom = np.maximum(errors[0].freedom + errors[1].freedom, 1)
        by_beats = stdtrit(freedom, 0.5 + settings.confidence / 2) ** 2 * variance
        floor = settings.repeat_floor[name]
        size = np.mean([_root_mean_square(report.values[name]) for report in (earlier, later)])
        # The floors are 95 % half-widths; another confidence scales them.
        by_day = (floor.fixed**2 + (floor.share * size) ** 2) * (z / float(ndtri(0.975))) ** 2
        noise[name] = np.sqrt(by_beats + by_day)
    return noise


@dataclass(frozen=True, slots=True, eq=False)
class _StandardError:
    """Squared standard error of a trimmed mean, and its degrees of freedom, shape (12,)."""

    squared: NDArray[np.float64]
    freedom: NDArray[np.float64]


def _standard_error(beats: NDArray[np.float64]) -> _StandardError:
    """Of the trimmed mean over beats (shape (n_beats, 12)), from the winsorised spread.

    Tukey & McLaughlin 1963, Sankhya A 25:331. NaN where fewer than two beats have the wave.
    """
    squared, freedom = np.full(beats.shape[1], np.nan), np.zeros(beats.shape[1])
    for lead, column in enumerate(beats.T):
        values = np.sort(column[~np.isnan(column)])
        n = values.size
        if n < 2:
            continue
        cut = trimmed_at_each_end(n)
        if n < 5:
            squared[lead] = MEDIAN_COST * np.var(values, ddof=1) / n
            freedom[lead] = n - 1
            continue
        kept = np.clip(values, values[cut], values[n - 1 - cut])
        squared[lead] = np.var(kept, ddof=1) / (n * (1 - 2 * cut / n) ** 2)
        freedom[lead] = n - 2 * cut - 1
    return _StandardError(squared, freedom)


def _root_mean_square(values: NDArray[np.float64]) -> float:
    known = values[~np.isnan(values)]
    return float(np.sqrt(np.mean(known**2))) if known.size else 0.0
