from __future__ import annotations

import json

import numpy as np
import pytest

from core.recordings.leads import TWELVE_LEADS
from tests.helpers.further import MADE_OF
from tests.helpers.schemas import validate

IN_BOTH = ("V4R", "V7")
# An average of what was scaled is the scaled average but for wander, which is taken out of the
# twelve leads together and out of each further lead by itself: 10 uV.
SLACK_MV = 0.010


def test_the_leads_of_either_recording_are_there_in_their_order(further):
    assert list(further.further) == ["V3R", "V4R", "V7", "V9", "X"]


def test_a_pair_without_further_leads_has_none(raised):
    assert raised.further == {}


@pytest.mark.parametrize("lead", IN_BOTH)
def test_both_beats_are_laid_as_those_of_the_twelve_leads(further, lead):
    source, share = MADE_OF[lead]
    row, beats = TWELVE_LEADS.index(source), further.further[lead]
    np.testing.assert_allclose(
        beats.earlier_mv, share * further.laid.earlier_mv[row], atol=SLACK_MV
    )
    laid = share * 1.2 * further.laid.later_mv[row]
    assert (np.isnan(beats.later_mv) == np.isnan(laid)).all()
    np.testing.assert_allclose(beats.later_mv, laid, atol=SLACK_MV)


@pytest.mark.parametrize("lead", IN_BOTH)
def test_the_values_are_those_of_the_recordings_reports(further, lead):
    for measured, report in (
        (further.further[lead].earlier, further.earlier),
        (further.further[lead].later, further.later),
    ):
        assert measured == report.to_dict()["further_measures"][lead]


def test_a_lead_of_one_recording_has_one_beat_and_says_so(further):
    later_alone, earlier_alone = further.further["V3R"], further.further["X"]
    assert np.isnan(later_alone.earlier_mv).all()
    assert not np.isnan(later_alone.later_mv).all()
    assert later_alone.earlier is None
    assert later_alone.reason.startswith("Only the later recording holds this lead.")
    assert np.isnan(earlier_alone.later_mv).all()
    assert earlier_alone.later is None
    assert earlier_alone.reason.startswith("Only the earlier recording holds this lead.")


def test_a_flat_tracing_is_no_beat_and_gives_no_value(further):
    flat = further.further["V9"]
    assert np.isnan(flat.later_mv).all()
    assert flat.later is not None
    assert set(flat.later.values()) == {None}
    assert flat.earlier is not None
    assert flat.earlier["t_mv"] is not None
    assert flat.reason.startswith("Later tracing flat.")


def test_further_leads_change_no_judgement_and_no_number_of_the_twelve(further, raised):
    assert {lead: one.to_dict() for lead, one in further.leads.items()} == {
        lead: one.to_dict() for lead, one in raised.leads.items()
    }
    assert further.overall == raised.overall


def test_any_lead_tells_its_reason(further):
    assert further.reason_of("V2") == further.leads["V2"].reason
    assert further.reason_of("V7") == further.further["V7"].reason


def test_the_json_is_the_contracts(further):
    content = json.loads(json.dumps(further.to_dict()))
    validate("comparison", content)
    assert set(content["later"]["further_measures"]["V9"].values()) == {None}
