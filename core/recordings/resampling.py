"""One lead brought to another sampling rate."""

from __future__ import annotations

import math
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

# Rates of electrocardiographs are whole numbers or simple fractions of one another.
LARGEST_DENOMINATOR = 2000


def resampled(
    samples_mv: NDArray[np.float64], rate_hz: float, new_rate_hz: float
) -> NDArray[np.float64]:
    """Band-limited resampling; a missing sample stays missing.

    Parameters
    ----------
    samples_mv : ndarray, shape (n,)
        NaN where missing.

    Returns
    -------
    ndarray, shape (ceil(n * new_rate / rate),)
    """
    from scipy.signal import resample_poly

    ratio = Fraction(new_rate_hz / rate_hz).limit_denominator(LARGEST_DENOMINATOR)
    missing = np.isnan(samples_mv)
    known = np.flatnonzero(~missing)
    n_new = math.ceil(samples_mv.size * ratio)
    if known.size == 0:
        return np.full(n_new, np.nan)
    filled = np.interp(np.arange(samples_mv.size), known, samples_mv[known])
    new = np.asarray(resample_poly(filled, ratio.numerator, ratio.denominator, padtype="line"))[
        :n_new
    ]
    nearest = np.minimum(np.rint(np.arange(n_new) / float(ratio)), samples_mv.size - 1)
    new[missing[nearest.astype(np.int64)]] = np.nan
    return new
