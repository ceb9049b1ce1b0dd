"""Between the nodes of the shipped chart."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from core.placement.moved import FARTHEST_MM
from core.torso.ensemble import load_ensemble

VARIANTS = (0, 20, 47)


@pytest.fixture(scope="module")
def ensemble():
    return load_ensemble()


def at_nodes(ensemble, variant) -> np.ndarray:
    left, up = np.meshgrid(ensemble.left_mm, ensemble.up_mm)
    return ensemble.chest_factors(variant, left.ravel(), up.ravel()).reshape(*left.shape, -1)


@pytest.mark.parametrize("variant", VARIANTS)
def test_every_inner_node_is_hit(ensemble, variant):
    found, stored = at_nodes(ensemble, variant), ensemble.chart[variant]
    np.testing.assert_array_equal(found[1:-1, 1:-1], stored[1:-1, 1:-1])


@pytest.mark.parametrize("variant", VARIANTS)
def test_every_border_node_is_hit(ensemble, variant):
    np.testing.assert_allclose(at_nodes(ensemble, variant), ensemble.chart[variant], atol=1e-6)


def test_a_parabola_is_kept_up_to_the_border(ensemble):
    """Keys 1981: a border node's missing neighbour is taken from the parabola through three."""
    left, up = np.meshgrid(ensemble.left_mm / 100, ensemble.up_mm / 100)
    made = replace(ensemble, chart=(left**2 - 0.5 * left * up - up**2)[None, ..., None])
    first, last = ensemble.left_mm[[0, -1]]
    bottom, top = ensemble.up_mm[[0, -1]]
    at_left = np.array([first + 3.0, last - 4.0, 10.0, 10.0, last - 7.0])
    at_up = np.array([0.0, 0.0, bottom + 6.0, top - 2.0, top - 1.0])
    x, y = at_left / 100, at_up / 100
    found = made.chest_factors(0, at_left, at_up)[:, 0]
    np.testing.assert_allclose(found, x**2 - 0.5 * x * y - y**2, atol=1e-9)


@pytest.mark.parametrize("variant", VARIANTS)
def test_it_is_smooth_where_cells_meet(ensemble, variant):
    """Value and slope are the same from both sides of a node."""
    nodes_left, nodes_up = ensemble.left_mm[2:-2], np.full(ensemble.left_mm.size - 4, 7.0)
    step = 1e-3
    before, here, after = (
        ensemble.chest_factors(variant, nodes_left + way, nodes_up) for way in (-step, 0, step)
    )
    slope = np.abs(after - before).max() / (2 * step)
    # Of a function with a continuous slope, second differences vanish faster than the step:
    # a kink would leave the slope's own size times the step.
    assert np.abs(after - 2 * here + before).max() < 1e-3 * slope * step


def test_left_and_up_are_not_mistaken_for_each_other(ensemble):
    """Along a row of nodes only the row's own nodes count, and so along a column."""
    row, column = 10, 20
    chart = ensemble.chart[0]
    between = ensemble.left_mm[[column]] + 5.0
    found = ensemble.chest_factors(0, between, ensemble.up_mm[[row]])[0]
    around = chart[row, column - 1 : column + 3]
    # Half-way, cubic convolution weighs its four nodes -1, 9, 9, -1 sixteenths (Keys 1981).
    np.testing.assert_allclose(found, np.array([-1, 9, 9, -1]) / 16 @ around, atol=1e-6)


def test_every_permitted_move_of_every_electrode_stays_on_the_chart(ensemble):
    sites = ensemble.sites_mm
    assert (sites[..., 0] - FARTHEST_MM >= ensemble.left_mm[0]).all()
    assert (sites[..., 0] + FARTHEST_MM <= ensemble.left_mm[-1]).all()
    assert (sites[..., 1] - FARTHEST_MM >= ensemble.up_mm[0]).all()
    assert (sites[..., 1] + FARTHEST_MM <= ensemble.up_mm[-1]).all()
