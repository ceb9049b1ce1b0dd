"""What a volume conductor cannot depend on, and how its potentials scale."""

from __future__ import annotations

import numpy as np
import pytest

from core.torso.boundary_elements import BodySolver, Region
from core.torso.surfaces import Surface, ellipsoid

DIPOLES_M = np.array([[0.010, -0.025, 0.015], [0.000, 0.000, -0.030]])


def solved(turn=None, by=0.0, scale=1.0, conducts=1.0, dipoles_m=DIPOLES_M) -> np.ndarray:
    """Lead field, shape (n_skin, 2, 3), of a lopsided body that was turned, moved and scaled."""
    turn = np.eye(3) if turn is None else turn
    shapes = (
        ellipsoid(np.zeros(3), np.array([0.15, 0.12, 0.20]), 5),
        ellipsoid(np.array([0.08, 0.02, 0.03]), np.array([0.04, 0.06, 0.10]), 4),
    )
    skin, lung = (Surface(scale * s.points_m @ turn.T + by, s.triangles) for s in shapes)
    regions = [
        Region(skin, 0.2 * conducts, 0.0),
        Region(lung, 0.05 * conducts, 0.2 * conducts),
    ]
    field = BodySolver(regions).skin_potential(scale * dipoles_m @ turn.T + by)
    return field.reshape(len(field), -1, 3)


@pytest.fixture(scope="module")
def plain() -> np.ndarray:
    return solved()


# Rounding of some hundred additions in double precision, amplified by the system's condition.
ROUNDING = {"rtol": 1e-7, "atol": 1e-7}


def test_turning_body_and_dipole_together_changes_nothing(plain):
    turn, _ = np.linalg.qr(np.random.default_rng(4).normal(size=(3, 3)))
    turn *= np.sign(np.linalg.det(turn))
    # Columns belong to moments along the axes; a moment turns with the body.
    np.testing.assert_allclose(solved(turn=turn) @ turn, plain, **ROUNDING)


def test_moving_body_and_dipole_together_changes_nothing(plain):
    np.testing.assert_allclose(solved(by=np.array([0.3, -0.2, 1.1])), plain, **ROUNDING)


def test_a_mirrored_dipole_gives_the_mirrored_potential():
    """With the mirrored triangles turned over, so that they face outwards again."""
    mirror = np.diag([-1.0, 1.0, 1.0])
    skin = ellipsoid(np.array([0.01, 0.0, 0.0]), np.array([0.15, 0.12, 0.20]), 5)
    turned = Surface(skin.points_m @ mirror, skin.triangles[:, ::-1])
    one, other = (
        BodySolver([Region(surface, 0.2, 0.0)]).skin_potential(at).reshape(-1, 2, 3)
        for surface, at in ((skin, DIPOLES_M), (turned, DIPOLES_M @ mirror))
    )
    np.testing.assert_allclose(other @ mirror, one, **ROUNDING)


@pytest.mark.parametrize("factor", [0.7, 2.0])
def test_potential_falls_with_the_square_of_the_size(plain, factor):
    np.testing.assert_allclose(solved(scale=factor) * factor**2, plain, **ROUNDING)


def test_potential_falls_with_the_conductivity(plain):
    np.testing.assert_allclose(solved(conducts=3.0) * 3.0, plain, **ROUNDING)


def test_two_opposite_currents_close_together_are_a_dipole(plain):
    """The potential is a smooth function of place: its slope is not noise of the mesh."""
    step = 1e-4
    along = np.array([0.0, 0.0, step])
    ahead, behind = (solved(dipoles_m=DIPOLES_M + way * along) for way in (1, -1))
    curvature = ahead + behind - 2 * plain
    # A field that varies over the 0.1 m to the skin: second differences of about (1e-3)^2.
    assert np.abs(curvature).max() < 1e-4 * np.abs(plain).max()
    assert np.abs(ahead - behind).max() > 1e-4 * np.abs(plain).max()
