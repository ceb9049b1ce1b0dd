"""The placement reach."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from core import Settings, Spread
from core.measures.lead_values import COMPARED
from core.measures.repeat_noise import repeat_noise
from core.placement.moved import usable_independent, ventricular_beat_mv
from core.placement.person import weigh_ensemble
from core.placement.reach import draw_shifts, placement_reach
from core.torso.ensemble import load_ensemble


@pytest.fixture(scope="module")
def case(request):
    comparison = request.getfixturevalue("steady")
    first, second = comparison.earlier, comparison.later
    usable = usable_independent(first.quality)
    person = weigh_ensemble(load_ensemble(), [ventricular_beat_mv(first)], usable)
    return person, first, repeat_noise(first, second, Settings())


def reach(case, settings: Settings):
    person, report, noise = case
    return placement_reach(person, report, noise, settings, np.random.default_rng(settings.seed))


def test_the_reach_holds_the_repeat_noise(case):
    noise, found = case[2], reach(case, Settings())
    for name in COMPARED:
        known = ~np.isnan(found.low[name])
        assert (found.low[name] <= -noise[name])[known].all()
        assert (found.high[name] >= noise[name])[known].all()


def test_in_the_limb_leads_it_is_the_repeat_noise(case):
    noise, found = case[2], reach(case, Settings())
    for name in COMPARED:
        np.testing.assert_array_equal(found.high[name][:6], noise[name][:6])
        np.testing.assert_array_equal(found.low[name][:6], -noise[name][:6])


def test_a_wider_spread_reaches_farther(case):
    narrow, usual, wide = (
        reach(case, Settings(spread_mm=Spread(left=mm, up=mm))) for mm in (8.0, 22.0, 40.0)
    )
    for less, more in ((narrow, usual), (usual, wide)):
        widths = [(one.high["t_mv"] - one.low["t_mv"])[6:] for one in (less, more)]
        assert (widths[1] > widths[0]).all()


def test_without_any_spread_it_is_the_repeat_noise(case):
    noise, found = case[2], reach(case, Settings(spread_mm=Spread(left=0.0, up=0.0)))
    # 2.5 % points of 2000 draws scatter by about 7 % (order statistics of a normal sample).
    np.testing.assert_allclose(found.high["t_mv"], noise["t_mv"], rtol=0.2)


def test_the_same_seed_gives_the_same_reach(case):
    one, again = reach(case, Settings()), reach(case, Settings())
    other = reach(case, replace(Settings(), seed=2))
    np.testing.assert_array_equal(one.high["st_mv"], again.high["st_mv"])
    assert not np.array_equal(one.high["t_mv"], other.high["t_mv"])


def test_more_confidence_reaches_farther(case):
    one, more = reach(case, Settings()), reach(case, replace(Settings(), confidence=0.99))
    assert (more.high["t_mv"][6:] > one.high["t_mv"][6:]).all()


def test_shifts_between_two_recordings_have_twice_the_variance_of_one(case):
    draws = draw_shifts(case[0], replace(Settings(), draws=40000), np.random.default_rng(3))
    # The clipping at 100 mm lies beyond three standard deviations; 40,000 draws give the
    # standard deviation to 0.4 %.
    for values in (draws.left_mm, draws.up_mm):
        assert np.std(values) == pytest.approx(22.0 * np.sqrt(2), rel=0.015)
    # Of one placement, 64 % lie within 31.75 mm (Wenger & Kligfield 1996).
    one = np.hypot(draws.left_mm, draws.up_mm) / np.sqrt(2)
    assert np.mean(one <= 31.75) == pytest.approx(0.64, abs=0.015)
