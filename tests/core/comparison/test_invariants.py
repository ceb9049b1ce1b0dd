"""What holds for every comparison."""

from __future__ import annotations

import json
from dataclasses import replace

import numpy as np
import pytest

from core import Settings, compare
from core.errors import Stopped
from core.recordings.leads import CHEST_LEADS, LIMB_LEADS
from tests.helpers.synthetic import synthetic

PAIRS = ("raised", "inferior", "steady", "medial")
ADDITIVE = ("j_mv", "st_mv", "qrs_net_mv_ms", "st_slope_mv_per_s")


@pytest.fixture(params=PAIRS)
def comparison(request):
    return request.getfixturevalue(request.param)


@pytest.fixture(scope="module")
def same_twice(request):
    recording = request.getfixturevalue("real_recording")
    return compare(recording, recording)


def test_the_same_recording_twice_has_no_change_at_all(same_twice):
    for result in same_twice.leads.values():
        assert result.judgement == "steady"
        changes = [m.change for m in result.measures.values() if m.change is not None]
        assert changes
        assert set(changes) == {0.0}
    assert same_twice.placement.tail_probability == 1.0
    assert same_twice.overall.judgement == "steady"
    assert not any(shift.qrs_points_to_shift for shift in same_twice.placement.electrodes.values())


@pytest.mark.parametrize("seed", [0, 1, 2])
def test_halves_of_an_unchanged_heart_are_steady(seed):
    recording = synthetic(noise_mv=0.01, seed=seed).recording
    comparison = compare(recording.stretch(0, 5), recording.stretch(5, 10))
    assert {result.judgement for result in comparison.leads.values()} == {"steady"}


@pytest.mark.parametrize("seconds", [4.5, 5.0])
def test_halves_of_a_real_recording_are_steady(real_recording, seconds):
    halves = real_recording.stretch(0, seconds), real_recording.stretch(seconds, 10)
    judgements = {lead: result.judgement for lead, result in compare(*halves).leads.items()}
    assert set(judgements.values()) == {"steady"}


def test_changes_are_later_less_earlier(comparison):
    for result in comparison.leads.values():
        for m in result.measures.values():
            if m.change is not None:
                assert m.change == m.later - m.earlier
                assert m.remainder == m.change - m.expected
                assert m.remainder_low < m.remainder < m.remainder_high


def test_the_reach_holds_the_noise(comparison):
    for result in comparison.leads.values():
        for m in result.measures.values():
            if None not in (m.reach_low, m.noise_low):
                assert m.reach_low <= m.noise_low <= 0 <= m.noise_high <= m.reach_high


def test_a_limb_lead_is_steady_or_beyond_reach(comparison):
    """Chest shifts cannot change it, so nothing is in reach but noise."""
    for lead in LIMB_LEADS:
        assert comparison.leads[lead].judgement in ("steady", "beyond-reach")
        for m in comparison.leads[lead].measures.values():
            assert (m.reach_low, m.reach_high) == (m.noise_low, m.noise_high)
            assert m.expected == 0.0


def test_the_limb_leads_keep_their_algebra(comparison):
    """In every additive measure of either recording, and in every representative beat."""
    for which in ("earlier", "later"):
        for name in ADDITIVE:
            value = {
                lead: getattr(comparison.leads[lead].measures[name], which) for lead in LIMB_LEADS
            }
            assert value["I"] + value["III"] == pytest.approx(value["II"], abs=1e-9)
            assert value["aVR"] + value["aVL"] + value["aVF"] == pytest.approx(0.0, abs=1e-9)
        beat = comparison.to_dict()[which]["representative_beat"]["leads"]
        beat = {lead: np.array(samples) for lead, samples in beat.items()}
        np.testing.assert_allclose(beat["I"] + beat["III"], beat["II"], atol=1e-12)
        np.testing.assert_allclose(beat["aVR"] + beat["aVL"] + beat["aVF"], 0.0, atol=1e-12)


@pytest.mark.parametrize("pair", ["raised", "inferior"])
def test_swapped_recordings_have_exactly_the_opposite_changes(request, pair):
    one_way = request.getfixturevalue(pair)
    swapped = compare(one_way.later.recording, one_way.earlier.recording)
    for lead, result in one_way.leads.items():
        for name, m in result.measures.items():
            other = swapped.leads[lead].measures[name]
            assert (other.earlier, other.later) == (m.later, m.earlier)
            assert other.change == (None if m.change is None else -m.change)
            assert other.noise_high == pytest.approx(m.noise_high)


def test_the_same_input_gives_the_same_result(raised):
    again = compare(raised.earlier.recording, raised.later.recording)
    one, other = ({**c.to_dict(), "made_at": None} for c in (raised, again))
    assert json.dumps(one) == json.dumps(other)


def test_settings_are_told(steady):
    settings = replace(Settings(), st_point_ms=80.0, seed=5)
    comparison = compare(steady.earlier.recording, steady.later.recording, settings)
    told = comparison.to_dict()["settings"]
    assert (told["st_point_ms"], told["seed"]) == (80.0, 5)
    assert told["spread_mm"] == {"left": 22.0, "up": 22.0}


@pytest.mark.parametrize(
    ("spoil", "reason"),
    [(np.zeros_like, "flat"), (lambda x: np.full_like(x, np.nan), "samples missing")],
)
def test_a_lead_without_a_tracing_is_not_judged_and_the_rest_is(spoil, reason):
    recording = synthetic().recording
    signal = recording.signal_mv.copy()
    signal[:, 8] = spoil(signal[:, 8])
    comparison = compare(recording, recording.with_signal(signal, name="spoiled"))
    lead = comparison.leads["V3"]
    assert (lead.judgement, reason in lead.reason) == ("not-judged", True)
    assert comparison.placement.electrodes["V3"] is None
    assert all(m.change is None for m in lead.measures.values())
    others = {comparison.leads[other].judgement for other in CHEST_LEADS if other != "V3"}
    assert others == {"steady"}
    assert "leads-unusable" in [notice.code for notice in comparison.notices]


def test_progress_rises_from_nothing_to_all(steady):
    shares = []
    compare(
        steady.earlier.recording,
        steady.later.recording,
        report_progress=lambda share, words: shares.append((share, words)),
    )
    values = [share for share, _ in shares]
    assert (values[0], values[-1]) == (0.0, 1.0)
    assert values == sorted(values)
    # Never more than a fifth at once, but for rounding: whoever waits sees that it goes on.
    assert max(np.diff(values)) < 0.2001
    assert all(words for _, words in shares)


@pytest.mark.parametrize("after", [0, 3])
def test_it_stops_when_asked(steady, after):
    asked = []

    def should_stop() -> bool:
        asked.append(True)
        return len(asked) > after

    with pytest.raises(Stopped):
        compare(steady.earlier.recording, steady.later.recording, should_stop=should_stop)
    assert len(asked) == after + 1
