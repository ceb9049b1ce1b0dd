"""Ten seconds of a long recording: the stretch with the least noise and wander."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from core.recordings.held import Held, held_in_memory
from core.recordings.recording import Recording
from core.recordings.size_limit import MOST_VALUES
from core.wording import notices as say

# A recording longer than this is no resting ECG but a stretch of monitoring.
LONGEST_WHOLE_S = 300.0
STRETCH_S = 10.0
# A lead that moves less than this in ten seconds is off.
LEAST_MV = 0.1
# What is looked at in one go of a recording that memory doesn't hold.
VALUES_AT_ONCE = MOST_VALUES // 8


def cleanest_stretch(recording: Recording) -> Recording:
    """The recording itself, or the cleanest ten seconds of one that is longer than five minutes.

    See `cleanest_of` for what is cleanest.
    """
    if recording.duration_s <= LONGEST_WHOLE_S:
        return recording
    return cleanest_of(held_in_memory(recording))


def cleanest_of(held: Held) -> Recording:
    """The cleanest ten seconds of a recording, with a notice that says which they are.

    Of the stretches in which the fewest leads are off or miss samples, the one with the least
    noise (the median absolute second difference) and wander (how far the median of its seconds
    moves) is taken, each a mean over the leads and a share of what is usual in those stretches.
    """
    n = max(int(held.duration_s / STRETCH_S), 1)
    at_once = max(int(VALUES_AT_ONCE / held.n_leads / held.sampling_rate_hz / STRETCH_S), 1)
    found = np.concatenate(
        [_looked_at(held, first, min(first + at_once, n)) for first in range(0, n, at_once)]
    )
    n_off, cost = found[:, 0], found[:, 1:]
    usual = np.median(cost[n_off == n_off.min()], axis=0)
    ranked = (cost / np.maximum(usual, 1e-9)).sum(axis=1)
    ranked[n_off > n_off.min()] = np.inf
    start_s = int(np.argmin(ranked)) * STRETCH_S
    cut = held.between(start_s, start_s + STRETCH_S)
    notice = say.stretch_chosen(start_s, STRETCH_S, held.duration_s)
    return replace(cut, notices=(*cut.notices, notice))


def _looked_at(held: Held, first: int, last: int) -> NDArray[np.float64]:
    """Leads off, noise and wander of stretches from one up to another, shape (last - first, 3)."""
    part = held.between(first * STRETCH_S, last * STRETCH_S)
    rate = part.sampling_rate_hz
    length = round(STRETCH_S * rate)
    starts = [round(number * STRETCH_S * rate) for number in range(last - first)]
    return np.array([_faults(part.signal_mv[at : at + length], round(rate)) for at in starts])


def _faults(piece_mv: NDArray[np.float64], one_second: int) -> tuple[float, float, float]:
    """How many leads are off or miss samples; noise and wander, mean over the others."""
    on = np.ptp(piece_mv, axis=0) >= LEAST_MV  # false where a sample is missing
    held_mv = piece_mv[:, on]
    n_off = float(np.sum(~on))
    if held_mv.size == 0:
        return n_off, 0.0, 0.0
    noise = float(np.mean(np.median(np.abs(np.diff(held_mv, n=2, axis=0)), axis=0)))
    seconds = held_mv[: held_mv.shape[0] // one_second * one_second]
    levels = np.median(seconds.reshape(-1, one_second, held_mv.shape[1]), axis=1)
    return n_off, noise, float(np.mean(np.ptp(levels, axis=0)))
