"""The closed form against its published table and its Legendre series."""

from __future__ import annotations

import numpy as np
import pytest

from core.torso.sphere import sphere_surface_potential

ANGLES_DEG = (0, 30, 60, 90, 120, 180)
# mV, p = 1e-5 A m, 0.2 S/m, R = 0.10 m; worked out from the closed form and matched to the series.
TABLE = {
    (0.25, "radial"): (1.945227, 1.395971, 0.445757, -0.229170, -0.599251, -0.827606),
    (0.25, "tangential"): (0, 1.081847, 1.350169, 1.112610, 0.742540, 0),
    (0.50, "radial"): (3.978874, 1.712630, 0.123107, -0.368717, -0.537968, -0.618936),
    (0.50, "tangential"): (0, 2.110479, 1.520474, 0.925291, 0.532858, 0),
    (0.75, "radial"): (14.323945, 1.185811, -0.213602, -0.411681, -0.464515, -0.487209),
    (0.75, "tangential"): (0, 3.621317, 1.417187, 0.725747, 0.393224, 0),
}
MOMENTS = {"radial": (0.0, 0.0, 1e-5), "tangential": (1e-5, 0.0, 0.0)}


def potential_mv(angles_deg, eccentricity, moment, radius_m=0.10) -> np.ndarray:
    angle = np.radians(np.asarray(angles_deg, dtype=float))
    points = radius_m * np.column_stack([np.sin(angle), np.zeros(angle.size), np.cos(angle)])
    at = np.array([0.0, 0.0, eccentricity * radius_m])
    volts = sphere_surface_potential(
        points, at, np.array(moment), radius_m=radius_m, conductivity_s_per_m=0.2
    )
    return 1000.0 * volts


@pytest.mark.parametrize(("case", "expected"), TABLE.items(), ids=str)
def test_the_published_values(case, expected):
    eccentricity, direction = case
    found = potential_mv(ANGLES_DEG, eccentricity, MOMENTS[direction])
    np.testing.assert_allclose(found, expected, atol=5e-7)  # half the last digit


def test_a_centred_dipole():
    found = potential_mv([0, 60, 90], 0.0, MOMENTS["radial"])
    np.testing.assert_allclose(found, [1.193662, 0.596831, 0.0], atol=5e-7)


@pytest.mark.parametrize("eccentricity", [0.3, 0.6])
def test_the_legendre_series_of_a_radial_dipole(eccentricity):
    angle = np.array([10.0, 45.0, 100.0, 170.0])
    cosine = np.cos(np.radians(angle))
    n = np.arange(1, 120)
    coefficients = np.concatenate([[0.0], (2 * n + 1) * eccentricity ** (n - 1)])
    series = np.polynomial.legendre.legval(cosine, coefficients)
    series *= 1000.0 * 1e-5 / (4 * np.pi * 0.2 * 0.10**2)
    found = potential_mv(angle, eccentricity, MOMENTS["radial"])
    np.testing.assert_allclose(found, series, atol=1e-9)


# mV at arc shifts of -30 to 30 mm from an angle off the dipole; R = 0.13 m; worked out.
SHIFTS_MM = (-30, -20, -10, 0, 10, 20, 30)
SHIFTED = {
    (0.4, "radial", 0): (1.5120, 1.6131, 1.6780, 1.7004, 1.6780, 1.6131, 1.5120),
    (0.5, "radial", 0): (1.9580, 2.1654, 2.3050, 2.3544, 2.3050, 2.1654, 1.9580),
    (0.6, "radial", 0): (2.5971, 3.0625, 3.4045, 3.5315, 3.4045, 3.0625, 2.5971),
    (0.4, "tangential", 0): (-0.5725, -0.4000, -0.2059, 0, 0.2059, 0.4000, 0.5725),
    (0.5, "tangential", 0): (-0.8911, -0.6434, -0.3382, 0, 0.3382, 0.6434, 0.8911),
    (0.6, "tangential", 0): (-1.4891, -1.1413, -0.6250, 0, 0.6250, 1.1413, 1.4891),
    (0.4, "radial", 30): (1.4102, 1.2670, 1.1142, 0.9598, 0.8100, 0.6690, 0.5394),
    (0.5, "radial", 30): (1.7608, 1.5024, 1.2486, 1.0134, 0.8039, 0.6223, 0.4674),
    (0.6, "radial", 30): (2.1971, 1.7289, 1.3234, 0.9899, 0.7237, 0.5140, 0.3498),
}


@pytest.mark.parametrize(("case", "expected"), SHIFTED.items(), ids=str)
def test_electrode_shifts_along_the_arc(case, expected):
    eccentricity, direction, from_deg = case
    angles = from_deg + np.degrees(np.array(SHIFTS_MM) / 130.0)
    found = potential_mv(angles, eccentricity, MOMENTS[direction], radius_m=0.13)
    np.testing.assert_allclose(found, expected, atol=5e-5)  # half the last digit
