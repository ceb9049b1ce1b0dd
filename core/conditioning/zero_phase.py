"""Zero-phase low-pass by its gain in the frequency domain.

The gain is that of a Butterworth filter run forwards and backwards, 1 / (1 + (f / fc)^2n),
so no frequency is delayed and a wave keeps its place and its symmetry. Ends are extended by
odd reflection, as a forward-backward filter does, to keep the transient off the recording.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray
from scipy.fft import irfft, next_fast_len, rfft, rfftfreq


def low_pass(
    signal: NDArray[np.float64], *, cutoff_hz: float, sampling_rate_hz: float, order: int = 2
) -> NDArray[np.float64]:
    """Zero-phase low-pass along the last axis; half the amplitude passes at the cutoff.

    Parameters
    ----------
    signal : ndarray, shape (..., n_samples)
        No NaN.
    cutoff_hz : float
        Frequency of gain 1/2.
    order : int
        Butterworth order n of one of the two passes; the gain falls as (fc / f)^2n.

    Returns
    -------
    ndarray, shape (..., n_samples)
    """
    n = signal.shape[-1]
    reach = min(n - 1, int(np.ceil(2.0 * sampling_rate_hz / cutoff_hz)))
    head = 2 * signal[..., :1] - signal[..., reach:0:-1]
    tail = 2 * signal[..., -1:] - signal[..., -2 : -reach - 2 : -1]
    extended = np.concatenate([head, signal, tail], axis=-1)
    size = next_fast_len(extended.shape[-1], real=True)
    frequency_hz = rfftfreq(size, 1.0 / sampling_rate_hz)
    gain = 1.0 / (1.0 + (frequency_hz / cutoff_hz) ** (2 * order))
    # Zeros after the extension would be a step; hold the last value instead.
    held = np.repeat(extended[..., -1:], size - extended.shape[-1], axis=-1)
    spectrum = rfft(np.concatenate([extended, held], axis=-1), axis=-1)
    filtered = irfft(spectrum * gain, n=size, axis=-1)
    return np.asarray(filtered[..., reach : reach + n], dtype=np.float64)


def moving_mean(signal: NDArray[np.float64], width: int) -> NDArray[np.float64]:
    """Centred moving mean of *width* samples along the last axis, ends extended by holding.

    An even width is raised to the next odd one, so that the mean has no delay.
    """
    width = max(1, width) | 1
    half = width // 2
    padded = np.concatenate(
        [
            np.repeat(signal[..., :1], half + 1, axis=-1),
            signal,
            np.repeat(signal[..., -1:], half, axis=-1),
        ],
        axis=-1,
    )
    sums = np.cumsum(padded, axis=-1)
    return np.asarray((sums[..., width:] - sums[..., :-width]) / width, dtype=np.float64)
