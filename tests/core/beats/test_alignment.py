from __future__ import annotations

import numpy as np

from core.beats.alignment import cut_windows, lags_to_template, shifted
from tests.helpers.synthetic import beat_mv


def smooth_beat(at_ms: np.ndarray) -> np.ndarray:
    """A band-limited wave, so that moving it by a part of a sample is well defined."""
    centre = np.arange(8)[:, None] * 2.0
    return np.exp(-0.5 * ((at_ms - centre) / 14.0) ** 2)


def test_moving_by_a_part_of_a_sample_is_exact():
    time = np.arange(-200.0, 200.0, 2.0)
    shift = np.array([0.0, 0.37, -1.9])
    windows = np.repeat(smooth_beat(time)[None], 3, axis=0)
    moved = shifted(windows, shift)
    for row, by in zip(moved, shift, strict=True):
        # 1e-6: what a wave of this width holds above the Nyquist frequency.
        np.testing.assert_allclose(row, smooth_beat(time + 2.0 * by), atol=1e-6)


def test_the_lag_of_a_beat_is_found_to_a_tenth_of_a_sample():
    time = np.arange(-150.0, 150.0, 2.0)
    template = smooth_beat(time)
    wide = np.arange(-170.0, 170.0, 2.0)
    for lag in (-7.0, -0.3, 0.0, 0.45, 6.2):
        window = smooth_beat(wide - 2.0 * lag)[None]
        found = lags_to_template(window, template, largest=10)[0]
        # A parabola through three samples of a smooth peak misses by well under 0.1.
        assert abs(found - lag) < 0.1


def test_windows_are_cut_where_they_are_asked_for():
    signal = beat_mv(np.arange(-300.0, 700.0, 2.0))
    windows = cut_windows(signal, np.array([100, 499]), 10, 20)
    np.testing.assert_array_equal(windows[0], signal[:, 90:120])
    assert (windows[1][:, 12:] == signal[:, -1:]).all()
