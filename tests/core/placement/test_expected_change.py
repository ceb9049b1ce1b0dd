"""What the estimated shift foretells for ST and T."""

from __future__ import annotations

import numpy as np
import pytest

from core import Settings
from core.measures.lead_values import COMPARED
from core.measures.repeat_noise import repeat_noise
from core.placement.estimate import ShiftPosterior, estimate_shifts
from core.placement.expected import expected_changes, tail_probability
from core.placement.foretell import INDEPENDENT_ROWS
from core.placement.person import shift_electrode
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS

DECIDED_BY = ("j_mv", "st_mv", "t_mv")


def foretold(somebody, shifts, seed=1, **settings):
    settings = Settings(**settings)
    noise = repeat_noise(somebody.report, somebody.report, settings)
    rng = np.random.default_rng(seed)
    return (
        expected_changes(somebody.person, somebody.report, shifts, noise, settings, rng),
        noise,
    )


def certain(somebody, left_mm: float, up_mm: float) -> dict[str, ShiftPosterior]:
    """Every electrode known to have moved by so much, to a cell of the grid."""
    share = np.array([[variant.weight] for variant in somebody.person.variants])
    one = ShiftPosterior(np.array([left_mm]), np.array([up_mm]), share, 5.0)
    return dict.fromkeys(CHEST_LEADS, one)


@pytest.fixture(scope="module")
def unchanged(cedar):
    return foretold(cedar, estimate_shifts(cedar.person, cedar.qrs_mv, cedar.qrs_mv, Settings()))


def test_no_shift_foretells_no_change(unchanged):
    """Not exactly 0: a posterior has a width, and a T wave is no linear thing.

    R and S are left aside: where Q and S are alike, another wave can become the S.
    """
    expected, noise = unchanged
    for name in ("j_mv", "st_mv", "st_slope_mv_per_s", "t_mv", "qrs_net_mv_ms"):
        # A quarter of the repeat noise: nobody could see it.
        assert (np.abs(expected.change[name]) < 0.25 * noise[name]).all(), name


def test_limb_leads_expect_exactly_nothing(cedar):
    expected, _ = foretold(cedar, certain(cedar, 0.0, 50.0))
    for name in COMPARED:
        assert (expected.change[name][:6] == 0.0).all()
        assert (np.abs(expected.change[name][6:]) > 0.0).any()


def test_no_change_is_no_surprise_where_nothing_moved(unchanged):
    expected, _ = unchanged
    nothing = {name: np.zeros(12) for name in COMPARED}
    rows = INDEPENDENT_ROWS
    assert tail_probability(expected, nothing, DECIDED_BY, rows) > 0.95


def test_a_change_of_a_millivolt_everywhere_is_a_surprise(unchanged):
    expected, _ = unchanged
    huge = {name: np.ones(12) for name in COMPARED}
    draws = expected.draws["st_mv"].shape[1]
    found = tail_probability(expected, huge, DECIDED_BY, INDEPENDENT_ROWS)
    assert found == 1 / (1 + draws)  # rarer than any draw, yet not impossible


def test_exactly_the_mean_of_the_draws_has_probability_one(unchanged):
    expected, _ = unchanged
    middle = {name: draws.mean(axis=1) for name, draws in expected.draws.items()}
    assert tail_probability(expected, middle, DECIDED_BY, INDEPENDENT_ROWS) == 1.0


@pytest.mark.parametrize("electrode", [0, 1, 4])
def test_a_shift_that_is_known_foretells_what_it_does(cedar, electrode):
    left, up = 16.0, -24.0
    expected, _ = foretold(cedar, certain(cedar, left, up))
    gains = [
        shift_electrode(
            cedar.person, v, electrode, left_mm=np.array([left]), up_mm=np.array([up])
        ).gain[0]
        for v in cedar.person.variants
    ]
    mean = cedar.person.weights @ np.array(gains)
    lead = CHEST_LEADS[electrode]
    change = mean @ cedar.report.values["st_mv"][INDEPENDENT_ROWS]
    found = expected.change["st_mv"][TWELVE_LEADS.index(lead)]
    # 2000 draws over a cell of 8 mm and over variants: a standard error of under 1 uV.
    assert found == pytest.approx(change, abs=0.004)
    np.testing.assert_allclose(expected.gain[lead], mean, atol=0.05)


def test_draws_scatter_around_the_expected_change(cedar):
    expected, _ = foretold(cedar, certain(cedar, 0.0, 40.0), draws=4000)
    for name in ("st_mv", "t_mv"):
        for row in range(6, 12):
            draws = expected.draws[name][row]
            error = draws.mean() - expected.change[name][row]
            assert abs(error) < 4 * draws.std() / np.sqrt(draws.size)


def test_draws_of_a_limb_lead_are_the_repeat_noise(cedar):
    n = 4000
    expected, noise = foretold(cedar, certain(cedar, 0.0, 40.0), draws=n)
    for name in ("st_mv", "t_mv"):
        share = np.mean(np.abs(expected.draws[name][:6]) < noise[name][:6, None], axis=1)
        # A count of n draws; four standard deviations.
        np.testing.assert_allclose(share, 0.95, atol=4 * np.sqrt(0.95 * 0.05 / n))


def test_chest_draws_hold_more_than_the_repeat_noise(cedar):
    expected, noise = foretold(cedar, certain(cedar, 0.0, 40.0))
    for row in range(6, 12):
        assert expected.draws["st_mv"][row].std() > noise["st_mv"][row] / 1.96


def test_the_same_seed_gives_the_same_draws(cedar):
    shifts = certain(cedar, 8.0, 8.0)
    one, again, other = (foretold(cedar, shifts, seed=seed)[0] for seed in (3, 3, 4))
    np.testing.assert_array_equal(one.draws["t_mv"], again.draws["t_mv"])
    assert not np.array_equal(one.draws["t_mv"], other.draws["t_mv"])
