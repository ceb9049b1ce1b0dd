from __future__ import annotations

import numpy as np
import pytest

from core.conditioning.zero_phase import low_pass, moving_mean


@pytest.mark.parametrize("order", [1, 2, 3])
def test_half_of_a_sine_at_the_cutoff_passes_without_delay(order):
    rate, cutoff = 500.0, 10.0
    time = np.arange(5000) / rate
    sine = np.sin(2 * np.pi * cutoff * time)
    filtered = low_pass(sine, cutoff_hz=cutoff, sampling_rate_hz=rate, order=order)
    middle = slice(1000, 4000)
    # Closed form: gain 1/2 at the cutoff. The extension at the ends still reaches in a little.
    np.testing.assert_allclose(filtered[middle], 0.5 * sine[middle], atol=2e-3)


def test_a_constant_and_a_ramp_pass_unchanged():
    ramp = np.linspace(-3.0, 5.0, 800)[None]
    for order in (1, 3):
        filtered = low_pass(ramp, cutoff_hz=1.0, sampling_rate_hz=100.0, order=order)
        # Odd reflection continues a straight line, so only the far end's hold leaks in.
        np.testing.assert_allclose(filtered, ramp, atol=0.02)


def test_an_impulse_spreads_alike_to_both_sides():
    impulse = np.zeros(1001)
    impulse[500] = 1.0
    spread = low_pass(impulse, cutoff_hz=20.0, sampling_rate_hz=500.0)
    np.testing.assert_allclose(spread[500:], spread[500::-1], atol=1e-12)


def test_the_moving_mean_is_the_mean_of_the_samples_around():
    values = np.random.default_rng(0).normal(size=60)
    mean = moving_mean(values, 4)  # raised to 5
    for at in range(2, 58):
        assert mean[at] == pytest.approx(values[at - 2 : at + 3].mean(), abs=1e-12)
