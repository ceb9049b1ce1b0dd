"""How fast the solver's error falls."""

from __future__ import annotations

from functools import lru_cache

import numpy as np
import pytest

from core.torso.boundary_elements import BodySolver, Region
from core.torso.sphere import sphere_surface_potential
from core.torso.surfaces import Surface, icosphere

RADIUS_M, CONDUCTIVITY = 0.10, 0.2
AXIS, ACROSS = np.array([0.36, -0.48, 0.8]), np.array([0.8, 0.6, 0.0])


@lru_cache(maxsize=3)
def solver(frequency, *, to_volume) -> BodySolver:
    sphere = icosphere(frequency)
    surface = Surface(RADIUS_M * sphere.points_m, sphere.triangles)
    if to_volume:
        surface = surface.scaled_to_volume(4 / 3 * np.pi * RADIUS_M**3)
    return BodySolver([Region(surface, CONDUCTIVITY, 0.0)])


def relative_error(frequency, eccentricity, moment, *, to_volume) -> float:
    at = eccentricity * RADIUS_M * AXIS
    found = solver(frequency, to_volume=to_volume).skin_potential(at[None]) @ moment
    exact = sphere_surface_potential(
        RADIUS_M * icosphere(frequency).points_m,
        at,
        moment,
        radius_m=RADIUS_M,
        conductivity_s_per_m=CONDUCTIVITY,
    )
    exact -= exact.mean()
    return float(np.linalg.norm(found - exact) / np.linalg.norm(exact))


@pytest.mark.parametrize("eccentricity", [0.25, 0.50, 0.75])
@pytest.mark.parametrize("moment", [AXIS, ACROSS], ids=["radial", "tangential"])
def test_half_as_long_edges_leave_a_quarter_of_the_error(eccentricity, moment):
    """162 and 642 points on the sphere itself; flat triangles miss it by the edge's square."""
    coarse, fine = (relative_error(f, eccentricity, moment, to_volume=False) for f in (4, 8))
    # The order is the limit's; two coarse meshes show it to a quarter.
    assert np.log2(coarse / fine) == pytest.approx(2.0, abs=0.25)


def test_giving_the_polyhedron_the_sphere_s_volume_takes_most_of_the_error():
    on_sphere, to_volume = (
        relative_error(4, 0.5, AXIS, to_volume=scaled) for scaled in (False, True)
    )
    assert to_volume < 0.5 * on_sphere
