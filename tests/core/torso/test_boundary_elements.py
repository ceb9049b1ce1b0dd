"""The solver against the closed form, and its convergence."""

from __future__ import annotations

from functools import lru_cache

import numpy as np
import pytest

from core.errors import ModelError
from core.torso.boundary_elements import BodySolver, Region
from core.torso.sphere import sphere_surface_potential
from core.torso.surfaces import Surface, icosphere

RADIUS_M, CONDUCTIVITY = 0.10, 0.2


def ball(radius_m: float, frequency: int) -> Surface:
    sphere = icosphere(frequency)
    surface = Surface(radius_m * sphere.points_m, sphere.triangles)
    return surface.scaled_to_volume(4 / 3 * np.pi * radius_m**3)


@lru_cache(maxsize=8)
def solver_of_ball(frequency: int) -> BodySolver:
    return BodySolver([Region(ball(RADIUS_M, frequency), CONDUCTIVITY, 0.0)])


def relative_error(frequency: int, eccentricity: float, moment) -> float:
    """Root mean square error over the surface's points, as a share of the potential's."""
    # Off every axis of the mesh, which would flatter it.
    direction = np.array([0.36, -0.48, 0.8])
    at = eccentricity * RADIUS_M * direction
    solved = solver_of_ball(frequency).skin_potential(at[None]) @ moment
    exact = sphere_surface_potential(
        RADIUS_M * icosphere(frequency).points_m,
        at,
        moment,
        radius_m=RADIUS_M,
        conductivity_s_per_m=CONDUCTIVITY,
    )
    exact = exact - exact.mean()
    return float(np.linalg.norm(solved - exact) / np.linalg.norm(exact))


RADIAL = 1e-5 * np.array([0.36, -0.48, 0.8])
TANGENTIAL = 1e-5 * np.array([0.8, 0.6, 0.0])


@pytest.mark.parametrize("eccentricity", [0.25, 0.50, 0.75])
@pytest.mark.parametrize("moment", [RADIAL, TANGENTIAL], ids=["radial", "tangential"])
def test_the_sphere_is_solved_to_one_per_cent_with_812_points(eccentricity, moment):
    assert icosphere(9).points_m.shape[0] == 812
    assert relative_error(9, eccentricity, moment) < 0.01


@pytest.mark.parametrize("moment", [RADIAL, TANGENTIAL], ids=["radial", "tangential"])
def test_the_error_falls_as_the_mesh_is_refined(moment):
    frequencies = np.array([3, 6, 9])
    errors = [relative_error(int(f), 0.5, moment) for f in frequencies]
    order = -np.diff(np.log(errors)) / np.diff(np.log(frequencies))
    # Collocation on linear triangles converges at least linearly (de Munck 1992 finds more).
    assert (order > 1.0).all()


def test_two_dipoles_add_up():
    solver = BodySolver([Region(ball(RADIUS_M, 4), CONDUCTIVITY, 0.0)])
    one, other = np.array([[0.02, 0.0, 0.01]]), np.array([[0.0, -0.03, 0.0]])
    both = solver.skin_potential(np.concatenate([one, other]))
    np.testing.assert_allclose(both[:, :3], solver.skin_potential(one))
    np.testing.assert_allclose(both[:, 3:], solver.skin_potential(other))


def test_the_mean_over_the_skin_is_zero():
    solver = BodySolver([Region(ball(RADIUS_M, 5), CONDUCTIVITY, 0.0)])
    potential = solver.skin_potential(np.array([[0.03, 0.02, 0.0]]))
    # Not to rounding: the right side is compatible only as far as the mesh is a sphere.
    assert np.abs(potential.mean(axis=0)).max() < 1e-4 * np.abs(potential).max()


def test_an_inner_region_of_the_same_conductivity_is_not_there():
    skin, inner = ball(RADIUS_M, 6), ball(0.04, 4)
    shifted = Surface(inner.points_m + np.array([0.03, 0.0, 0.0]), inner.triangles)
    dipole = np.array([[-0.03, 0.01, 0.02]])
    plain = BodySolver([Region(skin, 0.2, 0.0)]).skin_potential(dipole)
    with_inner = BodySolver([Region(skin, 0.2, 0.0), Region(shifted, 0.2, 0.2)]).skin_potential(
        dipole
    )
    np.testing.assert_allclose(with_inner, plain, rtol=1e-9, atol=1e-9 * np.abs(plain).max())


def shell_potential(cosine, *, inner_m, inside, outside) -> np.ndarray:
    """A centred dipole of 1 A m in a ball inside a shell: only the first Legendre term lives.

    Inside: (1 / (4 pi s1)) cos / r^2 + A r cos; in the shell: (B r + C / r^2) cos, with the
    potential and the current across the inner surface continuous and none leaving the outer.
    """
    a, b = inner_m, RADIUS_M
    source = 1.0 / (4 * np.pi * inside)
    # Unknowns A, B, C.
    matrix = np.array(
        [
            [a, -a, -1 / a**2],
            [inside, -outside, 2 * outside / a**3],
            [0.0, 1.0, -2 / b**3],
        ]
    )
    right = np.array([-source / a**2, 2 * inside * source / a**3, 0.0])
    _, slope, pole = np.linalg.solve(matrix, right)
    return (slope * b + pole / b**2) * cosine


@pytest.mark.parametrize("inside", [0.05, 0.6])
def test_a_ball_in_a_shell_of_another_conductivity(inside):
    skin, inner = ball(RADIUS_M, 7), ball(0.05, 5)
    solver = BodySolver([Region(skin, 0.2, 0.0), Region(inner, inside, 0.2)])
    axis = np.array([0.36, -0.48, 0.8])
    # The solver's sources lie outside inner regions, so the dipole's field there is scaled by
    # the medium that it is in: unit dipoles times conductivity are the same in both.
    solved = solver.skin_potential(np.array([[0.0, 0.0, 0.0]])) @ axis
    cosine = icosphere(7).points_m @ axis
    exact = shell_potential(cosine, inner_m=0.05, inside=inside, outside=0.2)
    error = np.linalg.norm(solved - exact) / np.linalg.norm(exact)
    assert error < 0.01  # as asked of the plain sphere


def test_an_open_surface_is_refused():
    sphere = icosphere(2)
    broken = Surface(sphere.points_m, sphere.triangles[1:])
    with pytest.raises(ModelError, match="open"):
        BodySolver([Region(broken, 0.2, 0.0)])


def test_a_surface_turned_inside_out_is_refused():
    sphere = icosphere(2)
    with pytest.raises(ModelError, match="inside out"):
        BodySolver([Region(Surface(sphere.points_m, sphere.triangles[:, ::-1]), 0.2, 0.0)])
