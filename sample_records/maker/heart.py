"""An invented pair of ventricles: activation, action potentials and the currents they drive.

A thick left and a thin right wall on a grid. Activation spreads from a few early sites, fast
along the endocardium and slowly through the wall. Every voxel runs an action potential; currents
flow along its gradient, and a region of injury has a raised resting and a lowered plateau
potential. Values are common ones of physiology textbooks, from memory; the tests need a heart
that is not the program's own model of one, not this heart in particular.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import coo_matrix
from scipy.sparse.csgraph import dijkstra
from scipy.special import expit

GRID_M = 0.0035
REST_MV, TOP_MV = -85.0, 20.0
# Left ventricle: half-axes outside and inside, and where the base cuts it off.
LEFT_OUTER_M = np.array([0.031, 0.031, 0.050])
LEFT_INNER_M = np.array([0.020, 0.020, 0.040])
BASE_M = -0.028
# Right ventricle: a shell beside the left, on the side of +x of the heart.
RIGHT_CENTRE_M = np.array([0.020, 0.0, -0.006])
RIGHT_OUTER_M = np.array([0.034, 0.036, 0.041])
RIGHT_INNER_M = np.array([0.0295, 0.0315, 0.0365])


@dataclass(frozen=True, slots=True, eq=False)
class Ventricles:
    """Voxels of the walls, in heart coordinates: +z to the apex, +x to the right ventricle.

    Attributes
    ----------
    at_m : ndarray, shape (n, 3)
    depth : ndarray, shape (n,)
        0 at the endocardium, 1 at the epicardium.
    right : ndarray of bool, shape (n,)
        Voxels of the right ventricle's free wall.
    edges : ndarray of int, shape (n_edges, 2)
        Neighbours along the grid's axes.
    """

    at_m: NDArray[np.float64]
    depth: NDArray[np.float64]
    right: NDArray[np.bool_]
    edges: NDArray[np.int64]


def build_ventricles() -> Ventricles:
    """The invented ventricles."""
    steps = np.arange(-0.060, 0.0601, GRID_M)
    grid = np.stack(np.meshgrid(steps, steps, steps, indexing="ij"), axis=-1).reshape(-1, 3)
    below_base = grid[:, 2] > BASE_M
    outer, inner = _level(grid, LEFT_OUTER_M), _level(grid, LEFT_INNER_M)
    left = (outer <= 1) & (inner > 1) & below_base
    beside = grid - RIGHT_CENTRE_M
    right_outer, right_inner = _level(beside, RIGHT_OUTER_M), _level(beside, RIGHT_INNER_M)
    right = (right_outer <= 1) & (right_inner > 1) & (outer > 1) & below_base
    wall = left | right
    depth = np.where(left, _between(inner, outer), _between(right_inner, right_outer))[wall]
    at = grid[wall]
    index = np.full(grid.shape[0], -1)
    index[wall] = np.arange(at.shape[0])
    n = steps.size
    cube = index.reshape(n, n, n)
    pairs = []
    for axis in range(3):
        a = cube.take(np.arange(n - 1), axis=axis).ravel()
        b = cube.take(np.arange(1, n), axis=axis).ravel()
        both = (a >= 0) & (b >= 0)
        pairs.append(np.column_stack([a[both], b[both]]))
    return Ventricles(at, depth, right[wall], np.concatenate(pairs))


def _level(points_m: NDArray[np.float64], half_axes_m: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.asarray(np.sqrt(((points_m / half_axes_m) ** 2).sum(axis=1)))


def _between(inner: NDArray[np.float64], outer: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.clip((inner - 1) / np.maximum(inner - outer, 1e-9), 0.0, 1.0)


@dataclass(frozen=True, slots=True)
class Conduction:
    """Where activation starts, when, and how fast it spreads.

    ``endocardium_m_per_s`` of None means that nothing conducts fast, as after an ectopic beat
    that does not enter the conduction system.
    """

    early_sites_mm: tuple[tuple[float, float, float], ...]
    early_ms: tuple[float, ...]
    wall_m_per_s: float
    endocardium_m_per_s: float | None


def activation_ms(heart: Ventricles, conduction: Conduction) -> NDArray[np.float64]:
    """When each voxel is activated: shortest time from any early site, shape (n,)."""
    n = heart.at_m.shape[0]
    near = _all_neighbours(heart)
    length = np.linalg.norm(heart.at_m[near[:, 0]] - heart.at_m[near[:, 1]], axis=1)
    speed = np.full(near.shape[0], conduction.wall_m_per_s)
    if conduction.endocardium_m_per_s is not None:
        inside = (heart.depth < 0.35) | (heart.right & (heart.depth < 0.6))
        speed[inside[near].all(axis=1)] = conduction.endocardium_m_per_s
    time_ms = 1000.0 * length / speed
    sites_m = np.array(conduction.early_sites_mm) / 1000.0
    starts = [int(np.argmin(np.linalg.norm(heart.at_m - site, axis=1))) for site in sites_m]
    rows = np.concatenate([near[:, 0], np.full(len(starts), n)])
    columns = np.concatenate([near[:, 1], starts])
    # The head start keeps every weight above zero, which the graph needs.
    weights = np.concatenate([time_ms, np.array(conduction.early_ms) + 1.0])
    graph = coo_matrix((weights, (rows, columns)), shape=(n + 1, n + 1)).tocsr()
    return np.asarray(dijkstra(graph, directed=False, indices=n)[:n] - 1.0)


def _all_neighbours(heart: Ventricles) -> NDArray[np.int64]:
    """Pairs of voxels that touch at a face, an edge or a corner."""
    key = np.rint(heart.at_m / GRID_M).astype(np.int64) + 64
    flat = (key[:, 0] * 256 + key[:, 1]) * 256 + key[:, 2]
    order = np.argsort(flat)
    pairs = []
    for dx in (-1, 0, 1):
        for dy in (-1, 0, 1):
            for dz in (-1, 0, 1):
                step = (dx * 256 + dy) * 256 + dz
                if step <= 0:
                    continue
                place = np.clip(np.searchsorted(flat[order], flat + step), 0, flat.size - 1)
                found = flat[order][place] == flat + step
                pairs.append(np.column_stack([np.flatnonzero(found), order[place[found]]]))
    return np.concatenate(pairs)


@dataclass(frozen=True, slots=True)
class Repolarisation:
    """How long action potentials last, in ms, at a rate of 60 a minute."""

    usual_ms: float = 300.0
    epicardium_ms: float = -26.0  # at the epicardium, against the endocardium
    apex_ms: float = -14.0  # at the apex, against the base
    right_ms: float = -12.0  # in the right ventricle
    later_ms: float = -0.35  # per ms of later activation
    width_ms: float = 17.0  # of the fall


@dataclass(frozen=True, slots=True, eq=False)
class Injury:
    """A region of injury: its middle in heart coordinates, its radius and its degree."""

    centre_mm: tuple[float, float, float]
    radius_mm: float
    raised_rest_mv: float
    lowered_plateau_mv: float
    shortened_ms: float

    def degree(self, heart: Ventricles) -> NDArray[np.float64]:
        """0 outside to 1 inside, shape (n,)."""
        away_mm = 1000.0 * heart.at_m - np.array(self.centre_mm)
        return np.asarray(expit((self.radius_mm - np.linalg.norm(away_mm, axis=1)) / 3.0))


def potentials_mv(
    heart: Ventricles,
    activated_ms: NDArray[np.float64],
    time_ms: NDArray[np.float64],
    repolarisation: Repolarisation,
    *,
    duration_scale: float = 1.0,
    injury: Injury | None = None,
) -> NDArray[np.float64]:
    """Membrane potential of every voxel.

    Returns
    -------
    ndarray, shape (n, n_times)
    """
    apical = (heart.at_m[:, 2] - BASE_M) / (LEFT_OUTER_M[2] - BASE_M)
    r = repolarisation
    duration = duration_scale * (
        r.usual_ms
        + r.epicardium_ms * heart.depth
        + r.apex_ms * apical
        + r.right_ms * heart.right
        + r.later_ms * activated_ms
    )
    rest = np.full(heart.at_m.shape[0], REST_MV)
    plateau = np.zeros(heart.at_m.shape[0])
    if injury is not None:
        degree = injury.degree(heart)
        rest = rest + injury.raised_rest_mv * degree
        plateau = plateau + injury.lowered_plateau_mv * degree
        duration = duration - injury.shortened_ms * degree
    since = time_ms[None, :] - activated_ms[:, None]
    share = np.clip(since / duration[:, None], 0.0, 1.0)
    up = expit(since / 1.3)
    down = expit((duration[:, None] - since) / r.width_ms)
    top = TOP_MV - 28.0 * share - plateau[:, None]
    return np.asarray(rest[:, None] + (top - rest[:, None]) * up * down)
