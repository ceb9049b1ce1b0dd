"""Global fiducial points on the representative beat.

QRS and P begin and end where the spatial velocity (root mean square slope over the
independent leads) sinks into its quiet level. T ends where the tangent at the steepest part of
its downslope meets the level after it. Thresholds were chosen on LUDB records 1-50 against the
second-earliest onset and second-latest offset that its readers marked over the twelve leads.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.ndimage import gaussian_filter1d

from core.beats.analyse import BeatAnalysis
from core.conditioning.zero_phase import low_pass

# A P wave stands out from what averaging leaves of the beat-to-beat noise by this factor;
# flutter and fibrillation waves, not locked to the QRS, do not.
P_STANDS_OUT = 5.0
QRS_SMOOTHING_S, P_SMOOTHING_S = 0.003, 0.007
# The QRS is over where the velocity stays for so long under this share of its top plus so many
# times its quiet level.
QRS_SHARE, QRS_QUIET_TIMES, QUIET_QUANTILE = 0.015, 1.5, 0.3
QRS_HOLD_S = 0.016
# Readers mark a few ms outside the point where the velocity sinks into the noise.
QRS_MARGIN_S = 0.002
P_ONSET_MARGIN_S = 0.004
P_OFFSET_MARGIN_S = -0.006
T_MARGIN_S = 0.010


@dataclass(frozen=True, slots=True)
class Fiducials:
    """Samples of the representative beat; None where there is no such wave."""

    qrs_onset: int
    qrs_offset: int
    t_peak: int
    t_offset: int
    p_onset: int | None
    p_offset: int | None

    def in_ms(self, r_index: int, sampling_rate_hz: float) -> dict[str, float | None]:
        """Times relative to R, as JSON writes them."""

        def ms(sample: int | None) -> float | None:
            return None if sample is None else (sample - r_index) * 1000.0 / sampling_rate_hz

        return {
            "p_onset": ms(self.p_onset),
            "p_offset": ms(self.p_offset),
            "qrs_onset": ms(self.qrs_onset),
            "qrs_offset": ms(self.qrs_offset),
            "t_offset": ms(self.t_offset),
        }


def find_fiducials(analysis: BeatAnalysis) -> Fiducials:
    """Fiducial points of a representative beat, by the leads that are not drowned."""
    beat, rate, r = analysis.telling_mv, analysis.sampling_rate_hz, analysis.r_index
    onset, offset = _qrs_onset_and_offset(beat, rate, r)
    t_peak, t_offset = _t_peak_and_offset(beat, rate, offset)
    p = _p_onset_and_offset(analysis, onset)
    return Fiducials(onset, offset, t_peak, t_offset, *p)


def spatial_velocity(
    beat_mv: NDArray[np.float64], rate_hz: float, *, smoothing_s: float
) -> NDArray[np.float64]:
    """Root mean square over the leads of the slope, smoothed by a Gaussian, in mV/s.

    A Gaussian, because it reaches least far: what is smoothed over a corner shifts it.

    Parameters
    ----------
    beat_mv : ndarray, shape (n_leads, n)
    smoothing_s : float
        Standard deviation of the Gaussian.

    Returns
    -------
    ndarray, shape (n,)
    """
    slope = gaussian_filter1d(beat_mv, smoothing_s * rate_hz, axis=1, order=1, mode="nearest")
    return np.asarray(np.sqrt(np.mean((slope * rate_hz) ** 2, axis=0)))


def first_quiet(velocity: NDArray[np.float64], threshold: float, hold: int, otherwise: int) -> int:
    """First index from which the velocity stays under a threshold for *hold* samples."""
    below = (velocity < threshold).astype(np.int64)
    if below.size < hold:
        return otherwise
    runs = np.convolve(below, np.ones(hold, dtype=np.int64), mode="valid") == hold
    return int(np.argmax(runs)) if runs.any() else otherwise


def _qrs_onset_and_offset(beat: NDArray[np.float64], rate: float, r: int) -> tuple[int, int]:
    velocity = spatial_velocity(beat, rate, smoothing_s=QRS_SMOOTHING_S)
    last = velocity.size - 1
    near = round(0.06 * rate)
    top = float(velocity[max(0, r - near) : r + near].max())
    hold = round(QRS_HOLD_S * rate)

    def threshold(quiet: NDArray[np.float64]) -> float:
        level = float(np.quantile(quiet, QUIET_QUANTILE))
        return QRS_SHARE * top + QRS_QUIET_TIMES * level

    before = velocity[max(0, r - round(0.25 * rate)) : max(1, r - round(0.07 * rate))]
    farthest = min(r, round(0.16 * rate))
    back = velocity[r - farthest : r + 1][::-1]
    onset = r - first_quiet(back, threshold(before), hold, farthest)

    after = velocity[min(last, r + round(0.07 * rate)) : r + round(0.30 * rate)]
    ahead = velocity[r : r + round(0.20 * rate)]
    offset = r + first_quiet(ahead, threshold(after), hold, ahead.size - 1)
    margin = round(QRS_MARGIN_S * rate)
    return max(0, onset - margin), min(last, offset + margin)


def _t_peak_and_offset(beat: NDArray[np.float64], rate: float, qrs_offset: int) -> tuple[int, int]:
    smooth = low_pass(beat, cutoff_hz=15.0, sampling_rate_hz=rate)
    last = beat.shape[1] - 1
    start = min(qrs_offset + round(0.06 * rate), last - 2)
    segment = smooth[:, start:]
    level = segment[:, -max(1, round(0.03 * rate)) :].mean(axis=1, keepdims=True)
    size = np.sqrt(np.mean((segment - level) ** 2, axis=0))
    peak = int(np.argmax(size))
    end = min(size.size - 1, peak + round(0.22 * rate))
    if end <= peak:
        return start + peak, start + peak
    slope = np.gradient(size)
    steepest = peak + int(np.argmin(slope[peak : end + 1]))
    if slope[steepest] >= 0:
        return start + peak, start + end
    floor = float(size[steepest : end + 1].min())
    meets = steepest + (size[steepest] - floor) / -slope[steepest] + T_MARGIN_S * rate
    return start + peak, start + min(round(meets), size.size - 1)


def _p_onset_and_offset(
    analysis: BeatAnalysis, qrs_onset: int
) -> tuple[int, int] | tuple[None, None]:
    beat, rate = analysis.telling_mv, analysis.sampling_rate_hz
    first = max(0, qrs_onset - round(0.27 * rate))
    last = qrs_onset - round(0.010 * rate)
    if last - first < round(0.06 * rate):
        return None, None
    # Cut off before the QRS, which would leak into a smoothed P.
    before_qrs = beat[:, : qrs_onset + 1]
    smooth = low_pass(before_qrs, cutoff_hz=25.0, sampling_rate_hz=rate)[:, first:last]
    level = np.median(smooth[:, -round(0.012 * rate) :], axis=1, keepdims=True)
    size = np.sqrt(np.mean((smooth - level) ** 2, axis=0))
    margin = round(0.03 * rate)
    peak = margin + int(np.argmax(size[margin : max(margin + 1, size.size - margin // 2)]))
    if size[peak] < P_STANDS_OUT * _left_after_averaging(analysis, first, last):
        return None, None

    velocity = spatial_velocity(before_qrs, rate, smoothing_s=P_SMOOTHING_S)[first:last]
    reach = round(0.07 * rate)
    rise_from = max(0, peak - reach)
    rise = rise_from + int(np.argmax(velocity[rise_from : peak + 1]))
    fall = peak + int(np.argmax(velocity[peak : peak + reach + 1]))
    quiet = float(np.quantile(velocity, 0.15))
    before = first_quiet(
        velocity[: rise + 1][::-1], 0.2 * velocity[rise] + quiet, round(0.016 * rate), rise
    )
    after = first_quiet(
        velocity[fall:], 0.2 * velocity[fall], round(0.008 * rate), velocity.size - 1 - fall
    )
    onset = first + rise - before - round(P_ONSET_MARGIN_S * rate)
    offset = first + fall + after + round(P_OFFSET_MARGIN_S * rate)
    return max(0, onset), min(offset, qrs_onset)


def _left_after_averaging(analysis: BeatAnalysis, first: int, last: int) -> float:
    """Noise that the representative beat still has in a stretch, slow offsets aside."""
    residual = (analysis.aligned_mv - analysis.representative_mv)[:, :, first:last]
    residual = residual[:, ~analysis.drowned]
    smooth = low_pass(residual, cutoff_hz=25.0, sampling_rate_hz=analysis.sampling_rate_hz)
    smooth = smooth - smooth.mean(axis=-1, keepdims=True)
    return float(np.sqrt(np.mean(smooth**2) / analysis.aligned_mv.shape[0]))
