"""Potentials of current dipoles in a piecewise homogeneous body, by boundary elements.

Collocation at the points, potential linear on each triangle. For a point r on surface k with
conductivity s- inside and s+ outside (Barr et al. 1977, IEEE Trans Biomed Eng 24:2; Geselowitz
1967, Biophys J 7:1):

    (s-_k + s+_k)/2 V(r) = V0(r) + 1/(4 pi) sum_j (s-_j - s+_j) integral V dOmega_j

with V0 the potential times conductivity in an unbounded medium. The potential is fixed up to a
constant; deflation sets its mean over the outermost surface to 0.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import lu_factor, lu_solve

from core.torso.solid_angle import linear_solid_angles
from core.torso.surfaces import Surface, check_closed


@dataclass(frozen=True, slots=True, eq=False)
class Region:
    """A closed surface and the conductivities on its two sides, in S/m."""

    surface: Surface
    inside_s_per_m: float
    outside_s_per_m: float


def point_weights(
    observers_m: NDArray[np.float64], surface: Surface, own: bool
) -> NDArray[np.float64]:
    """Weights of a surface's point potentials in the integral of V dOmega.

    Parameters
    ----------
    observers_m : ndarray, shape (n_observers, 3)
    surface : Surface
    own : bool
        Whether the observers are the surface's own points.

    Returns
    -------
    ndarray, shape (n_observers, n_points)
    """
    n_points = surface.points_m.shape[0]
    weights = np.zeros((observers_m.shape[0], n_points))
    by_corner = linear_solid_angles(observers_m, surface.corners_m)
    if own:
        # A point cannot see its own triangles: they meet in it, and their share is set below.
        for corner in range(3):
            by_corner[surface.triangles[:, corner], np.arange(len(surface.triangles))] = 0.0
    for corner in range(3):
        np.add.at(weights.T, surface.triangles[:, corner], by_corner[:, :, corner].T)
    if own:
        # What is missing to the half space of a smooth point goes to the point itself. Without
        # it the rows do not sum to 2 pi and a closed body leaks current.
        at = np.arange(n_points)
        weights[at, at] = 2.0 * np.pi - weights.sum(axis=1)
    return weights


def unbounded_potential(
    points_m: NDArray[np.float64], dipoles_m: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Potential times conductivity of unit dipoles in an unbounded medium.

    Parameters
    ----------
    points_m : ndarray, shape (n, 3)
    dipoles_m : ndarray, shape (m, 3)

    Returns
    -------
    ndarray, shape (n, 3 m)
        Columns x, y, z of the first dipole, then of the next; in V S/m per A m.
    """
    away = points_m[:, None, :] - dipoles_m[None, :, :]
    cubed = np.linalg.norm(away, axis=2, keepdims=True) ** 3
    return np.asarray((away / (4.0 * np.pi * cubed)).reshape(points_m.shape[0], -1))


class BodySolver:
    """The factored boundary-element system of one body.

    Parameters
    ----------
    regions : list of Region
        The outermost surface, the skin, first.
    """

    def __init__(self, regions: list[Region]) -> None:
        for region in regions:
            check_closed(region.surface)
        self.points_m = np.concatenate([region.surface.points_m for region in regions])
        sizes = [region.surface.points_m.shape[0] for region in regions]
        self.n_skin = sizes[0]
        first = np.concatenate([[0], np.cumsum(sizes)])
        n = int(first[-1])
        system = np.zeros((n, n))
        self._mean = np.zeros(n)
        for k, of in enumerate(regions):
            rows = slice(first[k], first[k + 1])
            self._mean[rows] = (of.inside_s_per_m + of.outside_s_per_m) / 2.0
            for j, by in enumerate(regions):
                columns = slice(first[j], first[j + 1])
                jump = (by.inside_s_per_m - by.outside_s_per_m) / (4.0 * np.pi)
                system[rows, columns] = -jump * point_weights(
                    of.surface.points_m, by.surface, own=j == k
                )
        system[np.arange(n), np.arange(n)] += self._mean
        # Deflation: a constant potential is a null vector of the system; adding the mean over
        # the skin to every row pins that mean to 0 and changes nothing else.
        system[:, : self.n_skin] += regions[0].inside_s_per_m / self.n_skin
        self._factors = lu_factor(system, overwrite_a=True)

    def skin_potential(self, dipoles_m: NDArray[np.float64]) -> NDArray[np.float64]:
        """Lead field of the skin's points.

        Parameters
        ----------
        dipoles_m : ndarray, shape (m, 3)
            Inside the body, outside the inner regions.

        Returns
        -------
        ndarray, shape (n_skin, 3 m)
            In V per A m, columns as in `unbounded_potential`.
        """
        right = unbounded_potential(self.points_m, dipoles_m)
        return np.asarray(lu_solve(self._factors, right)[: self.n_skin])
