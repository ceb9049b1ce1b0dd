"""Where the heart's currents may be: a prior over dipoles in the ventricles."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from core.torso.body import Body
from core.torso.surfaces import Surface

# Direction from the base of the left ventricle to its apex: 27 degrees to the transverse and
# 38 degrees to the frontal plane (Hoekema 1999, mean of a population).
LONG_AXIS: NDArray[np.float64] = np.array(
    [
        np.sqrt(1 - np.sin(np.deg2rad(27.1)) ** 2 - np.sin(np.deg2rad(38.0)) ** 2),
        -np.sin(np.deg2rad(38.0)),
        -np.sin(np.deg2rad(27.1)),
    ]
)
GRID_M = 0.008
# A dipole nearer than this to a lung's surface would see its triangles one by one.
LUNG_MARGIN_M = 0.004
SMALLEST_WEIGHT = 0.02


@dataclass(frozen=True, slots=True)
class HeartPlace:
    """Middle of the ventricles, and the half-axes of the region that holds their currents."""

    left_m: float
    behind_skin_m: float
    up_m: float
    half_length_m: float = 0.055
    half_width_m: float = 0.030


def ventricular_dipoles(
    body: Body, place: HeartPlace, lungs: tuple[Surface, Surface]
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Positions of dipoles on a grid, and the prior variance of their moments.

    The variance is the same in every direction, 1 in the middle of the region and falling off
    smoothly at its border.

    Returns
    -------
    tuple of ndarray (positions, variance), shapes (m, 3) and (m,)
    """
    front_y = body.skin_points(np.array(0.0), np.array(place.up_m))[1]
    centre = np.array([place.left_m, front_y + place.behind_skin_m, place.up_m])
    reach = np.ceil(1.2 * max(place.half_length_m, place.half_width_m) / GRID_M) * GRID_M
    steps = np.arange(-reach, reach + GRID_M / 2, GRID_M)
    offset = np.stack(np.meshgrid(steps, steps, steps, indexing="ij"), axis=-1).reshape(-1, 3)
    along = offset @ LONG_AXIS
    across = np.sqrt(np.maximum((offset**2).sum(axis=1) - along**2, 0.0))
    distance = np.hypot(along / place.half_length_m, across / place.half_width_m)
    variance = 1.0 / (1.0 + np.exp((distance - 1.0) / 0.075))
    positions = centre + offset
    keep = variance > SMALLEST_WEIGHT
    for lung in lungs:
        keep &= ~_inside_ellipsoid(positions, lung, LUNG_MARGIN_M)
    return positions[keep], variance[keep]


def _inside_ellipsoid(
    points_m: NDArray[np.float64], surface: Surface, margin_m: float
) -> NDArray[np.bool_]:
    centre = surface.points_m.mean(axis=0)
    half = np.ptp(surface.points_m, axis=0) / 2 + margin_m
    return np.asarray((((points_m - centre) / half) ** 2).sum(axis=1) < 1.0)
