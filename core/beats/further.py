"""The representative beat of further leads, by the beats that the eight leads told."""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

from core.beats.alignment import cut_windows, shifted
from core.beats.analyse import BeatAnalysis
from core.beats.representative import beat_locked_part, representative_of
from core.conditioning.gaps import bridge_gaps
from core.conditioning.pacing import bridge_spikes
from core.conditioning.wander import estimate_wander

ROUNDS = 2


def average_further_leads(
    further_mv: NDArray[np.float64], analysis: BeatAnalysis
) -> NDArray[np.float64]:
    """Average further leads over the used beats of a recording, their wander taken out.

    They have no say in where the beats are, so they cannot change the twelve leads.

    Parameters
    ----------
    further_mv : ndarray, shape (n_further, n_samples)
        NaN where missing.

    Returns
    -------
    ndarray, shape (n_further, n)
        On the time axis of ``analysis.representative_mv``.
    """
    rate = analysis.sampling_rate_hz
    raw = bridge_gaps(further_mv, np.isnan(further_mv))
    raw = bridge_spikes(raw, analysis.spikes, rate)
    centres = np.array([beat.r_time_s for beat in analysis.beats]) * rate
    whole = np.rint(centres).astype(np.int64)
    used = list(analysis.used)
    before = analysis.r_index
    after = analysis.representative_mv.shape[1] - before
    foreign = np.zeros(raw.shape[1], dtype=bool)
    for index, beat in enumerate(analysis.beats):
        if beat.why_not == "another shape":
            foreign[max(0, whole[index] - before) : whole[index] + after] = True
    signal = raw
    for _ in range(ROUNDS):
        windows = cut_windows(signal, whole[used], before, after)
        average = representative_of(shifted(windows, centres[used] - whole[used]))
        locked = beat_locked_part(average, before, np.sort(whole), raw.shape[1])
        signal = raw - estimate_wander(raw - locked, foreign, sampling_rate_hz=rate)
    windows = cut_windows(signal, whole[used], before, after)
    return representative_of(shifted(windows, centres[used] - whole[used]))
