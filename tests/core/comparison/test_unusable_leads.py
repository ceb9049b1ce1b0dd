"""A number is null where nothing was measured, and nothing is made of what was not."""

from __future__ import annotations

import json

import numpy as np
import pytest

from core import compare
from core.errors import ComparisonError
from core.recordings.leads import CHEST_LEADS, LIMB_LEADS, TWELVE_LEADS
from core.wording.lists import named
from tests.helpers.schemas import validate
from tests.helpers.synthetic import synthetic

SPOILT = {"flat": 0.0, "samples missing": np.nan}


def without(recording, leads, value):
    signal = recording.signal_mv.copy()
    signal[:, [TWELVE_LEADS.index(lead) for lead in leads]] = value
    return recording.with_signal(signal, name="spoilt")


def compared(leads, value):
    """A recording with itself, some leads of the later lost."""
    recording = synthetic().recording
    return compare(recording, without(recording, leads, value))


@pytest.mark.parametrize("reason", SPOILT)
@pytest.mark.parametrize("leads", [["V1"], ["aVR"], CHEST_LEADS, LIMB_LEADS], ids="-".join)
def test_lost_leads_are_null_named_and_the_only_ones(leads, reason):
    comparison = compared(leads, SPOILT[reason])
    judged = {lead for lead, r in comparison.leads.items() if r.judgement != "not-judged"}
    assert judged == set(TWELVE_LEADS) - set(leads)
    assert {comparison.leads[lead].judgement for lead in judged} == {"steady"}
    content = comparison.to_dict()
    validate("comparison", content)
    json.dumps(content, allow_nan=False)
    assert f"Not judged: {named(leads)}." in comparison.overall.sentence
    notice = next(n for n in comparison.notices if n.code == "leads-unusable")
    for lead in leads:
        told = content["leads"][lead]
        assert all(number is None for m in told["measures"].values() for number in m.values())
        assert reason in told["reason"]
        assert content["later"]["leads"][lead]["st_mv"] is None
        assert f"{lead} ({reason})" in notice.text
    for lead in set(CHEST_LEADS) & set(leads):
        assert content["placement"]["electrodes"][lead] is None


@pytest.mark.parametrize("lead", ["I", "II"])
def test_leads_that_are_computed_from_a_lost_one_are_not_called_changed(lead):
    """III, aVR, aVL and aVF are measured on I and II; without one of these they are not known."""
    comparison = compared([lead], np.nan)
    assert comparison.leads[lead].judgement == "not-judged"
    for limb in LIMB_LEADS:
        result = comparison.leads[limb]
        assert result.judgement in ("steady", "not-judged"), result.reason
        for m in result.measures.values():
            assert m.change is None or abs(m.change) <= m.noise_high, limb


def test_a_lead_lost_in_the_earlier_recording_is_not_judged_either():
    recording = synthetic().recording
    comparison = compare(without(recording, ["V5"], np.nan), recording)
    assert comparison.leads["V5"].judgement == "not-judged"
    assert "earlier" in comparison.leads["V5"].reason
    assert "later" not in comparison.leads["V5"].reason


def test_two_recordings_without_a_lead_in_common_cannot_be_compared():
    recording = synthetic().recording
    lost = without(recording, CHEST_LEADS, np.nan), without(recording, LIMB_LEADS, np.nan)
    with pytest.raises(ComparisonError, match="lead"):
        compare(*lost)
