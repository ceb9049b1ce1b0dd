"""Build the torso ensemble: ``python -m core.torso.build_ensemble``.

Writes resources/torso_ensemble.npz. The same libraries on the same machine give the same bytes.
"""

from __future__ import annotations

import sys
from dataclasses import dataclass
from itertools import product
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from core.shipped_files import resources_folder
from core.torso.body import Body
from core.torso.boundary_elements import BodySolver, Region
from core.torso.ensemble import FILE_NAME, MILLIMETRES, TorsoEnsemble, write_ensemble
from core.torso.skin_mesh import SkinMesh, mesh_skin
from core.torso.sources import HeartPlace, ventricular_dipoles

VERSION = "1"
# Trunk and lung (common model set, from memory; muscle .25, lung .067-.083 by Rush's set).
TORSO_S_PER_M, LUNG_S_PER_M = 0.20, 0.05
LUNG_FREQUENCY = 6
# Chests from a small woman's to a large man's, flat and deep (ANSUR II, 5th to 95th
# percentile of breadth and depth; a little less deep, for the depth there includes the breast).
BODIES = (
    Body(0.262, 0.220, sternal_m=0.030, midclavicular_m=0.088, interspace_m=0.027),
    Body(0.285, 0.250),
    Body(0.300, 0.230),
    Body(0.312, 0.280, sternal_m=0.034, midclavicular_m=0.102, interspace_m=0.031),
)
# Ventricles: chosen on LUDB records 1-50 by evidence and by the error of left-out leads; their
# surface then lies 25 to 45 mm behind the skin (echocardiography: 32 +- 8 mm).
LEFT_M = (0.015, 0.030)
BEHIND_SKIN_M = (0.075, 0.090)
UP_M = (-0.020, 0.0, 0.020)
CHART_LEFT_MM: NDArray[np.float64] = np.arange(-140.0, 351.0, 10.0)
CHART_UP_MM: NDArray[np.float64] = np.arange(-140.0, 121.0, 10.0)
# Of the prior variance, how much belongs to all dipoles being alike, as in a single dipole
# spread over the ventricles. The evidence of LUDB records 1-50 is flat from 0.3 to 0.6.
DIPOLAR_SHARE = 0.4
# Components kept: the first left out is under 0.1 % of the largest.
RANK = 24


@dataclass(frozen=True, slots=True, eq=False)
class SolvedBody:
    """A body with its mesh, its lungs and its factored boundary-element system."""

    body: Body
    mesh: SkinMesh
    solver: BodySolver


def solve_body(
    body: Body, *, torso_s_per_m: float = TORSO_S_PER_M, lung_s_per_m: float = LUNG_S_PER_M
) -> SolvedBody:
    """Mesh a body and factor its system."""
    mesh = mesh_skin(body)
    regions = [Region(mesh.surface, torso_s_per_m, 0.0)]
    regions += [Region(lung, lung_s_per_m, torso_s_per_m) for lung in body.lungs(LUNG_FREQUENCY)]
    return SolvedBody(body, mesh, BodySolver(regions))


def lead_fields(
    solved: SolvedBody, dipoles_m: NDArray[np.float64]
) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Lead fields of leads I and II and of the chart's sites against the Wilson terminal.

    Parameters
    ----------
    dipoles_m : ndarray, shape (m, 3)

    Returns
    -------
    tuple of ndarray (limb, chart), shapes (2, 3 m) and (n_up, n_left, 3 m)
        In V per A m.
    """
    on_skin = solved.solver.skin_potential(dipoles_m)
    limbs = _near(solved.mesh.surface.points_m, solved.body.limb_points_m()) @ on_skin
    right_arm, left_arm, left_leg = limbs
    chart = solved.mesh.chart_values(
        solved.body, on_skin, CHART_LEFT_MM / MILLIMETRES, CHART_UP_MM / MILLIMETRES
    )
    return np.stack([left_arm - right_arm, left_leg - right_arm]), chart - limbs.mean(axis=0)


def _near(points_m: NDArray[np.float64], at_m: NDArray[np.float64]) -> NDArray[np.float64]:
    """Weights of the four points nearest to each position: a limb is as wide as that."""
    weights = np.zeros((at_m.shape[0], points_m.shape[0]))
    for row, position in enumerate(at_m):
        distance = np.linalg.norm(points_m - position, axis=1)
        nearest = np.argsort(distance, kind="stable")[:4]
        share = 1.0 / (distance[nearest] + 1e-3)
        weights[row, nearest] = share / share.sum()
    return weights


def build_variant(solved: SolvedBody, place: HeartPlace) -> TorsoEnsemble:
    """A one-variant ensemble, scaled so that the eight leads' mean variance is 1.

    The prior over the dipoles' moments is a mixture: each on its own, and all alike.
    """
    dipoles, variance = ventricular_dipoles(solved.body, place, solved.body.lungs(LUNG_FREQUENCY))
    limb, chart = lead_fields(solved, dipoles)
    field = np.concatenate([limb, chart.reshape(-1, limb.shape[1])])
    own = field * np.repeat(np.sqrt(variance), 3)
    alike = np.einsum("smd,m->sd", field.reshape(field.shape[0], -1, 3), variance)
    parts = [
        np.sqrt(share / _mean_lead_variance(solved.body, part)) * part
        for part, share in ((own, 1.0 - DIPOLAR_SHARE), (alike, DIPOLAR_SHARE))
    ]
    left, size, _ = np.linalg.svd(np.concatenate(parts, axis=1), full_matrices=False)
    # A singular vector's sign is arbitrary; fix it, so that every build gives the same file.
    sign = np.sign(left[np.abs(left).argmax(axis=0), np.arange(left.shape[1])])
    return _one_variant(solved.body, (left * sign * size)[:, :RANK])


def _one_variant(body: Body, factors: NDArray[np.float64]) -> TorsoEnsemble:
    """Factors of leads I and II and of the chart's sites, row by row, as an ensemble of one."""
    shape = (CHART_UP_MM.size, CHART_LEFT_MM.size, factors.shape[1])
    return TorsoEnsemble(
        version=VERSION,
        left_mm=CHART_LEFT_MM,
        up_mm=CHART_UP_MM,
        limb=factors[None, :2].astype(np.float32),
        chart=factors[2:].reshape(1, *shape).astype(np.float32),
        sites_mm=body.chest_sites_m()[None] * MILLIMETRES,
    )


def _mean_lead_variance(body: Body, factors: NDArray[np.float64]) -> float:
    one = _one_variant(body, factors)
    sites = one.sites_mm[0]
    leads = np.concatenate([one.limb[0], one.chest_factors(0, sites[:, 0], sites[:, 1])])
    return float(np.mean((leads**2).sum(axis=1)))


def build_ensemble() -> TorsoEnsemble:
    """Build every variant."""
    parts = []
    places = [HeartPlace(*at) for at in product(LEFT_M, BEHIND_SKIN_M, UP_M)]
    for body in BODIES:
        solved = solve_body(body)
        for place in places:
            parts.append(build_variant(solved, place))
            sys.stderr.write(f"\rvariant {len(parts)} of {len(BODIES) * len(places)}")
    sys.stderr.write("\n")
    return TorsoEnsemble(
        version=VERSION,
        left_mm=CHART_LEFT_MM,
        up_mm=CHART_UP_MM,
        limb=np.concatenate([part.limb for part in parts]),
        chart=np.concatenate([part.chart for part in parts]),
        sites_mm=np.concatenate([part.sites_mm for part in parts]),
    )


def main(arguments: list[str]) -> int:
    """Build and write; the target may be given."""
    target = Path(arguments[0]) if arguments else resources_folder() / FILE_NAME
    write_ensemble(target, build_ensemble())
    return 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
