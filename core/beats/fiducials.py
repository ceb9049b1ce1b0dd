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
from core.beats.drowned import returning_share
from core.conditioning.zero_phase import low_pass

# A P wave stands out from what averaging leaves of the beat-to-beat noise by this factor;
# flutter and fibrillation waves, not locked to the QRS, do not.
P_STANDS_OUT = 5.0
P_SMOOTHING_S = 0.007
# The QRS begins and ends where the velocity stays for so long under this share of its top plus so
# many times its quiet level; the onset rises fast and from a P wave, the offset sinks slowly.
ONSET_SMOOTHING_S, ONSET_SHARE, ONSET_QUIET_TIMES, ONSET_HOLD_S = 0.004, 0.04, 3.5, 0.014
OFFSET_SMOOTHING_S, OFFSET_SHARE, OFFSET_QUIET_TIMES, OFFSET_HOLD_S = 0.003, 0.015, 1.5, 0.016
QUIET_QUANTILE = 0.3
# The search begins where the velocity first reaches this share of its top, and goes so far; if it
# never becomes quiet (a P wave runs into the QRS), the quietest place is taken.
CORE_SHARE, CORE_WITHIN_S, SEARCHED_S = 0.25, 0.13, 0.12
# Readers mark a few ms outside the point where the velocity sinks into the noise.
ONSET_MARGIN_S, OFFSET_MARGIN_S = 0.002, 0.002
P_ONSET_MARGIN_S = 0.004
P_OFFSET_MARGIN_S = 0.008
# P ends where its size last falls under this share of its peak; the margin stands for the rest.
P_END_SHARE = 0.2
# Under this share no wave belongs to the QRS: of LUDB records 1-100 those with a P have 0.41 and
# more, twelve of the fifteen without less.
LEAST_RETURNING = 0.40
T_MARGIN_S = 0.010
# The leads whose T counts for its end, by its size against the largest; of their ends, this
# quantile: nearly the last, as readers take it, but never one lead's alone.
T_LEAD_SHARE, T_END_QUANTILE = 0.15, 0.75


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
    return _qrs_onset(beat, rate, r), _qrs_offset(beat, rate, r)


def _quiet_level(velocity: NDArray[np.float64]) -> float:
    return float(np.quantile(velocity, QUIET_QUANTILE))


def _qrs_onset(beat: NDArray[np.float64], rate: float, r: int) -> int:
    velocity = spatial_velocity(beat, rate, smoothing_s=ONSET_SMOOTHING_S)
    near = round(0.06 * rate)
    top = float(velocity[max(0, r - near) : r + near].max())
    quiet = velocity[max(0, r - round(0.25 * rate)) : max(1, r - round(0.07 * rate))]
    threshold = ONSET_SHARE * top + ONSET_QUIET_TIMES * _quiet_level(quiet)
    first = max(0, r - round(CORE_WITHIN_S * rate))
    core = first + int(np.argmax(velocity[first : r + 1] >= CORE_SHARE * top))
    back = velocity[max(0, core - round(SEARCHED_S * rate)) : core + 1][::-1]
    onset = core - first_quiet(back, threshold, round(ONSET_HOLD_S * rate), int(np.argmin(back)))
    return max(0, onset - round(ONSET_MARGIN_S * rate))


def _qrs_offset(beat: NDArray[np.float64], rate: float, r: int) -> int:
    velocity = spatial_velocity(beat, rate, smoothing_s=OFFSET_SMOOTHING_S)
    last = velocity.size - 1
    near = round(0.06 * rate)
    top = float(velocity[max(0, r - near) : r + near].max())
    quiet = velocity[min(last, r + round(0.07 * rate)) : r + round(0.30 * rate)]
    threshold = OFFSET_SHARE * top + OFFSET_QUIET_TIMES * _quiet_level(quiet)
    ahead = velocity[r : r + round(0.20 * rate)]
    offset = r + first_quiet(ahead, threshold, round(OFFSET_HOLD_S * rate), ahead.size - 1)
    return min(last, offset + round(OFFSET_MARGIN_S * rate))


def _t_peak_and_offset(beat: NDArray[np.float64], rate: float, qrs_offset: int) -> tuple[int, int]:
    """Where T of all leads together is largest, and where nearly all leads' T has ended."""
    smooth = low_pass(beat, cutoff_hz=15.0, sampling_rate_hz=rate)
    last = beat.shape[1] - 1
    start = min(qrs_offset + round(0.06 * rate), last - 2)
    segment = smooth[:, start:]
    segment = segment - segment[:, -max(1, round(0.03 * rate)) :].mean(axis=1, keepdims=True)
    peak = int(np.argmax(np.sum(segment**2, axis=0)))
    # What still rises at the end of the window is the next beat's P wave.
    searched = max(3, segment.shape[1] - round(0.05 * rate))
    tops = np.argmax(np.abs(segment[:, :searched]), axis=1)
    sizes = np.abs(segment[np.arange(tops.size), tops])
    large = np.flatnonzero(sizes >= T_LEAD_SHARE * sizes.max())
    ends = [
        _tangent_end(segment[row] * np.sign(segment[row, tops[row]]), int(tops[row]), rate)
        for row in large
    ]
    end = float(np.quantile(ends, T_END_QUANTILE)) + T_MARGIN_S * rate
    end = max(end, peak)
    return start + peak, start + min(round(end), segment.shape[1] - 1)


def _tangent_end(wave: NDArray[np.float64], peak: int, rate: float) -> float:
    """Where the tangent at the steepest descent from a peak meets the lowest level after it."""
    end = min(wave.size - 1, peak + round(0.22 * rate))
    if end - peak < 2:
        return float(end)
    slope = np.gradient(wave)
    steepest = peak + int(np.argmin(slope[peak : end + 1]))
    if slope[steepest] >= 0:
        return float(end)
    floor = float(wave[steepest : end + 1].min())
    return steepest + (float(wave[steepest]) - floor) / -float(slope[steepest])


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
    if _returning(analysis, qrs_onset, first, last) < LEAST_RETURNING:
        return None, None

    velocity = spatial_velocity(before_qrs, rate, smoothing_s=P_SMOOTHING_S)[first:last]
    reach = round(0.07 * rate)
    rise_from = max(0, peak - reach)
    rise = rise_from + int(np.argmax(velocity[rise_from : peak + 1]))
    quiet = float(np.quantile(velocity, 0.15))
    before = first_quiet(
        velocity[: rise + 1][::-1], 0.2 * velocity[rise] + quiet, round(0.016 * rate), rise
    )
    last_large = int(np.flatnonzero(size >= P_END_SHARE * size[peak])[-1])
    onset = first + rise - before - round(P_ONSET_MARGIN_S * rate)
    offset = first + last_large + round(P_OFFSET_MARGIN_S * rate)
    return max(0, onset), min(offset, qrs_onset)


def _returning(analysis: BeatAnalysis, qrs_onset: int, first: int, last: int) -> float:
    """Share of what is before the QRS that is the same in every beat, by the leads that hold it."""
    beats = analysis.aligned_mv[:, ~analysis.drowned, : qrs_onset + 1]
    smooth = low_pass(beats, cutoff_hz=25.0, sampling_rate_hz=analysis.sampling_rate_hz)
    waves = smooth[:, :, first:last]
    power = np.var(waves.mean(axis=0), axis=-1)
    if power.sum() <= 0:
        return 0.0
    return float(np.average(returning_share(waves), weights=power))


def _left_after_averaging(analysis: BeatAnalysis, first: int, last: int) -> float:
    """Noise that the representative beat still has in a stretch, slow offsets aside."""
    residual = (analysis.aligned_mv - analysis.representative_mv)[:, :, first:last]
    residual = residual[:, ~analysis.drowned]
    smooth = low_pass(residual, cutoff_hz=25.0, sampling_rate_hz=analysis.sampling_rate_hz)
    smooth = smooth - smooth.mean(axis=-1, keepdims=True)
    return float(np.sqrt(np.mean(smooth**2) / analysis.aligned_mv.shape[0]))
