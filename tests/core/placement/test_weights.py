"""The weights of the ensemble's variants, against their definition."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from core.placement.person import MODEL_NOISE, SMALLEST_SHARE, TEMPER, Person, weigh_ensemble
from core.torso.ensemble import load_ensemble
from tests.core.placement.somebody import weighed

ALL = np.ones(8, dtype=bool)


def assert_same(one: Person, other: Person) -> None:
    assert [v.index for v in one.variants] == [v.index for v in other.variants]
    # Rounding of the evidence, raised by the temper and an exponential.
    np.testing.assert_allclose(one.weights, other.weights, rtol=1e-9)


def test_they_are_the_tempered_evidence_worked_out_another_way(in_place):
    """Leads whitened by a Cholesky factor, the scale at its best their mean square."""
    ensemble, beat = load_ensemble(), in_place.beat_mv
    evidence = []
    for index in range(ensemble.n_variants):
        left, up = ensemble.sites_mm[index].T
        factors = np.concatenate([ensemble.limb[index], ensemble.chest_factors(index, left, up)])
        factors = factors * np.sqrt(8 / np.sum(factors.astype(float) ** 2))
        covariance = factors @ factors.T + MODEL_NOISE**2 * np.eye(8)
        whitened = np.linalg.solve(np.linalg.cholesky(covariance), beat)
        evidence.append(-0.5 * np.linalg.slogdet(np.mean(whitened**2) * covariance)[1])
    weights = np.exp(TEMPER * (np.array(evidence) - max(evidence)))
    kept = np.flatnonzero(weights >= SMALLEST_SHARE)
    assert [variant.index for variant in in_place.person.variants] == kept.tolist()
    # The stored factors are single precision.
    np.testing.assert_allclose(
        in_place.person.weights, weights[kept] / weights[kept].sum(), rtol=1e-5
    )


@settings(max_examples=25, deadline=None, derandomize=True)
@given(gain=st.floats(0.01, 100.0), other=st.floats(0.01, 100.0))
def test_the_gain_of_either_recording_changes_nothing(cedar, gain, other):
    beat = cedar.beat_mv
    second = beat[:, ::-1] + 0.1 * beat[::-1]  # another tracing of the same size
    plain = weigh_ensemble(load_ensemble(), [beat, second], ALL)
    assert_same(weigh_ensemble(load_ensemble(), [gain * beat, other * second], ALL), plain)


def test_both_recordings_have_a_say(cedar, real_recording):
    other = weighed(real_recording).beat_mv
    both = weigh_ensemble(load_ensemble(), [cedar.beat_mv, other], ALL)
    turned = weigh_ensemble(load_ensemble(), [other, cedar.beat_mv], ALL)
    assert_same(both, turned)
    assert [v.index for v in both.variants] != [v.index for v in cedar.person.variants]


def test_a_lead_turned_over_changes_the_weights(cedar):
    turned = cedar.beat_mv.copy()
    turned[3] *= -1.0
    person = weigh_ensemble(load_ensemble(), [turned], ALL)
    assert [v.index for v in person.variants] != [v.index for v in cedar.person.variants]


@pytest.mark.parametrize("row", range(8))
def test_a_lead_that_cannot_be_used_says_nothing(cedar, row):
    usable = ALL.copy()
    usable[row] = False
    spoilt = cedar.beat_mv.copy()
    spoilt[row] = 50.0 * np.random.default_rng(row).normal(size=spoilt.shape[1])
    plain, other = (
        weigh_ensemble(load_ensemble(), [beat], usable) for beat in (cedar.beat_mv, spoilt)
    )
    assert_same(plain, other)
    for variant in plain.variants:
        assert (variant.factors[row] == 0).all()
        # The usable leads' mean prior variance is the unit of every scale.
        assert np.sum(variant.factors**2) == pytest.approx(7.0)
        assert (variant.to_gain[:, row] == 0).all()
        assert plain.source_scale(variant, spoilt) == pytest.approx(
            plain.source_scale(variant, cedar.beat_mv), rel=1e-12
        )


def test_leads_of_a_known_scale_have_that_scale():
    rng, n = np.random.default_rng(2), 4000
    person = weigh_ensemble(load_ensemble(), [rng.normal(size=(8, 40))], ALL)
    variant = person.variants[0]
    leads = variant.factors @ rng.normal(size=(variant.factors.shape[1], n))
    leads = 0.7 * (leads + MODEL_NOISE * rng.normal(size=leads.shape))
    # A root of 8 n squares scatters by 1 / sqrt(16 n); four of these.
    assert person.source_scale(variant, leads) == pytest.approx(0.7, rel=4 / np.sqrt(16 * n))
