from __future__ import annotations

from dataclasses import replace

import numpy as np
from scipy.stats import binomtest

from core import Settings, measure
from core.beats.representative import representative_of
from core.measures.repeat_noise import _standard_error, repeat_noise
from core.settings import RepeatFloor
from tests.helpers.synthetic import synthetic


def test_the_beats_own_range_covers_what_chance_does():
    """95 % ranges of the difference of two trimmed means hold it in about 95 % of trials."""
    from scipy.special import stdtrit

    rng = np.random.default_rng(11)
    trials, held = 1500, 0
    for _ in range(trials):
        one, other = rng.normal(0, 1, (9, 1)), rng.normal(0, 1, (11, 1))
        change = (representative_of(other[:, None]) - representative_of(one[:, None]))[0, 0]
        errors = _standard_error(one), _standard_error(other)
        freedom = errors[0].freedom[0] + errors[1].freedom[0]
        half = stdtrit(freedom, 0.975) * np.sqrt(errors[0].squared[0] + errors[1].squared[0])
        held += abs(change) <= half
    # The t distribution of a winsorised error is an approximation: 2 % either way is allowed.
    assert binomtest(held, trials, 0.97).pvalue > 1e-3 or 0.93 < held / trials < 0.97


def test_the_floor_is_the_least():
    report = measure(synthetic(noise_mv=0.0005).recording)
    noise = repeat_noise(report, report, Settings())
    assert (noise["st_mv"] >= Settings().repeat_floor["st_mv"].fixed).all()


def test_noisier_beats_widen_it():
    quiet, loud = (measure(synthetic(noise_mv=n, seed=3).recording) for n in (0.005, 0.06))
    none = {name: RepeatFloor(0.0, 0.0) for name in Settings().repeat_floor}
    settings = replace(Settings(), repeat_floor=none)
    narrow, wide = (repeat_noise(r, r, settings)["t_mv"] for r in (quiet, loud))
    assert (wide > 3 * narrow).all()


def test_more_confidence_widens_it():
    report = measure(synthetic().recording)
    narrow, wide = (
        repeat_noise(report, report, replace(Settings(), confidence=c))["st_mv"]
        for c in (0.80, 0.99)
    )
    assert (wide > 1.5 * narrow).all()


def test_a_wave_that_one_beat_has_has_no_range():
    beats = np.full((6, 2), np.nan)
    beats[0, 0] = 0.3
    beats[:, 1] = [0.1, 0.2, 0.1, 0.2, 0.1, 0.2]
    error = _standard_error(beats)
    assert np.isnan(error.squared[0])
    assert error.squared[1] > 0
