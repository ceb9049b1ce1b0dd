"""What the settings do to a judgement."""

from __future__ import annotations

from dataclasses import replace

import pytest

from core import Settings, Spread, compare
from core.recordings.leads import CHEST_LEADS, LIMB_LEADS

DECIDING = ("st_mv", "t_mv")


def again(comparison, **changes):
    recordings = comparison.earlier.recording, comparison.later.recording
    return compare(*recordings, replace(Settings(), **changes))


def widths(comparison, leads, low, high):
    return [
        getattr(comparison.leads[lead].measures[name], high)
        - getattr(comparison.leads[lead].measures[name], low)
        for lead in leads
        for name in DECIDING
    ]


@pytest.fixture(scope="module")
def without_spread(raised):
    return again(raised, spread_mm=Spread(0.0, 0.0))


def test_electrodes_that_are_always_on_their_sites_explain_nothing(raised, without_spread):
    for lead in CHEST_LEADS:
        assert not without_spread.leads[lead].judgement.startswith("in-reach")
    moved = {lead for lead, r in raised.leads.items() if r.judgement.startswith("in-reach")}
    assert moved
    assert {without_spread.leads[lead].judgement for lead in moved} == {"beyond-reach"}


def test_without_spread_the_reach_is_the_noise(without_spread):
    noise = widths(without_spread, CHEST_LEADS, "noise_low", "noise_high")
    reach = widths(without_spread, CHEST_LEADS, "reach_low", "reach_high")
    for narrow, wide in zip(noise, reach, strict=True):
        # Ends of a 95 % range from 2000 draws scatter by 3 % of its half (normal order
        # statistics), the larger of two ends is taken, and three such steps are rare.
        assert narrow <= wide <= 1.10 * narrow


def test_a_wider_spread_has_a_wider_reach(raised):
    wider = again(raised, spread_mm=Spread(40.0, 40.0))
    one, other = (
        widths(comparison, CHEST_LEADS, "reach_low", "reach_high") for comparison in (raised, wider)
    )
    assert sum(other) > 1.1 * sum(one)
    assert all(wide > 0.97 * narrow for narrow, wide in zip(one, other, strict=True))  # as above
    for lead in LIMB_LEADS:
        assert wider.leads[lead] == raised.leads[lead]


def test_more_confidence_widens_noise_and_reach(raised):
    surer = again(raised, confidence=0.99)
    for low, high in (("noise_low", "noise_high"), ("reach_low", "reach_high")):
        one, other = (widths(c, raised.leads, low, high) for c in (raised, surer))
        assert all(wide > narrow for narrow, wide in zip(one, other, strict=True))


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_other_draws_judge_alike(request, pair):
    comparison = request.getfixturevalue(pair)
    other = again(comparison, seed=7)
    assert other.placement.tail_probability is not None
    assert {lead: r.judgement for lead, r in other.leads.items()} == {
        lead: r.judgement for lead, r in comparison.leads.items()
    }


def test_another_seed_is_another_draw(raised):
    one, other = (
        c.leads["V3"].measures["t_mv"].reach_high for c in (raised, again(raised, seed=7))
    )
    assert one != other


def test_every_setting_is_told(raised):
    settings = replace(Settings(), confidence=0.9, draws=300, spread_mm=Spread(10.0, 12.0))
    told = again(raised, confidence=0.9, draws=300, spread_mm=Spread(10.0, 12.0)).to_dict()
    assert told["settings"].keys() == set(Settings.__dataclass_fields__)
    assert told["settings"] == settings.to_dict()
    assert told["settings"]["spread_mm"] == {"left": 10.0, "up": 12.0}
