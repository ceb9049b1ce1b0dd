"""Lay beats on one another to a fraction of a sample, by the QRS of all leads."""

from __future__ import annotations

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.fft import irfft, next_fast_len, rfft, rfftfreq


def cut_windows(
    signal: NDArray[np.float64], centres: NDArray[np.int64], before: int, after: int
) -> NDArray[np.float64]:
    """Windows of a signal around whole samples; the ends of the signal are held.

    Parameters
    ----------
    signal : ndarray, shape (n_leads, n_samples)
    centres : ndarray of int, shape (n_beats,)
    before, after : int
        Samples before each centre, and from it on.

    Returns
    -------
    ndarray, shape (n_beats, n_leads, before + after)
    """
    at = centres[:, None] + np.arange(-before, after)[None, :]
    at = np.clip(at, 0, signal.shape[1] - 1)
    return np.ascontiguousarray(signal[:, at].transpose(1, 0, 2))


def shifted(windows: NDArray[np.float64], shift: NDArray[np.float64]) -> NDArray[np.float64]:
    """Windows moved earlier by a fraction of a sample each, by the phase of their spectrum.

    Exact for what the sampling holds. The straight line from a window's first sample to its
    last is set aside and put back, so that the two ends meet and nothing rings.

    Parameters
    ----------
    windows : ndarray, shape (n_beats, n_leads, n)
    shift : ndarray, shape (n_beats,)
        In samples; positive moves what is at sample k + shift to sample k.
    """
    n = windows.shape[-1]
    ramp = np.linspace(0.0, 1.0, n)
    first, last = windows[..., :1], windows[..., -1:]
    line = first + (last - first) * ramp
    size = next_fast_len(n + 32, real=True)
    spectrum = rfft(windows - line, n=size, axis=-1)
    phase = np.exp(2j * np.pi * rfftfreq(size)[None, :] * shift[:, None])
    if size % 2 == 0:
        phase[:, -1] = phase[:, -1].real
    moved = irfft(spectrum * phase[:, None, :], n=size, axis=-1)[..., :n]
    slope = (last - first) / (n - 1)
    return np.asarray(moved + line + slope * shift[:, None, None])


def lags_to_template(
    windows: NDArray[np.float64], template: NDArray[np.float64], largest: int
) -> NDArray[np.float64]:
    """How much later than the template each window's QRS lies, to a fraction of a sample.

    The lag of largest correlation over all leads, refined by a parabola through the three
    values at the top.

    Parameters
    ----------
    windows : ndarray, shape (n_beats, n_leads, n + 2 * largest)
    template : ndarray, shape (n_leads, n) or (n_beats, n_leads, n)
        One for all windows, or one for each.
    largest : int
        Largest lag looked at, in samples.

    Returns
    -------
    ndarray, shape (n_beats,)
        In samples, from -largest to largest.
    """
    n = template.shape[-1]
    centred = template - template.mean(axis=-1, keepdims=True)
    centred = np.broadcast_to(centred, (windows.shape[0], *centred.shape[-2:]))
    views = np.lib.stride_tricks.sliding_window_view(windows, n, axis=-1)
    product = np.einsum("blkn,bln->bk", views, centred, optimize=True)
    best = np.clip(np.argmax(product, axis=1), 1, 2 * largest - 1)
    rows = np.arange(best.size)
    fraction = top_of_parabola(
        product[rows, best - 1], product[rows, best], product[rows, best + 1]
    )
    return np.asarray(best - largest + fraction)


def top_of_parabola(left: ArrayLike, middle: ArrayLike, right: ArrayLike) -> NDArray[np.float64]:
    """Where the parabola through three equally spaced values is largest, from the middle one.

    In steps, from -1 to 1; 0 where the three have no top.
    """
    left, middle, right = np.asarray(left), np.asarray(middle), np.asarray(right)
    bend = left - 2 * middle + right
    top = np.where(bend < 0, 0.5 * (left - right) / np.where(bend < 0, bend, -1.0), 0.0)
    return np.asarray(np.clip(top, -1.0, 1.0))
