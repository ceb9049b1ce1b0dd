"""An adult trunk: a superelliptic skin, two lungs, and where the electrodes belong on it.

Patient coordinates as in DICOM: +x to the patient's left, +y to the back, +z to the head, in m.
The origin lies in the middle of the section at the level of the fourth intercostal space.

Skin coordinates: ``left_m``, the arc along the horizontal section from the anterior midline to
the patient's left; ``up_m``, the arc along the anterior midline from the level of the fourth
space upward.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from core.torso.surfaces import Surface, ellipsoid

# Level of the ends of the trunk, and how squarely it closes there.
TOP_M, BOTTOM_M = 0.200, -0.320
CLOSING_POWER = 5.0
# Where the limbs join: potentials of an arm and a leg hardly vary along them, so a limb
# electrode reads the potential of the trunk where its limb begins.
ARM_LEVEL_M = 0.150
LEG_UP_M, LEG_ANGLE_DEG = -0.270, 40.0


@dataclass(frozen=True)
class Body:
    """Shape of one trunk.

    Attributes
    ----------
    breadth_m, depth_m : float
        Of the chest at the level of the fourth space.
    exponent : float
        Of the superellipse: 2 is an ellipse, more is squarer.
    sternal_m, midclavicular_m : float
        Arcs from the midline to V1 and V2, and to V4.
    interspace_m : float
        From one intercostal space to the next, along the skin.
    """

    breadth_m: float
    depth_m: float
    exponent: float = 2.3
    sternal_m: float = 0.032
    midclavicular_m: float = 0.095
    interspace_m: float = 0.029

    def section_scale(self, z_m: NDArray[np.float64]) -> NDArray[np.float64]:
        """Size of the section at a level, relative to the largest."""
        middle, half = (TOP_M + BOTTOM_M) / 2, (TOP_M - BOTTOM_M) / 2
        away = np.minimum(np.abs((np.asarray(z_m) - middle) / half), 1.0)
        return np.asarray((1.0 - away**CLOSING_POWER) ** (1.0 / CLOSING_POWER))

    def outline(self, angle: NDArray[np.float64]) -> NDArray[np.float64]:
        """Points (x, y) of the largest section, by angle from the front to the left."""
        a, b, m = self.breadth_m / 2, self.depth_m / 2, self.exponent
        sine, cosine = np.sin(angle), np.cos(angle)
        radius = (np.abs(sine / a) ** m + np.abs(cosine / b) ** m) ** (-1.0 / m)
        return np.stack([radius * sine, -radius * cosine], axis=-1)

    @cached_property
    def _arc_table(self) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
        angle = np.linspace(-np.pi, np.pi, 7201)
        step = np.linalg.norm(np.diff(self.outline(angle), axis=0), axis=1)
        arc = np.concatenate([[0.0], np.cumsum(step)])
        return angle, arc - arc[arc.size // 2]

    @cached_property
    def _height_table(self) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
        # Densest at the ends, where the trunk closes.
        z = (TOP_M + BOTTOM_M) / 2 + (TOP_M - BOTTOM_M) / 2 * np.sin(
            np.linspace(-np.pi / 2, np.pi / 2, 8001)
        )
        front = self.depth_m / 2 * self.section_scale(z)
        step = np.hypot(np.diff(z), np.diff(front))
        arc = np.concatenate([[0.0], np.cumsum(step)])
        return z, arc - np.interp(0.0, z, arc)

    @property
    def girth_m(self) -> float:
        """Circumference of the largest section."""
        arc = self._arc_table[1]
        return float(arc[-1] - arc[0])

    def height_of(self, up_m: NDArray[np.float64]) -> NDArray[np.float64]:
        """Level z of an arc along the midline."""
        z, arc = self._height_table
        return np.asarray(np.interp(up_m, arc, z))

    def angle_of(
        self, left_m: NDArray[np.float64], z_m: NDArray[np.float64]
    ) -> NDArray[np.float64]:
        """Angle from the front of an arc along the section at a level."""
        angle, arc = self._arc_table
        return np.asarray(np.interp(left_m / self.section_scale(z_m), arc, angle))

    def arc_of(self, angle: float) -> float:
        """Arc along the largest section, from the front to an angle."""
        angles, arc = self._arc_table
        return float(np.interp(angle, angles, arc))

    def skin_points(
        self, left_m: NDArray[np.float64], up_m: NDArray[np.float64]
    ) -> NDArray[np.float64]:
        """Points of the skin by their skin coordinates.

        Returns
        -------
        ndarray, shape (..., 3)
        """
        z = self.height_of(np.asarray(up_m))
        flat = self.outline(self.angle_of(np.asarray(left_m), z))
        flat = flat * self.section_scale(z)[..., None]
        return np.concatenate([flat, np.broadcast_to(z, flat.shape[:-1])[..., None]], axis=-1)

    def chest_sites_m(self) -> NDArray[np.float64]:
        """Skin coordinates (left, up) of V1 to V6, by the anatomical rules.

        V1 and V2 in the fourth space at the sternal borders, V4 in the fifth at the
        midclavicular line, V6 at V4's level at the midaxillary line, V3 and V5 half-way.
        """
        level = -self.interspace_m
        v4 = np.array([self.midclavicular_m, level])
        z6 = float(self.height_of(np.array(level)))
        midaxillary = self.arc_of(np.pi / 2) * float(self.section_scale(np.array(z6)))
        v1, v2 = np.array([-self.sternal_m, 0.0]), np.array([self.sternal_m, 0.0])
        v6 = np.array([midaxillary, level])
        return np.stack([v1, v2, (v2 + v4) / 2, v4, (v4 + v6) / 2, v6])

    def limb_points_m(self) -> NDArray[np.float64]:
        """Points of the trunk where the right arm, left arm and left leg begin."""
        angle = np.array([-np.pi / 2, np.pi / 2])
        scale = float(self.section_scale(np.array(ARM_LEVEL_M)))
        arms = np.column_stack([self.outline(angle) * scale, np.full(2, ARM_LEVEL_M)])
        z = float(self.height_of(np.array(LEG_UP_M)))
        leg = self.outline(np.array([np.deg2rad(LEG_ANGLE_DEG)])) * float(
            self.section_scale(np.array(z))
        )
        return np.concatenate([arms, np.column_stack([leg, [z]])])

    def lungs(self, frequency: int) -> tuple[Surface, Surface]:
        """Right and left lung, as ellipsoids; the left makes room for the heart."""
        a, b = self.breadth_m / 2, self.depth_m / 2
        right = ellipsoid(
            np.array([-0.52 * a, 0.08 * b, 0.040]), np.array([0.33 * a, 0.62 * b, 0.120]), frequency
        )
        left = ellipsoid(
            np.array([0.62 * a, 0.24 * b, 0.045]), np.array([0.26 * a, 0.48 * b, 0.115]), frequency
        )
        return right, left
