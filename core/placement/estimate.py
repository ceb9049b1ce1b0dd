"""Where the electrodes went, from how the QRS changed.

The QRS hardly changes with ischaemia and strongly with placement. Given the earlier leads, a
chest lead depends on its own electrode's shift alone, so the posterior falls apart into six
over two directions each, evaluated on a grid. ST and T are never looked at.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.special import logsumexp

from core.placement.foretell import FIRST_CHEST_ROW, Displacements
from core.placement.person import Person, shift_electrode
from core.recordings.leads import CHEST_LEADS
from core.settings import Settings

GRID_STEP_MM = 8.0
GRID_REACH_MM = 88.0
# A QRS of some hundred samples holds about so many independent ones: its leads are spanned by
# few source patterns, each of which the model foretells as a whole or misses as a whole.
EFFECTIVE_SAMPLES = 4.0
# Root mean square change of a chest QRS, as a share of the lead, that posture, breath and day
# make without any shift; the limb leads' own change, which no chest shift makes, can raise it.
LEAST_QRS_REPEAT_SHARE = 0.05
LEAST_QRS_REPEAT_MV = 0.010


@dataclass(frozen=True, slots=True, eq=False)
class ShiftPosterior:
    """Posterior over one electrode's shift, on a grid, for every variant.

    Attributes
    ----------
    left_mm, up_mm : ndarray, shape (n_cells,)
        Middles of the grid's cells.
    probability : ndarray, shape (n_variants, n_cells)
        Sums to 1.
    log_support : float
        Log of how much better the QRS's change is explained by a shift than by none (Bayes
        factor); above 0 the QRS points to a shift.
    """

    left_mm: NDArray[np.float64]
    up_mm: NDArray[np.float64]
    probability: NDArray[np.float64]
    log_support: float

    @property
    def points_to_a_shift(self) -> bool:
        """Whether the QRS changed as a shift would change it, rather than by repeat noise."""
        return self.log_support > 0.0

    def range_of(
        self, direction: NDArray[np.float64], confidence: float
    ) -> tuple[float, float, float]:
        """Mean and central range of one direction's marginal.

        Parameters
        ----------
        direction : ndarray, shape (n_cells,)
            `left_mm` or `up_mm`.

        Returns
        -------
        tuple of float (estimate, low, high)
        """
        mass = self.probability.sum(axis=0)
        values, cell = np.unique(direction, return_inverse=True)
        marginal = np.bincount(cell, weights=mass)
        # Each value stands for a cell of the grid's width, filled evenly.
        edges = np.concatenate([values - GRID_STEP_MM / 2, [values[-1] + GRID_STEP_MM / 2]])
        cumulative = np.concatenate([[0.0], np.cumsum(marginal)])
        tail = (1.0 - confidence) / 2
        low, high = np.interp([tail, 1.0 - tail], cumulative / cumulative[-1], edges)
        return float(direction @ mass), float(low), float(high)

    def draw(self, n: int, rng: np.random.Generator) -> Displacements:
        """Draw shifts, spread evenly over their cells."""
        flat = self.probability.ravel()
        chosen = rng.choice(flat.size, size=n, p=flat / flat.sum())
        variant, cell = np.divmod(chosen, self.left_mm.size)
        half = GRID_STEP_MM / 2
        return Displacements(
            variant=variant,
            left_mm=self.left_mm[cell] + rng.uniform(-half, half, n),
            up_mm=self.up_mm[cell] + rng.uniform(-half, half, n),
        )


def estimate_shifts(
    person: Person,
    earlier_qrs_mv: NDArray[np.float64],
    later_qrs_mv: NDArray[np.float64],
    settings: Settings,
) -> dict[str, ShiftPosterior]:
    """Posterior of each chest electrode's shift between two recordings.

    Parameters
    ----------
    earlier_qrs_mv, later_qrs_mv : ndarray, shape (8, n)
        The QRS of both, isoelectric line at 0, laid on each other in time.

    Returns
    -------
    dict of electrode name to ShiftPosterior
    """
    steps = np.arange(-GRID_REACH_MM, GRID_REACH_MM + 1.0, GRID_STEP_MM)
    left, up = (axis.ravel() for axis in np.meshgrid(steps, steps))
    log_prior = -0.25 * (
        (left / max(settings.spread_mm.left, 1.0)) ** 2
        + (up / max(settings.spread_mm.up, 1.0)) ** 2
    )
    log_prior -= logsumexp(log_prior)
    n = earlier_qrs_mv.shape[1]
    second = earlier_qrs_mv @ earlier_qrs_mv.T / n
    repeat_share = _repeat_share(earlier_qrs_mv, later_qrs_mv, person.usable)
    posteriors = {}
    for electrode, name in enumerate(CHEST_LEADS):
        row = FIRST_CHEST_ROW + electrode
        change = later_qrs_mv[row] - earlier_qrs_mv[row]
        cross = earlier_qrs_mv @ change / n
        power = float(change @ change) / n
        repeat = repeat_share**2 * second[row, row] + LEAST_QRS_REPEAT_MV**2
        log_posterior = np.empty((len(person.variants), left.size))
        for position, variant in enumerate(person.variants):
            shift = shift_electrode(person, variant, electrode, left_mm=left, up_mm=up)
            misfit = (
                power
                - 2 * shift.gain @ cross
                + np.einsum("na,ab,nb->n", shift.gain, second, shift.gain, optimize=True)
            )
            scale = person.source_scale(variant, earlier_qrs_mv)
            variance = scale**2 * shift.variance + repeat
            log_posterior[position] = (
                np.log(variant.weight) + log_prior + _log_likelihood(misfit, variance)
            )
        evidence = float(logsumexp(log_posterior))
        posteriors[name] = ShiftPosterior(
            left,
            up,
            probability=np.exp(log_posterior - evidence),
            log_support=evidence - float(_log_likelihood(np.array(power), np.array(repeat))),
        )
    return posteriors


def _log_likelihood(
    misfit: NDArray[np.float64], variance: NDArray[np.float64]
) -> NDArray[np.float64]:
    """Of a mean squared misfit (mV^2) over the QRS, for errors of a variance (mV^2)."""
    return -0.5 * EFFECTIVE_SAMPLES * (misfit / variance + np.log(variance))


def _repeat_share(
    earlier: NDArray[np.float64], later: NDArray[np.float64], usable: NDArray[np.bool_]
) -> float:
    """Relative change of the limb leads' QRS: no chest shift makes it, so it is the body's."""
    limb = np.flatnonzero(usable[:FIRST_CHEST_ROW])
    size = float(np.sum(earlier[limb] ** 2))
    if size == 0.0:
        return LEAST_QRS_REPEAT_SHARE
    change = float(np.sum((later[limb] - earlier[limb]) ** 2))
    return max(LEAST_QRS_REPEAT_SHARE, float(np.sqrt(change / size)))
