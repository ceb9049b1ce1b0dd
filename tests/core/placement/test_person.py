"""The ensemble weighed by a person, and kriging of a displaced electrode."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.stats import binomtest

from core.placement.moved import ventricular_beat_mv
from core.placement.person import MODEL_NOISE, shift_electrode, weigh_ensemble
from core.torso.ensemble import load_ensemble

ALL = np.ones(8, dtype=bool)


@pytest.fixture(scope="module")
def beat(request) -> np.ndarray:
    return ventricular_beat_mv(request.getfixturevalue("steady").earlier)


@pytest.fixture(scope="module")
def person(beat):
    return weigh_ensemble(load_ensemble(), [beat], ALL)


def test_the_weights_are_shares(person):
    assert person.weights.sum() == pytest.approx(1.0)
    assert (person.weights > 0).all()


@pytest.mark.parametrize("factor", [0.1, 3.0, -1.0])
def test_a_gain_or_a_sign_changes_no_weight(person, beat, factor):
    other = weigh_ensemble(load_ensemble(), [factor * beat], ALL)
    np.testing.assert_allclose(other.weights, person.weights, rtol=1e-9)


def test_the_evidence_prefers_the_variant_that_made_the_leads():
    """Sources drawn from one variant's own prior: it gains weight far over its one in 48."""
    ensemble = load_ensemble()
    rng = np.random.default_rng(4)
    ranks = []
    for made_by in rng.choice(ensemble.n_variants, 12, replace=False):
        left, up = ensemble.sites_mm[made_by].T
        chest = ensemble.chest_factors(int(made_by), left, up)
        factors = np.concatenate([ensemble.limb[made_by], chest])
        leads = factors @ rng.normal(size=(factors.shape[1], 400))
        leads += MODEL_NOISE * np.sqrt(np.mean(leads**2)) * rng.normal(size=leads.shape)
        weighed = weigh_ensemble(ensemble, [leads], ALL)
        best = max(weighed.variants, key=lambda variant: variant.weight)
        # The same trunk, or one whose field is nearly the same.
        ranks.append(
            next((v.weight for v in weighed.variants if v.index == made_by), 0.0) / best.weight
        )
    assert np.median(ranks) > 0.5


@pytest.mark.parametrize("electrode", range(6))
def test_no_displacement_is_exactly_no_change(person, electrode):
    zero = np.zeros(1)
    for variant in person.variants:
        shift = shift_electrode(person, variant, electrode, left_mm=zero, up_mm=zero)
        assert (shift.gain == 0).all()
        assert shift.variance[0] < 1e-12


def test_a_lead_that_cannot_be_used_has_no_say(beat):
    usable = ALL.copy()
    usable[3] = False
    spoiled = beat.copy()
    spoiled[3] = 7.0
    one, other = (weigh_ensemble(load_ensemble(), [b], usable) for b in (beat, spoiled))
    np.testing.assert_array_equal(one.weights, other.weights)
    shift = shift_electrode(
        one, one.variants[0], 2, left_mm=np.array([20.0]), up_mm=np.array([30.0])
    )
    assert shift.gain[0, 3] == 0.0


def test_the_stated_variance_holds_the_truth():
    """Sources from a variant's prior, foretold by kriging: 95 % ranges hold 95 %."""
    ensemble = load_ensemble()
    rng = np.random.default_rng(6)
    trials, held, index = 600, 0, 20
    left, up = ensemble.sites_mm[index].T
    chest = ensemble.chest_factors(index, left, up)
    factors = np.concatenate([ensemble.limb[index].astype(float), chest])
    size = np.sqrt(np.sum(factors**2) / 8)
    person = weigh_ensemble(ensemble, [factors @ rng.normal(size=(factors.shape[1], 400))], ALL)
    variant = next(v for v in person.variants if v.index == index)
    for _ in range(trials):
        electrode = int(rng.integers(6))
        moved = rng.normal(0, 30, 2)
        site = ensemble.sites_mm[index][electrode] + moved
        at_new = ensemble.chest_factors(index, site[:1], site[1:])[0]
        source = rng.normal(size=factors.shape[1]) / size
        # What no variant carries is noise of the leads and the lead's own part that it leaves.
        leads = factors @ source + MODEL_NOISE * rng.normal(size=8)
        shift = shift_electrode(person, variant, electrode, left_mm=moved[:1], up_mm=moved[1:])
        truth = (at_new - chest[electrode]) @ source
        error = truth - shift.gain[0] @ leads
        held += abs(error) <= 1.96 * np.sqrt(shift.variance[0])
    # The own part is counted in the variance but not drawn here, so more than 95 % are held.
    low = binomtest(held, trials).proportion_ci(0.999).low
    assert held / trials > 0.94
    assert low > 0.90
