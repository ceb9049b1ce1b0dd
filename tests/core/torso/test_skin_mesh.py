from __future__ import annotations

import numpy as np
import pytest

from core.torso.build_ensemble import BODIES, CHART_LEFT_MM, CHART_UP_MM
from core.torso.skin_mesh import mesh_skin


@pytest.mark.parametrize("body", BODIES, ids=lambda body: f"{1000 * body.breadth_m:.0f} mm")
def test_the_chart_reads_the_mesh_where_it_says(body):
    """The mesh's own positions, read off at the chart's sites, are the sites' positions."""
    mesh = mesh_skin(body)
    left, up = CHART_LEFT_MM / 1000, CHART_UP_MM / 1000
    found = mesh.chart_values(body, mesh.surface.points_m, left, up)
    away = np.linalg.norm(found - body.skin_points(*np.meshgrid(left, up)), axis=2)
    # Cubic splines through points 12 mm apart, on a skin that bends over 100 mm: a few hundredths
    # of a millimetre by (12 / 100)^4 of it.
    assert 1000 * away.max() < 0.05
