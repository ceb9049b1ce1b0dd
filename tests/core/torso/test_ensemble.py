"""The shipped ensemble: its form, its interpolation, and that the builder still makes it."""

from __future__ import annotations

from dataclasses import replace
from itertools import product

import numpy as np
import pytest

from core.errors import ModelError
from core.torso.build_ensemble import (
    BEHIND_SKIN_M,
    BODIES,
    LEFT_M,
    UP_M,
    build_variant,
    solve_body,
)
from core.torso.ensemble import load_ensemble, read_ensemble, write_ensemble
from core.torso.sources import HeartPlace


@pytest.fixture(scope="module")
def ensemble():
    return load_ensemble()


def test_it_holds_every_trunk_with_every_heart(ensemble):
    n = len(BODIES) * len(LEFT_M) * len(BEHIND_SKIN_M) * len(UP_M)
    assert ensemble.n_variants == n == 48
    assert ensemble.chart.shape[1:3] == (ensemble.up_mm.size, ensemble.left_mm.size)
    assert np.isfinite(ensemble.chart).all()
    assert np.isfinite(ensemble.limb).all()


def test_the_eight_leads_of_a_variant_have_a_mean_variance_of_one(ensemble):
    for variant in range(0, ensemble.n_variants, 7):
        left, up = ensemble.sites_mm[variant].T
        leads = np.concatenate([ensemble.limb[variant], ensemble.chest_factors(variant, left, up)])
        # 16-bit steps of each component's largest value.
        assert np.mean((leads**2).sum(axis=1)) == pytest.approx(1.0, abs=1e-3)


def test_interpolation_hits_the_grid(ensemble):
    row, column = 9, 17
    found = ensemble.chest_factors(3, ensemble.left_mm[[column]], ensemble.up_mm[[row]])
    np.testing.assert_allclose(found[0], ensemble.chart[3, row, column], rtol=1e-6)


def test_interpolation_is_exact_for_parabolas(ensemble):
    """Cubic convolution reproduces polynomials of degree two (Keys 1981)."""
    left, up = np.meshgrid(ensemble.left_mm / 100, ensemble.up_mm / 100)
    parabola = (0.3 + left - 2 * left**2 + 0.5 * up * left + up**2)[None, ..., None]
    made = replace(ensemble, chart=parabola, limb=ensemble.limb[:1])
    at_left, at_up = np.array([13.7, -61.2, 155.5]), np.array([-22.1, 48.9, 3.3])
    x, y = at_left / 100, at_up / 100
    np.testing.assert_allclose(
        made.chest_factors(0, at_left, at_up)[:, 0],
        0.3 + x - 2 * x**2 + 0.5 * y * x + y**2,
        atol=1e-9,
    )


def test_beyond_the_grid_its_border_holds(ensemble):
    far = ensemble.chest_factors(0, np.array([9999.0]), np.array([0.0]))
    border = ensemble.chest_factors(0, ensemble.left_mm[-1:], np.array([0.0]))
    np.testing.assert_array_equal(far, border)


def test_a_written_ensemble_is_read_back_within_half_a_step(ensemble, tmp_path):
    path = tmp_path / "one.npz"
    write_ensemble(path, ensemble)
    again = read_ensemble(path)
    step = np.abs(ensemble.chart).max(axis=(1, 2), keepdims=True) / 32767
    assert (np.abs(again.chart - ensemble.chart) <= 0.51 * step).all()
    np.testing.assert_array_equal(again.limb, ensemble.limb)


@pytest.mark.parametrize(
    ("spoil", "says"),
    [
        (lambda path: path.unlink(), "missing or damaged"),
        (lambda path: path.write_bytes(b"no archive"), "missing or damaged"),
        (lambda path: np.savez(path, form=99), "form 99"),
        (lambda path: np.savez(path, form=1), "missing or damaged"),
    ],
)
def test_a_spoiled_file_is_refused_in_words(ensemble, tmp_path, spoil, says):
    path = tmp_path / "one.npz"
    write_ensemble(path, ensemble)
    spoil(path)
    with pytest.raises(ModelError, match=says):
        read_ensemble(path)


@pytest.mark.slow
def test_the_builder_still_makes_the_shipped_variants(ensemble):
    """The first trunk is solved anew; its last heart is compared with the shipped one."""
    places = [HeartPlace(*at) for at in product(LEFT_M, BEHIND_SKIN_M, UP_M)]
    built = build_variant(solve_body(BODIES[0]), places[-1])
    shipped = len(places) - 1
    # Other linear algebra may turn the components among themselves: covariances are compared.
    sites = ensemble.sites_mm[shipped]
    np.testing.assert_allclose(built.sites_mm[0], sites, atol=1e-9)
    left = np.concatenate([sites[:, 0], np.linspace(-100, 250, 12)])
    up = np.concatenate([sites[:, 1], np.linspace(80, -90, 12)])
    ours, theirs = (
        np.concatenate([one.limb[index], one.chest_factors(index, left, up)])
        for one, index in ((built, 0), (ensemble, shipped))
    )
    # 24 components of 16-bit steps, on a mean variance of 1.
    np.testing.assert_allclose(ours @ ours.T, theirs @ theirs.T, atol=2e-3)
