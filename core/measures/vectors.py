"""Frontal axes and spatial vectors."""

from __future__ import annotations

import math

import numpy as np
from numpy.typing import NDArray

# Regression of Kors et al. 1990 (Eur Heart J 11:1083), as given in several public listings.
# Rows X (left), Y (down), Z (back); columns I, II, V1 to V6.
KORS: NDArray[np.float64] = np.array(
    [
        [0.38, -0.07, -0.13, 0.05, -0.01, 0.14, 0.06, 0.54],
        [-0.07, 0.93, 0.06, -0.02, -0.05, 0.06, -0.17, 0.13],
        [0.11, -0.23, -0.43, -0.06, -0.14, -0.20, -0.11, 0.31],
    ]
)
# An area smaller than this in both leads points nowhere (1 uV over a QRS of 100 ms).
SMALLEST_AREA_MV_MS = 0.1


def kors_vector(independent: NDArray[np.float64]) -> NDArray[np.float64]:
    """X, Y, Z of the eight independent leads.

    Parameters
    ----------
    independent : ndarray, shape (8,) or (8, n)
        Leads I, II, V1 to V6.

    Returns
    -------
    ndarray, shape (3,) or (3, n)
    """
    return np.asarray(KORS @ independent)


def frontal_axis_deg(lead_i: float, avf: float) -> float | None:
    """Direction in the frontal plane of a vector seen by leads I and aVF.

    The augmented lead is brought to the scale of the bipolar one, 2 / sqrt(3), so that the
    axis of equal leads is 49 degrees and not 45.
    """
    if math.hypot(lead_i, avf) < SMALLEST_AREA_MV_MS:
        return None
    return math.degrees(math.atan2(2.0 * avf / math.sqrt(3.0), lead_i))


def angle_between_deg(a: NDArray[np.float64], b: NDArray[np.float64]) -> float | None:
    """Angle between two vectors, None where one of them is zero."""
    size = float(np.linalg.norm(a) * np.linalg.norm(b))
    if size == 0.0:
        return None
    return math.degrees(math.acos(float(np.clip(a @ b / size, -1.0, 1.0))))
