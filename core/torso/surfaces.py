"""Closed triangle meshes."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.errors import ModelError


@dataclass(frozen=True, slots=True, eq=False)
class Surface:
    """A closed surface of triangles, corners anticlockwise seen from outside.

    Attributes
    ----------
    points_m : ndarray, shape (n_points, 3)
    triangles : ndarray of int, shape (n_triangles, 3)
    """

    points_m: NDArray[np.float64]
    triangles: NDArray[np.int64]

    @property
    def corners_m(self) -> NDArray[np.float64]:
        """Corner positions, shape (n_triangles, 3, 3)."""
        return np.asarray(self.points_m[self.triangles])

    @property
    def volume_m3(self) -> float:
        """Enclosed volume; negative if the triangles are turned inside out."""
        a, b, c = np.moveaxis(self.corners_m, 1, 0)
        return float(np.einsum("tc,tc->", a, np.cross(b, c)) / 6.0)

    def scaled_to_volume(self, volume_m3: float) -> Surface:
        """The surface blown up about its centre to a volume.

        Points on a smooth convex surface span a polyhedron that is a little smaller; giving
        it the smooth body's volume removes most of the error that this makes.
        """
        centre = self.points_m.mean(axis=0)
        factor = (volume_m3 / self.volume_m3) ** (1.0 / 3.0)
        return Surface(centre + factor * (self.points_m - centre), self.triangles)


def check_closed(surface: Surface) -> None:
    """Raise `ModelError` unless every edge joins exactly two triangles, the right way round."""
    pairs = np.concatenate([surface.triangles[:, [k, (k + 1) % 3]] for k in range(3)])
    forward = {tuple(pair) for pair in pairs.tolist()}
    if len(forward) != len(pairs) or any((b, a) not in forward for a, b in forward):
        raise ModelError("a surface of the torso is open or has triangles turned over")
    if surface.volume_m3 <= 0:
        raise ModelError("a surface of the torso is turned inside out")


def icosphere(frequency: int) -> Surface:
    """Unit sphere: an icosahedron whose edges are cut into *frequency* parts.

    It has 10 frequency^2 + 2 points.
    """
    golden = (1 + 5**0.5) / 2
    base = np.array(
        [
            [sign_a * a, sign_b * b, 0.0]
            for a, b in ((1.0, golden),)
            for sign_b in (1, -1)
            for sign_a in (-1, 1)
        ]
    )
    base = np.concatenate([base, np.roll(base, 1, axis=1), np.roll(base, 2, axis=1)])
    base /= np.linalg.norm(base, axis=1, keepdims=True)
    edge = np.min(np.linalg.norm(base[0] - base[1:], axis=1)) * 1.01
    near = np.linalg.norm(base[:, None] - base[None], axis=2) < edge
    faces = [
        (i, j, k)
        for i in range(12)
        for j in range(i + 1, 12)
        for k in range(j + 1, 12)
        if near[i, j] and near[j, k] and near[i, k]
    ]
    points: list[NDArray[np.float64]] = []
    index: dict[tuple[float, ...], int] = {}
    triangles: list[tuple[int, int, int]] = []

    def add(point: NDArray[np.float64]) -> int:
        unit = point / np.linalg.norm(point)
        key = tuple((np.round(unit, 9) + 0.0).tolist())
        if key not in index:
            index[key] = len(points)
            points.append(unit)
        return index[key]

    for face in faces:
        a, b, c = base[list(face)]
        if np.dot(np.cross(b - a, c - a), a) < 0:
            b, c = c, b
        at = {
            (i, j): add((frequency - i - j) * a + i * b + j * c)
            for i in range(frequency + 1)
            for j in range(frequency + 1 - i)
        }
        for i in range(frequency):
            for j in range(frequency - i):
                triangles.append((at[i, j], at[i + 1, j], at[i, j + 1]))
                if i + j < frequency - 1:
                    triangles.append((at[i + 1, j], at[i + 1, j + 1], at[i, j + 1]))
    return Surface(np.array(points), np.array(triangles, dtype=np.int64))


def ellipsoid(
    centre_m: NDArray[np.float64], semi_axes_m: NDArray[np.float64], frequency: int
) -> Surface:
    """An ellipsoid with axes along the coordinates, its volume exact."""
    sphere = icosphere(frequency)
    surface = Surface(centre_m + sphere.points_m * semi_axes_m, sphere.triangles)
    return surface.scaled_to_volume(4.0 / 3.0 * np.pi * float(np.prod(semi_axes_m)))
