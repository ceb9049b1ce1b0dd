"""Foretelling a displaced electrode, against sources drawn from the prior it assumes."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.stats import binomtest, chi2

from core.placement.person import MODEL_NOISE, OWN_PART_LENGTH_MM, shift_electrode
from tests.core.placement.one_variant import one_variant

N = 4000
# Variant, electrode, left and up in mm.
MOVES = [(0, 1, 0, 40), (17, 2, 25, -20), (40, 5, -55, 0), (29, 0, 0, 58), (8, 3, 30, 0)]


def shift(someone, electrode, left_mm, up_mm):
    return shift_electrode(
        someone.person,
        someone.variant,
        electrode,
        left_mm=np.array([left_mm], dtype=float),
        up_mm=np.array([up_mm], dtype=float),
    )


@pytest.mark.parametrize(("index", "electrode", "left_mm", "up_mm"), MOVES)
def test_the_stated_variance_is_that_of_the_error(index, electrode, left_mm, up_mm):
    """The truth is drawn, not foretold: sources times factors at both sites, and an own part."""
    someone = one_variant(index, seed=electrode)
    sources, leads = someone.leads(N)
    found = shift(someone, electrode, left_mm, up_mm)
    error = someone.change(sources, electrode, left_mm, up_mm) - found.gain[0] @ leads
    error /= np.sqrt(found.variance[0])
    # The errors are normal: 3.29 standard deviations, 1 in 1000, of a sum of squares...
    low, high = chi2.ppf([5e-4, 1 - 5e-4], N)
    assert low < np.sum(error**2) < high
    # ... and of a count.
    held = binomtest(int(np.sum(np.abs(error) < 1.959964)), N).proportion_ci(0.999)
    assert held.low < 0.95 < held.high


@pytest.mark.parametrize(("index", "electrode", "left_mm", "up_mm"), MOVES)
def test_no_other_weights_foretell_better(index, electrode, left_mm, up_mm):
    """Least squares over many drawn hearts finds the same gain: a second way."""
    someone = one_variant(index, seed=20 + electrode)
    sources, leads = someone.leads(N)
    truth = someone.change(sources, electrode, left_mm, up_mm)
    fitted = np.linalg.lstsq(leads.T, truth, rcond=None)[0]
    found = shift(someone, electrode, left_mm, up_mm)
    off = fitted - found.gain[0]
    # A fit's error has covariance variance x (leads leads')^-1: a chi-square of 8.
    assert off @ (leads @ leads.T) @ off / found.variance[0] < chi2.ppf(0.999, 8)


def test_an_own_part_that_is_a_field_leaves_the_variance_cautious():
    """The own part may also be a random field that the noise of the leads is a sample of."""
    for index, electrode, left_mm, up_mm in MOVES:
        someone = one_variant(index, seed=40 + electrode)
        sources, leads = someone.leads(N)
        quiet = someone.variant.factors @ sources
        noise = leads[2 + electrode] - quiet[2 + electrode]
        likeness = np.exp(-0.5 * (left_mm**2 + up_mm**2) / OWN_PART_LENGTH_MM**2)
        fresh = MODEL_NOISE * np.sqrt(1 - likeness**2) * someone.rng.normal(size=N)
        own = (likeness - 1) * noise + fresh
        truth = someone.field_change(sources, electrode, left_mm, up_mm) + own
        found = shift(someone, electrode, left_mm, up_mm)
        error = (truth - found.gain[0] @ leads) / np.sqrt(found.variance[0])
        assert np.sum(error**2) < chi2.ppf(0.999, N)


@pytest.mark.parametrize("electrode", range(6))
def test_no_displacement_is_exactly_no_change_and_no_doubt(in_place, electrode):
    zero = np.zeros(1)
    for variant in in_place.person.variants:
        found = shift_electrode(in_place.person, variant, electrode, left_mm=zero, up_mm=zero)
        assert (found.gain == 0.0).all()
        assert found.variance[0] == 0.0


def test_many_displacements_at_once_are_each_what_they_are_alone(cedar):
    rng = np.random.default_rng(3)
    left, up = rng.uniform(-80, 80, (2, 12))
    variant = cedar.person.variants[0]
    together = shift_electrode(cedar.person, variant, 3, left_mm=left, up_mm=up)
    for row in range(left.size):
        alone = shift_electrode(cedar.person, variant, 3, left_mm=left[[row]], up_mm=up[[row]])
        # Sums may be taken in another order.
        np.testing.assert_allclose(together.gain[row], alone.gain[0], atol=1e-12)
        assert together.variance[row] == pytest.approx(alone.variance[0], rel=1e-9)


def test_doubt_grows_with_the_way_near_the_site(cedar):
    way = np.arange(0.0, 41.0, 5.0)
    for variant in cedar.person.variants[:5]:
        found = shift_electrode(cedar.person, variant, 1, left_mm=0 * way, up_mm=way)
        assert (np.diff(found.variance) > 0).all()
