"""Closed form: a current dipole in a homogeneous sphere. The solver's yardstick.

References
----------
Wilson & Bayley 1950, Circulation 1:84; Frank 1952, J Appl Phys 23:1225; Yao 2000, IEEE Trans
Biomed Eng 47:964.
"""

from __future__ import annotations

import numpy as np
from numpy.typing import NDArray


def sphere_surface_potential(
    points_m: NDArray[np.float64],
    dipole_at_m: NDArray[np.float64],
    moment_am: NDArray[np.float64],
    *,
    radius_m: float,
    conductivity_s_per_m: float,
) -> NDArray[np.float64]:
    """Potential on the surface of a sphere around the origin, its mean over the surface 0.

    V(r) = 1/(4 pi s) p . { 2 (r - r0)/d^3 + [r + R (r - r0)/d] / [R (R^2 - r.r0 + R d)] }

    Parameters
    ----------
    points_m : ndarray, shape (n, 3)
        On the surface.
    dipole_at_m, moment_am : ndarray, shape (3,)
        Position, inside the sphere, and moment in A m.

    Returns
    -------
    ndarray, shape (n,)
        In volt.
    """
    away = points_m - dipole_at_m
    d = np.linalg.norm(away, axis=1, keepdims=True)
    near = 2.0 * away / d**3
    turned = points_m + radius_m * away / d
    scale = radius_m * (radius_m**2 - points_m @ dipole_at_m[:, None] + radius_m * d)
    return np.asarray((near + turned / scale) @ moment_am / (4.0 * np.pi * conductivity_s_per_m))
