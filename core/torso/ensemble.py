"""The torso ensemble: how potentials on the skin vary together, for many trunks and hearts.

A variant is a trunk with a heart in it. Its prior over dipoles makes the potentials of any two
skin sites, against the Wilson terminal, covary as K = F F', with one row of F per site. F is
stored for the limb leads I and II and for a grid of chest sites, from which it is interpolated.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray

from core.errors import ModelError
from core.shipped_files import resources_folder

MODEL_NAME = "torso ensemble"
FILE_NAME = "torso_ensemble.npz"
# Raised whenever the stored form changes; a file of another form is refused.
FILE_FORM = 1
MILLIMETRES = 1000.0


@dataclass(frozen=True, slots=True, eq=False)
class TorsoEnsemble:
    """Factors of all variants.

    Attributes
    ----------
    version : str
    left_mm, up_mm : ndarray, shape (n_left,), (n_up,)
        Skin coordinates of the grid, evenly spaced.
    limb : ndarray, shape (n_variants, 2, rank)
        Factors of leads I and II.
    chart : ndarray, shape (n_variants, n_up, n_left, rank)
        Factors of the grid's sites.
    sites_mm : ndarray, shape (n_variants, 6, 2)
        Skin coordinates (left, up) of V1 to V6 where they belong.
    """

    version: str
    left_mm: NDArray[np.float64]
    up_mm: NDArray[np.float64]
    limb: NDArray[np.float32]
    chart: NDArray[np.float32]
    sites_mm: NDArray[np.float64]

    @property
    def n_variants(self) -> int:
        """How many trunks with hearts."""
        return int(self.limb.shape[0])

    def chest_factors(
        self, variant: int, left_mm: NDArray[np.float64], up_mm: NDArray[np.float64]
    ) -> NDArray[np.float64]:
        """Factors of any chest sites of one variant, by cubic convolution (Keys 1981).

        Parameters
        ----------
        left_mm, up_mm : ndarray, shape (n,)
            Skin coordinates; sites beyond the grid take its border.

        Returns
        -------
        ndarray, shape (n, rank)
        """
        column, across = _cubic_weights(left_mm, self.left_mm)
        row, upward = _cubic_weights(up_mm, self.up_mm)
        around = self.chart[variant][row[:, :, None], column[:, None, :]]
        return np.asarray(np.einsum("nj,ni,njir->nr", upward, across, around, optimize=True))


@lru_cache(maxsize=1)
def load_ensemble() -> TorsoEnsemble:
    """The ensemble that the program ships.

    Raises
    ------
    ModelError
        If the file is missing, damaged or of another form.
    """
    return read_ensemble(resources_folder() / FILE_NAME)


def read_ensemble(path: Path) -> TorsoEnsemble:
    """Read an ensemble from a file that `write_ensemble` wrote."""
    try:
        with np.load(path, allow_pickle=False) as stored:
            if int(stored["form"]) != FILE_FORM:
                raise ModelError(
                    f"{path.name} has form {int(stored['form'])}, this program reads form "
                    f"{FILE_FORM}. Install program and resources of one version."
                )
            scale = stored["chart_scale"].astype(np.float32)
            return TorsoEnsemble(
                version=str(stored["version"]),
                left_mm=stored["left_mm"],
                up_mm=stored["up_mm"],
                limb=stored["limb"],
                chart=stored["chart"] * scale[:, None, None, :],
                sites_mm=stored["sites_mm"],
            )
    except (OSError, ValueError, KeyError) as error:
        raise ModelError(
            f"The torso ensemble {path.name} is missing or damaged. Install the program again."
        ) from error


def write_ensemble(path: Path, ensemble: TorsoEnsemble) -> None:
    """Write an ensemble; the chart in 16-bit steps of each component's largest value."""
    largest = np.abs(ensemble.chart).max(axis=(1, 2))
    scale = np.where(largest > 0, largest, 1.0) / np.float32(32767)
    stored: dict[str, Any] = {
        "form": np.array(FILE_FORM),
        "version": np.array(ensemble.version),
        "left_mm": ensemble.left_mm,
        "up_mm": ensemble.up_mm,
        "limb": ensemble.limb,
        "chart": np.rint(ensemble.chart / scale[:, None, None, :]).astype(np.int16),
        "chart_scale": scale.astype(np.float32),
        "sites_mm": ensemble.sites_mm,
    }
    np.savez_compressed(path, **stored)


def _cubic_weights(
    at: NDArray[np.float64], grid: NDArray[np.float64]
) -> tuple[NDArray[np.int64], NDArray[np.float64]]:
    """Four grid indices around each position and their weights, each of shape (n, 4).

    Beyond a border a node is taken as f(-1) = 3 f(0) - 3 f(1) + f(2), which keeps parabolas
    (Keys 1981, IEEE Trans ASSP 29:1153).
    """
    last = grid.size - 1
    place = np.clip((at - grid[0]) / (grid[1] - grid[0]), 0.0, float(last))
    first = np.minimum(np.floor(place).astype(np.int64), last - 1)
    t = place - first
    weights = np.stack(
        [
            ((-0.5 * t + 1.0) * t - 0.5) * t,
            (1.5 * t - 2.5) * t * t + 1.0,
            ((-1.5 * t + 2.0) * t + 0.5) * t,
            (0.5 * t - 0.5) * t * t,
        ],
        axis=1,
    )
    nodes = first[:, None] + np.arange(-1, 3)[None, :]
    for beyond, outer, inner in (
        (first == 0, 0, (1, 2, 3)),
        (first == last - 1, 3, (2, 1, 0)),
    ):
        share = np.where(beyond, weights[:, outer], 0.0)
        weights[:, inner] += share[:, None] * np.array([3.0, -3.0, 1.0])
        weights[:, outer] -= share
    return np.clip(nodes, 0, last), weights
