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
        errors = [standard_error(report.beat_values[name]) for report in (earlier, later)]
        by_beats = half_width_of_difference(errors[0], errors[1], settings.confidence) ** 2
        floor = settings.repeat_floor[name]
        size = np.mean([_root_mean_square(report.values[name]) for report in (earlier, later)])
        # The floors are 95 % half-widths; another confidence scales them.
        by_day = (floor.fixed**2 + (floor.share * size) ** 2) * (z / float(ndtri(0.975))) ** 2
        noise[name] = np.sqrt(by_beats + by_day)
    return noise


@dataclass(frozen=True, slots=True, eq=False)
class StandardError:
    """Squared standard error of a trimmed mean, and its degrees of freedom, shape (12,)."""

    squared: NDArray[np.float64]
    freedom: NDArray[np.float64]


def standard_error(beats: NDArray[np.float64]) -> StandardError:
    """Of the trimmed mean over beats (shape (n_beats, 12)), from the winsorised spread.

    Yuen 1974, Biometrika 61:165. NaN where fewer than two beats have the wave.
    """
    squared, freedom = np.full(beats.shape[1], np.nan), np.ones(beats.shape[1])
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
        kept = n - 2 * cut
        winsorised = np.clip(values, values[cut], values[n - 1 - cut])
        squared[lead] = n * np.var(winsorised) / (kept * (kept - 1))
        freedom[lead] = kept - 1
    return StandardError(squared, freedom)


def half_width_of_difference(
    one: StandardError, other: StandardError, confidence: float
) -> NDArray[np.float64]:
    """Half-width of the range that the difference of two trimmed means has by chance.

    Yuen 1974, Biometrika 61:165, with Welch's degrees of freedom.
    """
    variance = one.squared + other.squared
    scatter = one.squared**2 / one.freedom + other.squared**2 / other.freedom
    # Beats without any scatter have a range of 0 whatever their freedom.
    freedom = np.divide(variance**2, scatter, out=np.ones_like(variance), where=scatter > 0)
    return np.asarray(stdtrit(freedom, 0.5 + confidence / 2) * np.sqrt(variance))


def _root_mean_square(values: NDArray[np.float64]) -> float:
    known = values[~np.isnan(values)]
    return float(np.sqrt(np.mean(known**2))) if known.size else 0.0
