"""An electrode that hardly holds spoils its own lead and no other."""

from __future__ import annotations

import numpy as np
import pytest

from core import measure
from core.beats.detection import slope_power, stands_out
from core.beats.drowned import drowned_leads, returning_share
from core.quality.lead_quality import DROWNED
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.synthetic import synthetic

N, RATE_HZ = 5000, 500.0
TIME_S = np.arange(N) / RATE_HZ


def disturbance(kind: str, rng: np.random.Generator) -> np.ndarray:
    return {
        "noise": rng.normal(0, 1, N),
        "hum": 1.5 * np.sin(2 * np.pi * 50 * TIME_S),
        "wander": np.cumsum(rng.normal(0, 0.05, N)),
        "quiet noise": rng.normal(0, 0.1, N),
    }[kind]


@pytest.mark.parametrize("kind", ["noise", "hum", "wander", "quiet noise"])
@pytest.mark.parametrize("lead", ["V1", "V4"])
def test_a_lead_that_is_noise_throughout_falls_alone(kind, lead):
    whole = synthetic(noise_mv=0.01)
    clean = measure(whole.recording)
    signal = whole.recording.signal_mv.copy()
    signal[:, TWELVE_LEADS.index(lead)] = disturbance(kind, np.random.default_rng(4))
    spoiled = measure(whole.recording.with_signal(signal, name="spoiled"))

    assert {grade.lead: grade.reason for grade in spoiled.quality if not grade.usable} == {
        lead: DROWNED
    }
    assert len(spoiled.analysis.beats) == len(clean.analysis.beats)
    assert len(spoiled.analysis.used) == len(clean.analysis.used)
    others = [row for row, name in enumerate(TWELVE_LEADS) if name != lead]
    # The onset may fall a sample or two elsewhere without that lead's QRS: what 4 ms do to ST.
    change = np.abs(spoiled.values["st_mv"] - clean.values["st_mv"])[others]
    assert change.max() < 0.010
    assert abs(spoiled.qrs_ms - clean.qrs_ms) <= 8.0


def test_an_arm_electrode_that_is_off_takes_the_limb_leads():
    whole = synthetic(noise_mv=0.01).recording
    signal = whole.signal_mv.copy()
    noise = np.random.default_rng(5).normal(0, 2, N)
    for lead, share in (("I", -1), ("II", -1), ("aVR", 1), ("aVL", -0.5), ("aVF", -0.5)):
        signal[:, TWELVE_LEADS.index(lead)] += share * noise
    grades = {grade.lead: grade for grade in measure(whole.with_signal(signal, name="off")).quality}
    assert not any(grades[lead].usable for lead in TWELVE_LEADS[:6])
    assert all(grades[lead].usable for lead in TWELVE_LEADS[6:])


def test_a_fast_rhythm_of_wide_qrs_is_no_noise():
    """At 200 a minute with a QRS of 160 ms nothing stands out, and all of it returns."""
    beat = np.sin(np.pi * np.clip((TIME_S % 0.3) / 0.16, 0, 1))
    leads = np.outer([0.4, 0.9, -1.2, -1.5, 0.8, 1.1, 0.9, 0.7], beat)
    leads += np.random.default_rng(6).normal(0, 0.05, leads.shape)
    assert not stands_out(slope_power(leads, RATE_HZ)).any()
    centres = np.arange(100, N - 100, 150)
    assert not drowned_leads(leads, centres, RATE_HZ).any()


def test_the_returning_share_is_that_of_the_signal_in_noise():
    """Signal of power S in noise of power N: S / (S + N), within its own scatter."""
    rng = np.random.default_rng(7)
    shape = np.sin(np.arange(70) / 5.0)
    shape = (shape - shape.mean()) / shape.std()
    windows = np.stack([shape, 0.5 * shape, 0 * shape]) + rng.normal(0, 1, (400, 3, 70))
    np.testing.assert_allclose(returning_share(windows), [0.5, 0.2, 0.0], atol=0.02)
