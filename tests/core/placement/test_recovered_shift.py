"""Simulate, then recover: QRS complexes of drawn hearts, one electrode really moved.

The truth comes from the factors of one variant, not from the gains that the estimate uses.
"""

from __future__ import annotations

import numpy as np
import pytest
from scipy.stats import binomtest

from core import Settings, Spread
from core.placement.estimate import EFFECTIVE_SAMPLES, ShiftPosterior, estimate_shifts
from core.recordings.leads import CHEST_LEADS
from tests.core.placement.one_variant import OneVariant, one_variant

TRIALS = 200
V2, UP_MM = 1, 40.0


def recovered(someone: OneVariant, left_mm: float, up_mm: float) -> ShiftPosterior:
    """Posterior of V2's shift between two days."""
    # As many independent samples as the estimate counts a QRS for.
    sources, earlier = someone.leads(int(EFFECTIVE_SAMPLES))
    later = earlier.copy()
    later[2 + V2] += someone.change(sources, V2, left_mm, up_mm) if left_mm or up_mm else 0.0
    later += someone.repeat(later)
    return estimate_shifts(someone.person, earlier, later, Settings())["V2"]


def holds(posterior: ShiftPosterior, left_mm: float, up_mm: float) -> list[bool]:
    _, low_up, high_up = posterior.range_of(posterior.up_mm, 0.95)
    _, low_left, high_left = posterior.range_of(posterior.left_mm, 0.95)
    return [low_up <= up_mm <= high_up, low_left <= left_mm <= high_left]


@pytest.mark.parametrize("index", [0, 40])
def test_ranges_hold_95_per_cent_of_the_shifts_that_they_are_made_for(index):
    """Drawn from the spread: 22 mm for each of two placements, as the settings' default."""
    someone = one_variant(index, seed=5)
    held = 0
    for _ in range(TRIALS):
        left, up = someone.rng.normal(0.0, 22.0 * np.sqrt(2), 2)
        held += sum(holds(recovered(someone, left, up), left, up))
    counted = binomtest(held, 2 * TRIALS).proportion_ci(0.999)
    assert counted.low < 0.95 < counted.high


def test_v2_raised_by_40_mm_is_found():
    someone = one_variant(17, seed=6)
    held, pointed, estimates = 0, 0, []
    for _ in range(TRIALS):
        posterior = recovered(someone, 0.0, UP_MM)
        held += holds(posterior, 0.0, UP_MM)[0]
        pointed += posterior.points_to_a_shift
        estimates.append(posterior.range_of(posterior.up_mm, 0.95)[0])
    # Of one shift rather than of all that the spread gives, more or less than 95 % may be
    # held; 40 mm are 1.3 of the prior's standard deviations, so it can't be far from it.
    assert binomtest(held, TRIALS).proportion_ci(0.999).high > 0.95
    assert binomtest(pointed, TRIALS).proportion_ci(0.999).high > 0.95
    # The prior of 31 mm pulls estimates towards 0 by the square of their own spread to its.
    spread = np.std(estimates)
    pulled = UP_MM * spread**2 / (2 * 22.0**2)
    # Less than a cell of the estimate's grid, 8 mm.
    assert np.mean(estimates) == pytest.approx(UP_MM - pulled, abs=5.0)


def test_an_electrode_that_stayed_is_not_said_to_have_moved():
    someone = one_variant(40, seed=7)
    pointed = held = 0
    for _ in range(TRIALS):
        posterior = recovered(someone, 0.0, 0.0)
        pointed += posterior.points_to_a_shift
        held += all(holds(posterior, 0.0, 0.0))
    # At most 5 % by what was counted.
    assert binomtest(pointed, TRIALS).proportion_ci(0.999).low < 0.05
    assert pointed <= 0.05 * TRIALS
    assert held >= 0.95 * TRIALS


def test_other_electrodes_are_not_said_to_have_moved_with_it():
    someone = one_variant(0, seed=8)
    pointed = dict.fromkeys(CHEST_LEADS, 0)
    for _ in range(60):
        sources, earlier = someone.leads(int(EFFECTIVE_SAMPLES))
        later = earlier.copy()
        later[2 + V2] += someone.change(sources, V2, 0.0, UP_MM)
        later += someone.repeat(later)
        for name, found in estimate_shifts(someone.person, earlier, later, Settings()).items():
            pointed[name] += found.points_to_a_shift
    assert pointed.pop("V2") > 50
    assert max(pointed.values()) <= 0.05 * 60


def test_an_unusable_lead_tells_nothing_of_the_others():
    usable = np.ones(8, dtype=bool)
    usable[6] = False  # V5
    someone = one_variant(3, seed=9, usable=usable)
    sources, earlier = someone.leads(20)
    earlier = earlier + 0.3
    later = earlier.copy()
    later[3] += someone.field_change(sources, V2, 10.0, 30.0)
    plain = estimate_shifts(someone.person, earlier, later, Settings())
    earlier[6], later[6] = 9.0, someone.rng.normal(size=20)
    spoilt = estimate_shifts(someone.person, earlier, later, Settings())
    for name in CHEST_LEADS:
        if name != "V5":
            np.testing.assert_array_equal(plain[name].probability, spoilt[name].probability)
            assert plain[name].log_support == spoilt[name].log_support


def test_a_limb_lead_that_changed_makes_every_shift_less_sure():
    """No chest shift changes a limb lead: the body did, and may have changed the chest too."""
    someone = one_variant(5, seed=10)
    sources, earlier = someone.leads(20)
    later = earlier.copy()
    later[3] += someone.field_change(sources, V2, 0.0, 30.0)
    calm = estimate_shifts(someone.person, earlier, later, Settings())["V2"]
    later[:2] *= 1.5
    stirred = estimate_shifts(someone.person, earlier, later, Settings())["V2"]
    assert stirred.log_support < calm.log_support
    widths = [np.ptp(one.range_of(one.up_mm, 0.95)[1:]) for one in (calm, stirred)]
    assert widths[1] > widths[0]


def test_a_direction_without_spread_is_not_moved_in():
    someone = one_variant(0, seed=13)
    sources, earlier = someone.leads(20)
    later = earlier.copy()
    later[3] += someone.field_change(sources, V2, 40.0, 40.0)
    for spread, still, free in (
        (Spread(left=0.0, up=22.0), "left_mm", "up_mm"),
        (Spread(left=22.0, up=0.0), "up_mm", "left_mm"),
    ):
        settings = Settings(spread_mm=spread)
        found = estimate_shifts(someone.person, earlier, later, settings)["V2"]
        # A cell of the grid, 8 mm, is as near as it tells.
        assert abs(found.range_of(getattr(found, still), 0.95)[0]) < 8.0
        assert abs(found.range_of(getattr(found, free), 0.95)[0]) > 8.0


def test_the_gain_of_both_tracings_hardly_matters():
    """Only the smallest repeat noise, 10 uV, has a size of its own."""
    someone = one_variant(5, seed=11)
    sources, earlier = someone.leads(20)
    later = earlier.copy()
    later[3] += someone.field_change(sources, V2, 0.0, 30.0)
    one, ten = (
        estimate_shifts(someone.person, k * earlier, k * later, Settings())["V2"] for k in (1, 10)
    )
    up = [posterior.range_of(posterior.up_mm, 0.95) for posterior in (one, ten)]
    np.testing.assert_allclose(up[0], up[1], atol=2.0)  # mm


@pytest.mark.parametrize("confidence", [0.5, 0.8, 0.95])
def test_a_range_holds_its_share_of_the_draws(confidence):
    someone = one_variant(2, seed=12)
    posterior = recovered(someone, 15.0, 35.0)
    n = 20_000
    draws = posterior.draw(n, np.random.default_rng(1))
    for values, direction in (
        (draws.left_mm, posterior.left_mm),
        (draws.up_mm, posterior.up_mm),
    ):
        _, low, high = posterior.range_of(direction, confidence)
        inside = binomtest(int(np.sum((values > low) & (values < high))), n)
        counted = inside.proportion_ci(0.999)
        assert counted.low < confidence < counted.high
