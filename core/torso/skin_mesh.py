"""The skin of a trunk as a mesh that is fine on the chest and coarse elsewhere."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import make_interp_spline

from core.torso.body import BOTTOM_M, TOP_M, Body
from core.torso.surfaces import Surface

# Where the mesh is fine: every site an electrode may be moved to, and some margin.
CHEST_LEFT_M = (-0.150, 0.366)
CHEST_UP_M = (-0.150, 0.138)
FINE_M, COARSE_M = 0.012, 0.028


@dataclass(frozen=True, slots=True, eq=False)
class SkinMesh:
    """Rings of points at rising levels, closed at both ends.

    Attributes
    ----------
    surface : Surface
        Ring points first, ring by ring from below, then the upper and the lower end.
    ring_m : ndarray, shape (n_ring,)
        Arcs of a ring's points along the largest section.
    rows_m : ndarray, shape (n_rows,)
        Arcs of the rings along the midline.
    """

    surface: Surface
    ring_m: NDArray[np.float64]
    rows_m: NDArray[np.float64]

    def chart_values(
        self,
        body: Body,
        values: NDArray[np.float64],
        left_m: NDArray[np.float64],
        up_m: NDArray[np.float64],
    ) -> NDArray[np.float64]:
        """Values known at the mesh's points, on a grid of skin coordinates.

        By cubic splines along and across the chest's rings.

        Parameters
        ----------
        body : Body
            That the mesh was made of.
        values : ndarray, shape (n_points, k)
        left_m, up_m : ndarray, shape (n_left,), (n_up,)
            Inside the fine part of the mesh.

        Returns
        -------
        ndarray, shape (n_up, n_left, k)
        """
        n_rows, n_ring = self.rows_m.size, self.ring_m.size
        on_rings = values[: n_rows * n_ring].reshape(n_rows, n_ring, -1)
        rows = np.flatnonzero(_within(self.rows_m, CHEST_UP_M))
        ring = np.flatnonzero(_within(self.ring_m, CHEST_LEFT_M))
        by_row = make_interp_spline(self.rows_m[rows], on_rings[rows][:, ring], axis=0)(up_m)
        along = make_interp_spline(self.ring_m[ring], by_row.transpose(1, 0, 2), axis=0)
        # A ring's points keep their angle as the section narrows, so an arc at a narrower
        # level belongs to a longer arc of the largest section.
        scale = body.section_scale(body.height_of(up_m))
        return np.stack([along(left_m / scale[row])[:, row] for row in range(up_m.size)], axis=0)


def mesh_skin(body: Body) -> SkinMesh:
    """Mesh the skin of a body."""
    half = body.girth_m / 2
    ring = _graded(CHEST_LEFT_M, (-half, half))[:-1]
    _, up = body._height_table
    rows = _graded(CHEST_UP_M, (float(up[0]), float(up[-1])))[1:-1]
    n, m = ring.size, rows.size
    z = body.height_of(rows)
    outline = body.outline(body.angle_of(ring, np.array((TOP_M + BOTTOM_M) / 2)))
    scale = body.section_scale(z)
    points = np.empty((m, n, 3))
    points[..., :2] = outline[None] * scale[:, None, None]
    points[..., 2] = z[:, None]
    ends = np.array([[0.0, 0.0, TOP_M], [0.0, 0.0, BOTTOM_M]])

    row, column = np.meshgrid(np.arange(m - 1), np.arange(n), indexing="ij")
    a = (row * n + column).ravel()
    b = (row * n + (column + 1) % n).ravel()
    c, d = a + n, b + n
    # Diagonals alternate, so that the mesh leans neither way.
    even = ((row + column) % 2 == 0).ravel()
    one = np.where(even[:, None], np.column_stack([a, b, c]), np.column_stack([a, b, d]))
    other = np.where(even[:, None], np.column_stack([b, d, c]), np.column_stack([a, d, c]))
    at = np.arange(n)
    following = (at + 1) % n
    top = np.column_stack([(m - 1) * n + at, (m - 1) * n + following, np.full(n, m * n)])
    bottom = np.column_stack([following, at, np.full(n, m * n + 1)])
    triangles = np.concatenate([one, other, top, bottom]).astype(np.int64)
    surface = Surface(np.concatenate([points.reshape(-1, 3), ends]), triangles)
    return SkinMesh(surface, ring, rows)


def _within(values: NDArray[np.float64], limits: tuple[float, float]) -> NDArray[np.bool_]:
    return (values >= limits[0] - 1e-9) & (values <= limits[1] + 1e-9)


def _graded(fine: tuple[float, float], whole: tuple[float, float]) -> NDArray[np.float64]:
    """Nodes from one end of *whole* to the other, close together inside *fine*."""
    middle = np.linspace(*fine, round((fine[1] - fine[0]) / FINE_M) + 1)
    before = np.linspace(whole[0], fine[0], max(2, round((fine[0] - whole[0]) / COARSE_M)) + 1)
    after = np.linspace(fine[1], whole[1], max(2, round((whole[1] - fine[1]) / COARSE_M)) + 1)
    return np.concatenate([before[:-1], middle, after[1:]])
