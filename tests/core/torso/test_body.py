"""The trunk's shape and the anatomical rules of the electrodes' sites."""

from __future__ import annotations

import numpy as np
import pytest

from core.torso.body import Body
from core.torso.build_ensemble import BODIES, LUNG_FREQUENCY
from core.torso.skin_mesh import mesh_skin
from core.torso.surfaces import check_closed, icosphere


@pytest.fixture(params=BODIES, ids=lambda body: f"{1000 * body.breadth_m:.0f} mm")
def body(request) -> Body:
    return request.param


def test_the_skin_is_a_closed_surface_without_handles(body):
    surface = mesh_skin(body).surface
    check_closed(surface)
    edges = 3 * len(surface.triangles) // 2
    assert len(surface.points_m) - edges + len(surface.triangles) == 2  # Euler


def test_the_lungs_are_closed_and_lie_inside_the_trunk(body):
    for lung in body.lungs(LUNG_FREQUENCY):
        check_closed(lung)
        outline = np.abs(lung.points_m[:, :2] / [body.breadth_m / 2, body.depth_m / 2])
        inside = (outline**body.exponent).sum(axis=1) ** (1 / body.exponent)
        assert (inside < body.section_scale(lung.points_m[:, 2])).all()


def test_the_lungs_do_not_meet(body):
    right, left = body.lungs(LUNG_FREQUENCY)
    assert right.points_m[:, 0].max() < left.points_m[:, 0].min()


def test_v1_and_v2_lie_at_the_sternal_borders_in_the_fourth_space(body):
    v1, v2 = body.chest_sites_m()[:2]
    # 29 to 35 mm off the midline (US20230017159, anthropometry there).
    assert 0.029 <= v2[0] <= 0.035
    assert v1[0] == -v2[0]
    assert v1[1] == v2[1] == 0.0


def test_v3_to_v6_follow_the_anatomical_rules(body):
    """Common practice, no source: half-way between neighbours, V4 to V6 at one level."""
    _, v2, v3, v4, v5, v6 = body.chest_sites_m()
    np.testing.assert_allclose(v3, (v2 + v4) / 2)
    np.testing.assert_allclose(v5, (v4 + v6) / 2)
    assert v4[1] == v5[1] == v6[1] == -body.interspace_m
    # About 29 mm a space (same source as above).
    assert body.interspace_m == pytest.approx(0.029, abs=0.003)


def test_v6_lies_at_the_side(body):
    x, y, _ = body.skin_points(*body.chest_sites_m()[5])
    half = body.breadth_m / 2 * float(body.section_scale(body.height_of(-body.interspace_m)))
    assert (x, y) == (pytest.approx(half, abs=1e-4), pytest.approx(0.0, abs=1e-3))


@pytest.mark.parametrize(
    "path",
    [
        # Left along the section of the fourth space, and up and down along the midline.
        lambda share: (0.12 * share, 0.0 * share),
        lambda share: (0.0 * share, 0.10 * share),
        lambda share: (0.0 * share, -0.10 * share),
    ],
)
def test_skin_coordinates_are_lengths_along_the_skin(body, path):
    """A second way: the length of a polyline of 2000 points on the surface."""
    share = np.linspace(0.0, 1.0, 2001)
    left, up = path(share)
    points = body.skin_points(left, up)
    walked = np.linalg.norm(np.diff(points, axis=0), axis=1).sum()
    assert walked == pytest.approx(np.hypot(left[-1], up[-1]), abs=1e-5)  # 0.01 mm


def test_the_girth_is_that_of_a_circle_for_a_round_trunk():
    assert Body(0.3, 0.3, exponent=2.0).girth_m == pytest.approx(np.pi * 0.3, rel=1e-6)


def test_the_icosphere_is_a_sphere():
    sphere = icosphere(5)
    check_closed(sphere)
    np.testing.assert_allclose(np.linalg.norm(sphere.points_m, axis=1), 1.0)
    assert sphere.points_m.shape[0] == 10 * 5**2 + 2
