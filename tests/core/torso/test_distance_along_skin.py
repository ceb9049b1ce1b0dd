"""A displacement asked for is the way along the skin, measured by walking it."""

from __future__ import annotations

import numpy as np
import pytest

from core.torso.build_ensemble import BODIES

MM = 1000.0


def walked_mm(body, site_m, left_mm, up_mm) -> float:
    """Length of a polyline of 2000 pieces on the skin, straight in skin coordinates."""
    share = np.linspace(0.0, 1.0, 2001)
    points = body.skin_points(site_m[0] + share * left_mm / MM, site_m[1] + share * up_mm / MM)
    return float(MM * np.linalg.norm(np.diff(points, axis=0), axis=1).sum())


@pytest.mark.parametrize("body", BODIES, ids=lambda body: f"{MM * body.breadth_m:.0f} mm")
@pytest.mark.parametrize("electrode", range(6), ids=lambda n: f"V{n + 1}")
@pytest.mark.parametrize("asked_mm", [10.0, 58.0, 100.0])
def test_a_displacement_is_as_long_as_asked_for_in_every_direction(body, electrode, asked_mm):
    site = body.chest_sites_m()[electrode]
    for angle in np.radians(np.arange(0, 360, 45)):
        way = walked_mm(body, site, asked_mm * np.cos(angle), asked_mm * np.sin(angle))
        # Half a millimetre: far less than an electrode is placed to (common practice, no
        # source). A trunk that narrows cannot have skin coordinates that are exact everywhere.
        assert way == pytest.approx(asked_mm, abs=0.5)


@pytest.mark.parametrize("body", BODIES, ids=lambda body: f"{MM * body.breadth_m:.0f} mm")
def test_the_right_side_mirrors_the_left(body):
    left, up = np.meshgrid(np.linspace(0.0, 0.15, 7), np.linspace(-0.1, 0.1, 5))
    ours, theirs = body.skin_points(left, up), body.skin_points(-left, up)
    # The arc is a table of 0.05 degrees.
    np.testing.assert_allclose(theirs, ours * [-1, 1, 1], atol=1e-6)


@pytest.mark.parametrize("body", BODIES, ids=lambda body: f"{MM * body.breadth_m:.0f} mm")
def test_left_is_left_up_is_up_and_the_front_is_in_front(body):
    """Patient coordinates as in DICOM: x to the left, y to the back, z to the head."""
    here = body.skin_points(np.array(0.0), np.array(0.0))
    assert body.skin_points(np.array(0.05), np.array(0.0))[0] > here[0]
    assert body.skin_points(np.array(0.0), np.array(0.05))[2] > here[2]
    assert here[1] == pytest.approx(-body.depth_m / 2, rel=1e-3)  # the largest section, nearly
