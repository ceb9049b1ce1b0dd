"""An invented person: ventricles and atria in a trunk that the torso ensemble does not hold."""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from core.torso.body import Body
from core.torso.boundary_elements import BodySolver, Region
from core.torso.build_ensemble import CHART_LEFT_MM, CHART_UP_MM, SolvedBody, lead_fields
from core.torso.ensemble import MILLIMETRES, TorsoEnsemble
from core.torso.skin_mesh import mesh_skin
from core.torso.surfaces import ellipsoid
from sample_records.maker.heart import GRID_M, Ventricles

# Coarse boxes that the currents are gathered into; far enough from every electrode.
BOX_M = 0.010
# Conductivity inside the cells along the wall; scales every lead alike (chosen for an R of a
# millivolt or so).
INTRACELLULAR_S_PER_M = 0.11
# Right and left atrium, in heart coordinates.
ATRIA_M = np.array([[0.012, 0.000, -0.052], [-0.016, 0.012, -0.056]])


@dataclass(frozen=True, slots=True)
class Anatomy:
    """Where the heart lies and how it is turned, in the trunk's coordinates."""

    heart_at_m: tuple[float, float, float] = (0.026, -0.040, -0.012)
    axis_down_deg: float = 30.0  # of the long axis, under the transverse plane
    axis_front_deg: float = 36.0  # before the frontal plane
    roll_deg: float = 20.0  # of the right ventricle, from straight to the right, forwards


@dataclass(frozen=True)
class Trunk:
    """The trunk: squarer than the ensemble's, with other lungs and conductivities."""

    body: Body = field(
        default_factory=lambda: Body(
            0.296, 0.246, exponent=2.7, sternal_m=0.031, midclavicular_m=0.093, interspace_m=0.029
        )
    )
    torso_s_per_m: float = 0.22
    lung_s_per_m: float = 0.065
    right_lung_m: tuple[tuple[float, float, float], tuple[float, float, float]] = (
        (-0.072, 0.014, 0.046),
        (0.046, 0.066, 0.118),
    )
    left_lung_m: tuple[tuple[float, float, float], tuple[float, float, float]] = (
        (0.094, 0.034, 0.052),
        (0.034, 0.054, 0.108),
    )

    def solve(self) -> SolvedBody:
        """Mesh the trunk and factor its system."""
        mesh = mesh_skin(self.body)
        regions = [Region(mesh.surface, self.torso_s_per_m, 0.0)]
        for centre, half in (self.right_lung_m, self.left_lung_m):
            lung = ellipsoid(np.array(centre), np.array(half), 5)
            regions.append(Region(lung, self.lung_s_per_m, self.torso_s_per_m))
        return SolvedBody(self.body, mesh, BodySolver(regions))


def rotation(anatomy: Anatomy) -> NDArray[np.float64]:
    """Columns: the heart's x, y and z axes in the trunk's coordinates."""
    down, front = np.deg2rad([anatomy.axis_down_deg, anatomy.axis_front_deg])
    long_axis = np.array(
        [
            np.sqrt(max(0.0, 1 - np.sin(down) ** 2 - np.sin(front) ** 2)),
            -np.sin(front),
            -np.sin(down),
        ]
    )
    roll = np.deg2rad(anatomy.roll_deg)
    to_right = np.array([-np.cos(roll), -np.sin(roll), 0.0])
    x = to_right - (to_right @ long_axis) * long_axis
    x /= np.linalg.norm(x)
    return np.column_stack([x, np.cross(long_axis, x), long_axis])


class Leads:
    """Leads of one heart in one trunk: potentials of any chest site for membrane potentials.

    Parameters
    ----------
    solved : SolvedBody
    heart : Ventricles
    anatomy : Anatomy
    right_share : float
        Of the right ventricle's currents.
    """

    def __init__(
        self, solved: SolvedBody, heart: Ventricles, anatomy: Anatomy, *, right_share: float
    ) -> None:
        turn = rotation(anatomy)
        at = heart.at_m @ turn.T + np.array(anatomy.heart_at_m)
        a, b = heart.edges.T
        middle = (at[a] + at[b]) / 2
        direction = at[b] - at[a]
        # The right wall is thinner than the grid can draw it, so its currents count for less.
        self._share = np.where(heart.right[heart.edges].all(axis=1), right_share, 1.0)
        boxes, box = np.unique(np.floor(middle / BOX_M), axis=0, return_inverse=True)
        n_boxes = boxes.shape[0]
        counts = np.bincount(box.ravel(), minlength=n_boxes)
        centres = np.stack(
            [np.bincount(box.ravel(), middle[:, k], minlength=n_boxes) / counts for k in range(3)],
            axis=1,
        )
        atria = np.array(anatomy.heart_at_m) + ATRIA_M @ turn.T
        dipoles = np.concatenate([centres, atria])
        limb, chart = lead_fields(solved, dipoles)
        self._field = TorsoEnsemble(
            version="invented",
            left_mm=CHART_LEFT_MM,
            up_mm=CHART_UP_MM,
            limb=limb[None].astype(np.float32),
            chart=chart[None].astype(np.float32),
            sites_mm=solved.body.chest_sites_m()[None] * MILLIMETRES,
        )
        self._edges, self._box, self._direction = heart.edges, box.ravel(), direction
        self._n_boxes, self._n_voxels = n_boxes, heart.at_m.shape[0]

    def field(self, shifts_mm: NDArray[np.float64]) -> NDArray[np.float64]:
        """Lead field of the eight leads, chest electrodes displaced by (left, up), in mm.

        Parameters
        ----------
        shifts_mm : ndarray, shape (6, 2)

        Returns
        -------
        ndarray, shape (8, 3 n_dipoles)
            In V per A m.
        """
        sites = self._field.sites_mm[0] + shifts_mm
        chest = self._field.chest_factors(0, sites[:, 0], sites[:, 1])
        return np.concatenate([self._field.limb[0].astype(np.float64), chest])

    def voxel_weights(self, shifts_mm: NDArray[np.float64]) -> NDArray[np.float64]:
        """Weights of the voxels' potentials (mV) in the eight leads (mV), shape (8, n)."""
        by_box = self.field(shifts_mm)[:, : 3 * self._n_boxes].reshape(8, -1, 3)
        by_edge = np.einsum("lec,ec->le", by_box[:, self._box], self._direction)
        # Current from a to b along an edge: conductivity x cross-section x fall / length; its
        # dipole moment is that times the length.
        by_edge *= INTRACELLULAR_S_PER_M * GRID_M * self._share
        weights = np.zeros((8, self._n_voxels))
        for lead in range(8):
            weights[lead] = np.bincount(
                self._edges[:, 0], by_edge[lead], minlength=self._n_voxels
            ) - np.bincount(self._edges[:, 1], by_edge[lead], minlength=self._n_voxels)
        return weights

    def atrial_field(self, shifts_mm: NDArray[np.float64]) -> NDArray[np.float64]:
        """Lead field of the two atrial dipoles, shape (8, 2, 3)."""
        return self.field(shifts_mm)[:, 3 * self._n_boxes :].reshape(8, 2, 3)
