from __future__ import annotations

import numpy as np
import pytest

from core import Settings, measure
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.schemas import validate
from tests.helpers.synthetic import T_MV, as_recording, synthetic


@pytest.fixture(scope="module")
def report():
    return measure(synthetic(noise_mv=0.004, st_mv=0.08).recording)


def test_the_json_is_valid(report):
    validate("recording", report.to_dict())


def test_limb_lead_algebra_holds_in_the_json(report):
    beat = {
        lead: np.array(values)
        for lead, values in report.to_dict()["representative_beat"]["leads"].items()
    }
    np.testing.assert_allclose(beat["I"] + beat["III"], beat["II"], atol=1e-12)
    np.testing.assert_allclose(beat["aVR"] + beat["aVL"] + beat["aVF"], 0, atol=1e-12)


def test_heart_rate_and_t_waves_are_as_made(report):
    assert report.heart_rate_per_min == pytest.approx(60 / 0.85, rel=0.01)
    for lead, t in zip(("I", "II", "V1", "V2", "V3", "V4", "V5", "V6"), T_MV, strict=True):
        # 0.08 mV of ST runs under the T wave and is nearly all there at its peak.
        measured = report.values["t_mv"][TWELVE_LEADS.index(lead)]
        assert measured == pytest.approx(t + 0.08, abs=0.012)


def test_the_st_point_follows_the_settings():
    recording = synthetic(noise_mv=0.002, st_mv=0.1).recording
    early = measure(recording, Settings(st_point_ms=20.0))
    late = measure(recording, Settings(st_point_ms=80.0))
    assert late.points.st - early.points.st == 30  # samples of 2 ms


def test_a_flat_lead_is_not_measured_and_said_so():
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    signal[:, 9] = 0.0
    report = measure(as_recording(signal, 500.0))
    leads = report.to_dict()["leads"]
    assert leads["V4"]["st_mv"] is None
    assert leads["V5"]["st_mv"] is not None
    assert any("V4 (flat)" in notice.text for notice in report.notices)


def test_a_clipped_and_an_empty_lead_are_named():
    signal = synthetic().recording.signal_mv.copy()
    signal[:, 10] = np.clip(signal[:, 10], -0.1, 0.05)
    signal[:, 11] = np.nan
    text = " ".join(n.text for n in measure(as_recording(signal, 500.0)).notices)
    assert "V5 (clipped)" in text
    assert "V6 (samples missing)" in text


def test_limb_leads_that_contradict_each_other_are_noticed():
    signal = synthetic().recording.signal_mv.copy()
    honest = measure(as_recording(signal, 500.0))
    assert "limb-leads-disagree" not in [notice.code for notice in honest.notices]
    signal[:, 2] *= 1.4
    codes = [notice.code for notice in measure(as_recording(signal, 500.0)).notices]
    assert "limb-leads-disagree" in codes


def test_a_constant_voltage_on_an_electrode_changes_nothing():
    recording = synthetic().recording
    moved = as_recording(recording.signal_mv + 0.4, 500.0)
    before, after = measure(recording), measure(moved)
    for name, values in before.values.items():
        np.testing.assert_allclose(after.values[name], values, atol=1e-9, equal_nan=True)
