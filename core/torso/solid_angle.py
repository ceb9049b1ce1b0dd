"""Kernels of the boundary-element method: solid angles of triangles.

References
----------
van Oosterom & Strackee 1983, IEEE Trans Biomed Eng 30:125 (solid angle of a plane triangle).
de Munck 1992, IEEE Trans Biomed Eng 39:986 (a linearly varying potential on a triangle).
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray

# Observers handled at once; bounds the memory, not the result.
_CHUNK = 96
# Below this share of an edge's length an observer lies on the line of the edge, where the
# logarithm's argument is 0/0 and its share of the weights is 0.
_ON_EDGE = 1e-12


def solid_angles(
    observers_m: NDArray[np.float64], corners_m: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Solid angle of each triangle from each observer.

    Positive where the observer sees the triangle's back, so that a closed surface with
    outward normals has 4 pi from inside and 0 from outside.

    Parameters
    ----------
    observers_m : ndarray, shape (n_observers, 3)
    corners_m : ndarray, shape (n_triangles, 3, 3)

    Returns
    -------
    ndarray, shape (n_observers, n_triangles)
        In steradian.
    """
    return np.asarray(linear_solid_angles(observers_m, corners_m).sum(axis=2))


def linear_solid_angles(
    observers_m: NDArray[np.float64], corners_m: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Weights of the corner values of a linear function in its solid-angle integral.

    The integral of f dOmega over a triangle, with f linear on it, is the sum of its corner
    values times these weights (de Munck 1992, eq. 10 to 19).

    Parameters
    ----------
    observers_m : ndarray, shape (n_observers, 3)
    corners_m : ndarray, shape (n_triangles, 3, 3)

    Returns
    -------
    ndarray, shape (n_observers, n_triangles, 3)
        In steradian; the three sum to the solid angle.
    """
    weights = np.empty((observers_m.shape[0], corners_m.shape[0], 3))
    for start in range(0, observers_m.shape[0], _CHUNK):
        chunk = observers_m[start : start + _CHUNK]
        weights[start : start + _CHUNK] = _weights(chunk, corners_m)
    return weights


def _weights(
    observers_m: NDArray[np.float64], corners_m: NDArray[np.float64]
) -> NDArray[np.float64]:
    # Axis 2 runs over the three corners, cyclically: the next corner is one roll away.
    to_corner = corners_m[None] - observers_m[:, None, None, :]
    distance = np.linalg.norm(to_corner, axis=3)
    following = np.roll(to_corner, -1, axis=2)
    # z_k = y_(k+1) x y_(k+2); y_0 . z_0 is six times the volume of the tetrahedron.
    z = np.cross(following, np.roll(to_corner, -2, axis=2))
    volume = np.einsum("otc,otc->ot", to_corner[:, :, 0], z[:, :, 0])
    inner = np.einsum("otkc,otkc->otk", to_corner, following)
    denominator = distance.prod(axis=2) + np.einsum(
        "otk,otk->ot", inner, np.roll(distance, -2, axis=2)
    )
    angle = 2.0 * np.arctan2(volume, denominator)

    edge = np.roll(corners_m, -1, axis=1) - corners_m
    length = np.linalg.norm(edge, axis=2)
    ahead = np.einsum("otkc,tkc->otk", following, edge) + np.roll(distance, -1, axis=2) * length
    behind = np.einsum("otkc,tkc->otk", to_corner, edge) + distance * length
    tiny = _ON_EDGE * length**2
    off_edge = (ahead > tiny) & (behind > tiny)
    logarithm = np.log(np.where(off_edge, ahead, 1.0) / np.where(off_edge, behind, 1.0)) / length
    path = np.einsum("otk,tkc->otc", logarithm, edge)

    normal = np.cross(edge[:, 0], edge[:, 1])  # length: twice the area
    opposite = np.roll(edge, -1, axis=1)
    flat = np.einsum("otkc,tc->otk", z, normal) * angle[..., None]
    tilted = np.einsum("tkc,otc->otk", opposite, path) * volume[..., None]
    squared = np.einsum("tc,tc->t", normal, normal)
    return np.asarray((flat + tilted) / squared[None, :, None])
