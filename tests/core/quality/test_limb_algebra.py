from __future__ import annotations

import numpy as np
import pytest

from core.quality.limb_algebra import limb_lead_contradiction_mv
from core.recordings.leads import TWELVE_LEADS
from tests.helpers.synthetic import synthetic


def changed(lead: str, change):
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    column = TWELVE_LEADS.index(lead)
    signal[:, column] = change(signal[:, column])
    return recording.with_signal(signal, name="changed")


def test_leads_of_one_recorder_agree():
    assert limb_lead_contradiction_mv(synthetic().recording) is None


def test_rounding_to_the_files_steps_agrees():
    recording = synthetic().recording
    rounded = np.rint(recording.signal_mv * 1000.0) / 1000.0
    assert limb_lead_contradiction_mv(recording.with_signal(rounded, name="rounded")) is None


def test_an_offset_of_a_lead_is_no_contradiction():
    assert limb_lead_contradiction_mv(changed("aVF", lambda x: x + 0.4)) is None


@pytest.mark.parametrize("lead", ["III", "aVR", "aVL", "aVF"])
def test_a_rescaled_lead_contradicts_by_what_was_added_to_it(lead):
    recording = synthetic().recording
    column = recording.signal_mv[:, TWELVE_LEADS.index(lead)]
    found = limb_lead_contradiction_mv(changed(lead, lambda x: 1.3 * x))
    added = 0.3 * np.abs(column - np.median(column)).max()
    assert found == pytest.approx(added, abs=1e-9)


def test_missing_samples_are_left_aside():
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    signal[100:900, 2] = np.nan
    assert limb_lead_contradiction_mv(recording.with_signal(signal, name="gap")) is None
