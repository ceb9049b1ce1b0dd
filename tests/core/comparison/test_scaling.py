"""All leads twice as large: everything that is a voltage is twice as large."""

from __future__ import annotations

from dataclasses import replace

import pytest

from core import Settings, compare
from core.recordings.leads import TWELVE_LEADS
from core.settings import RepeatFloor

# A power of two, so that no rounding is in the way.
GAIN = 2.0
# R and S have a least size in mV, below which they are no waves.
LEVELS = ("j_mv", "st_mv", "st_slope_mv_per_s", "t_mv", "qrs_net_mv_ms")


def larger(recording):
    return recording.with_signal(GAIN * recording.signal_mv, name=recording.source.name)


@pytest.fixture(scope="module")
def both(raised):
    """As recorded and larger, without the part of the repeat noise that is fixed in mV."""
    shares = {
        name: RepeatFloor(0.0, floor.share) for name, floor in Settings().repeat_floor.items()
    }
    settings = replace(Settings(), repeat_floor=shares)
    pair = raised.earlier.recording, raised.later.recording
    return compare(*pair, settings), compare(*map(larger, pair), settings)


@pytest.mark.parametrize("name", LEVELS)
def test_changes_noise_and_reach_scale_with_the_leads(both, name):
    for lead in TWELVE_LEADS:
        one, other = (comparison.leads[lead].measures[name] for comparison in both)
        for number in ("earlier", "later", "change", "noise_high", "reach_low", "reach_high"):
            # The reach sums over eight leads, which an optimised product may round otherwise.
            assert getattr(other, number) == pytest.approx(
                GAIN * getattr(one, number), rel=1e-9, abs=1e-12
            )


@pytest.mark.parametrize("name", ["r_mv", "s_mv"])
def test_waves_scale_where_they_are_waves_in_both(both, name):
    seen = 0
    for lead in TWELVE_LEADS:
        one, other = (comparison.leads[lead].measures[name].change for comparison in both)
        if None not in (one, other):
            assert other == pytest.approx(GAIN * one, rel=1e-9, abs=1e-12)
            seen += 1
    assert seen > 6


def test_the_judgement_does_not_depend_on_the_calibration(both):
    one, other = (
        {lead: result.judgement for lead, result in comparison.leads.items()} for comparison in both
    )
    assert one == other
