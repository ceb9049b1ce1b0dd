from __future__ import annotations

import numpy as np
import pytest

from core.quality.lead_quality import grade_leads
from core.recordings.leads import TWELVE_LEADS
from core.recordings.recording import Recording
from tests.helpers.synthetic import synthetic


def spoiled(lead: str, spoil) -> Recording:
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    column = TWELVE_LEADS.index(lead)
    signal[:, column] = spoil(signal[:, column])
    return recording.with_signal(signal, name="spoiled")


def test_a_clean_recording_is_usable_in_every_lead():
    assert all(grade.usable for grade in grade_leads(synthetic().recording))


@pytest.mark.parametrize(
    ("spoil", "reason"),
    [
        (lambda x: np.zeros_like(x), "flat"),
        (lambda x: np.full_like(x, 3.2), "flat"),
        (lambda x: np.full_like(x, np.nan), "samples missing"),
        (lambda x: np.where(np.arange(x.size) < x.size // 3, np.nan, x), "samples missing"),
        (lambda x: np.clip(x, None, 0.1), "clipped"),
        (lambda x: np.clip(x, -0.02, None), "clipped"),
        (lambda x: np.where(np.arange(x.size) < x.size // 10, 5.0, x), "saturated"),
        (lambda x: np.where(np.arange(x.size) > x.size // 10, -5.0, x), "saturated"),
    ],
)
@pytest.mark.parametrize("lead", ["aVF", "V2"])
def test_a_spoiled_lead_and_no_other_is_unusable_and_says_why(lead, spoil, reason):
    grades = {grade.lead: grade for grade in grade_leads(spoiled(lead, spoil))}
    assert (grades[lead].usable, grades[lead].reason) == (False, reason)
    assert all(grade.usable for name, grade in grades.items() if name != lead)


def test_coarse_steps_are_not_clipping():
    """At 20 uV a step a lead rests on its extreme for several samples of each beat."""
    coarse = spoiled("V2", lambda x: np.rint(x / 0.02) * 0.02)
    assert all(grade.usable for grade in grade_leads(coarse))


@pytest.mark.parametrize("lead", ["I", "II"])
def test_leads_computed_from_a_lost_one_fall_with_it(lead):
    grades = {g.lead: g for g in grade_leads(spoiled(lead, np.zeros_like))}
    for computed in ("III", "aVR", "aVL", "aVF"):
        assert grades[computed].reason == f"computed from lead {lead}, which is flat"
    assert grades["II" if lead == "I" else "I"].usable
    assert all(grades[f"V{k}"].usable for k in range(1, 7))
