"""Solid angles against closed forms."""

from __future__ import annotations

import numpy as np
import pytest

from core.torso.boundary_elements import point_weights
from core.torso.solid_angle import linear_solid_angles, solid_angles
from core.torso.surfaces import icosphere

OCTANT = np.array([[[1.0, 0, 0], [0, 1, 0], [0, 0, 1]]])
SQUARE = np.array([[[-1.0, -1, 1], [1, -1, 1], [1, 1, 1]], [[-1.0, -1, 1], [1, 1, 1], [-1, 1, 1]]])


@pytest.mark.parametrize(
    ("observer", "corners", "angle"),
    [
        # Worked out from the definitions; six decimals are stated.
        ((0, 0, 0), OCTANT, np.pi / 2),
        ((0.1, 0.1, 0.1), OCTANT, 2.352334),
        ((0, 0, 0), SQUARE, 2 * np.pi / 3),
    ],
)
def test_a_plane_figure(observer, corners, angle):
    found = solid_angles(np.array([observer], dtype=float), corners).sum()
    assert abs(found) == pytest.approx(angle, abs=5e-7)


@pytest.mark.parametrize(("distance", "angle"), [(0.0, 4 * np.pi), (0.6, 4 * np.pi), (1.7, 0.0)])
def test_a_closed_surface_is_seen_whole_from_inside_and_not_at_all_from_outside(distance, angle):
    sphere = icosphere(4)
    observer = distance * np.array([[0.36, -0.48, 0.8]])
    assert solid_angles(observer, sphere.corners_m).sum() == pytest.approx(angle, abs=1e-9)


def test_the_sign_says_which_side_of_a_triangle_is_seen():
    towards = np.array([[3.0, 3.0, 3.0]])
    assert solid_angles(np.zeros((1, 3)), OCTANT)[0, 0] > 0  # its back
    assert solid_angles(towards, OCTANT)[0, 0] < 0


def test_a_closed_surface_is_half_seen_from_a_point_on_it():
    """The middle of a flat triangle is a smooth point; its own triangle is seen edge on."""
    sphere = icosphere(3)
    middles = sphere.corners_m.mean(axis=1)
    angles = solid_angles(middles, sphere.corners_m)
    np.fill_diagonal(angles, 0.0)
    np.testing.assert_allclose(angles.sum(axis=1), 2 * np.pi, atol=1e-9)


@pytest.mark.parametrize("near", [0.1, 1e-3, 1e-6])
def test_a_triangle_close_by_fills_half_of_all_that_is_seen(near):
    """Of a tetrahedron seen from within, one face from close by: more than pi, up to 2 pi."""
    faces = np.array([[0, 1, 2], [0, 2, 3], [0, 3, 1], [3, 2, 1]])
    corners = np.array([[0.0, 0, 0], [0, 1, 0], [1, 0, 0], [0, 0, 1]])[faces]
    inside = corners[3].mean(axis=0) - near / np.sqrt(3)
    angles = solid_angles(inside[None], corners)[0]
    assert angles.sum() == pytest.approx(4 * np.pi, abs=1e-9)
    assert np.pi < angles[3] < 2 * np.pi
    # The other three faces are left with what a disc as wide as the face lets pass.
    assert 2 * np.pi - angles[3] < 2 * np.pi * near / 0.4


def test_every_row_of_a_surface_on_itself_sums_to_a_half_space():
    sphere = icosphere(3)
    rows = point_weights(sphere.points_m, sphere, own=True).sum(axis=1)
    np.testing.assert_allclose(rows, 2 * np.pi, rtol=1e-12)


def test_corner_weights_integrate_a_linear_function_as_many_small_triangles_do():
    """A second, slower way: the triangle cut into 4096, the function at each one's middle."""
    rng = np.random.default_rng(8)
    corners, at_corners = rng.normal(size=(3, 3)), rng.normal(size=3)
    observer = np.array([[2.0, 1.5, -1.0]])
    weights = linear_solid_angles(observer, corners[None])[0, 0]

    n = 64
    i, j = np.meshgrid(np.arange(n), np.arange(n), indexing="ij")
    up = [(i, j), (i + 1, j), (i, j + 1)]
    down = [(i + 1, j), (i + 1, j + 1), (i, j + 1)]
    pieces = []
    for shape, inside in ((up, i + j < n), (down, i + j < n - 1)):
        shares = [np.stack([n - a - b, a, b], axis=-1)[inside] / n for a, b in shape]
        pieces.append(np.stack(shares, axis=1))
    shares = np.concatenate(pieces)
    angles = solid_angles(observer, shares @ corners)[0]
    slow = float((shares.mean(axis=1) @ at_corners * angles).sum())
    # The midpoint rule's error falls with the square of the pieces' size: 1/4096 of the value.
    assert float(weights @ at_corners) == pytest.approx(slow, abs=3e-4 * np.abs(angles).sum())


def test_moving_and_turning_everything_changes_nothing():
    rng = np.random.default_rng(1)
    turn, _ = np.linalg.qr(rng.normal(size=(3, 3)))
    turn *= np.sign(np.linalg.det(turn))
    corners, observers = rng.normal(size=(5, 3, 3)), rng.normal(size=(4, 3))
    moved = rng.normal(size=3)
    np.testing.assert_allclose(
        linear_solid_angles(observers @ turn.T + moved, corners @ turn.T + moved),
        linear_solid_angles(observers, corners),
        atol=1e-9,
    )
