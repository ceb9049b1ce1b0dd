from __future__ import annotations

import numpy as np
import pytest

from core import measure
from core.quality.faults import largest_step_mv
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.synthetic import synthetic


def disturbed(add, leads=("V3",)):
    """Notice text of a recording with something added to some chest leads."""
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    time_s = np.arange(signal.shape[0]) / recording.sampling_rate_hz
    for lead in leads:
        signal[:, TWELVE_LEADS.index(lead)] += add(time_s)
    report = measure(recording.with_signal(signal, name="disturbed"))
    return next((n.text for n in report.notices if n.code == "leads-disturbed"), "")


def test_a_quiet_recording_says_nothing():
    assert disturbed(np.zeros_like) == ""


@pytest.mark.parametrize(
    ("add", "says"),
    [
        (lambda t: 0.05 * np.sin(2 * np.pi * 50 * t), "mains hum up to 0.10 mV in V3"),
        (lambda t: 0.4 * np.sin(2 * np.pi * 0.25 * t), "baseline wander up to 0.8"),
        # White noise loses a tenth below 25 Hz, and a tenth of the rest to the averaged beat.
        (lambda t: 0.05 * np.random.default_rng(1).normal(size=t.size), "muscle noise up to 0.04"),
        (lambda t: np.where(t > 5.0, 0.9, 0.0), "a step up to 0."),
    ],
)
def test_what_is_added_is_said_with_its_size_and_lead(add, says):
    text = disturbed(add)
    assert says.lower() in text.lower()
    assert "v3" in text.lower()


def test_a_step_is_measured_in_full_and_slow_wander_is_none():
    rate = 500.0
    time_s = np.arange(5000) / rate
    step = np.where(time_s > 4.0, 1.0, 0.0)
    wander = np.sin(2 * np.pi * 0.25 * time_s)
    found = largest_step_mv(np.array([step, wander]), rate)
    assert found[0] == pytest.approx(1.0, abs=1e-9)
    # The curvature of a quarter-hertz sine over the 1.2 s between the levels compared.
    assert found[1] < 0.35


def test_an_ectopic_beat_is_no_step(raised):
    """The sample holds a premature beat of another shape."""
    assert any(beat.why_not == "another shape" for beat in raised.later.analysis.beats)
    assert not any("step" in notice.text for notice in raised.later.notices)
