"""Formulas against worked numbers of their sources."""

from __future__ import annotations

import numpy as np
import pytest

from core.measures.intervals import corrected_qt_ms
from core.measures.vectors import KORS, angle_between_deg, frontal_axis_deg, kors_vector


@pytest.mark.parametrize(
    ("qt_ms", "rate", "bazett", "fridericia", "framingham", "hodges"),
    [
        (400, 60, 400.00, 400.00, 400.00, 400.00),
        (400, 75, 447.21, 430.89, 430.80, 426.25),
        (360, 100, 464.76, 426.83, 421.60, 430.00),
        (440, 50, 401.66, 414.06, 409.20, 422.50),
        (300, 120, 424.26, 377.98, 377.00, 405.00),
    ],
)
def test_corrected_qt(qt_ms, rate, bazett, fridericia, framingham, hodges):
    # Worked from the published formulas; given to 0.01 ms.
    corrected = corrected_qt_ms(qt_ms, 60.0 / rate)
    assert list(corrected.values()) == pytest.approx(
        [bazett, fridericia, framingham, hodges], abs=0.006
    )


@pytest.mark.parametrize(
    ("lead_i", "avf", "axis"),
    [(0.5, 0.75, 60.00), (1, 1, 49.11), (1, -0.5, -30.0), (-0.5, 0.5, 130.89)],
)
def test_frontal_axis(lead_i, avf, axis):
    # From the definition axis = atan2(2 aVF / sqrt 3, I); given to 0.01 degrees.
    assert frontal_axis_deg(lead_i, avf) == pytest.approx(axis, abs=0.006)


def test_an_axis_of_nothing_is_none():
    assert frontal_axis_deg(0.0, 0.0) is None


def test_kors_regression():
    # Row sums and two images of test vectors, computed from the published matrix.
    np.testing.assert_allclose(KORS.sum(axis=1), [0.96, 0.87, -0.75], atol=1e-12)
    first = kors_vector(np.array([0.5, 1, -0.4, 0.2, 0.8, 1.2, 1.1, 0.9]))
    second = kors_vector(np.array([0.2, 0.3, -0.1, 0.4, 0.5, 0.45, 0.35, 0.25]))
    np.testing.assert_allclose(first, [0.894, 0.829, -0.209], atol=0.0006)
    assert np.linalg.norm(first) == pytest.approx(1.2370, abs=0.0001)
    assert angle_between_deg(first, second) == pytest.approx(13.1706, abs=0.0001)


def test_spatial_angles():
    assert angle_between_deg(np.array([1.0, 0, 0]), np.array([1.0, 1, 0])) == pytest.approx(45)
    angle = angle_between_deg(np.array([1.0, 2, -0.5]), np.array([0.3, 0.2, 0.4]))
    assert angle == pytest.approx(66.095, abs=0.001)
    assert angle_between_deg(np.zeros(3), np.ones(3)) is None
