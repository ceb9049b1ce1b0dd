"""Interchanged electrodes, found by one recording's witness against the other.

The other recording of the same person is the best witness: an interchange that, undone, makes
the leads agree, is found however unusual the heart. Chest electrodes that were displaced make
leads alike too, so a chest interchange is named only where the other chest leads stayed.
"""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

from core.quality.interchange import Interchange, chest_interchanges, limb_interchanges

# How many times smaller the mean squared difference of the changed leads must become. Chosen on
# halves of LUDB records 1-100, one of them rearranged: no unchanged half reaches 0.9.
LIMB_TIMES, CHEST_TIMES = 2.0, 1.25
# So many times settles it, whatever else changed.
CERTAIN_TIMES = 8.0
# What the chest leads may still differ by, as a share of their root mean square: so many times
# what the limb leads differ by, which no chest electrode changes.
TIMES_LIMB_DIFFERENCE = 4.0
LEAST_SHARE, MOST_SHARE = 0.2, 0.5
# Differences under this are noise, in mV.
NOISE_MV = 0.004


def limb_interchange_between(
    earlier_mv: NDArray[np.float64], later_mv: NDArray[np.float64]
) -> Interchange | None:
    """The limb interchange that turns one recording's leads into the other's, if there is one.

    Parameters
    ----------
    earlier_mv, later_mv : ndarray, shape (8, n)
        Representative beats from P to T, laid on each other in time by their chest leads.

    Returns
    -------
    Interchange or None
        ``later = matrix @ earlier``. Which of the two recordings holds it, the pair cannot say.
    """
    limb = _best(limb_interchanges(), earlier_mv, later_mv)
    return limb if _times_better(limb, earlier_mv, later_mv) > LIMB_TIMES else None


def chest_interchange_between(
    earlier_mv: NDArray[np.float64], later_mv: NDArray[np.float64]
) -> Interchange | None:
    """Two chest leads that took each other's places between the recordings, if any did.

    Parameters
    ----------
    earlier_mv, later_mv : ndarray, shape (8, n)
        Representative beats from P to T, laid on each other by their limb leads, which agree.
    """
    chest = _best(chest_interchanges(), earlier_mv, later_mv)
    times = _times_better(chest, earlier_mv, later_mv)
    if times > CERTAIN_TIMES:
        return chest
    if times <= CHEST_TIMES:
        return None
    allowed = np.clip(
        TIMES_LIMB_DIFFERENCE * _share(earlier_mv[:2], later_mv[:2]), LEAST_SHARE, MOST_SHARE
    )
    stayed = np.setdiff1d(np.arange(2, 8), chest.rows)
    undone = chest.undone(later_mv)
    agree = all(_share(earlier_mv[rows], undone[rows]) < allowed for rows in (stayed, chest.rows))
    return chest if agree else None


def _best(
    candidates: Iterable[Interchange],
    earlier_mv: NDArray[np.float64],
    later_mv: NDArray[np.float64],
) -> Interchange:
    return max(candidates, key=lambda one: _times_better(one, earlier_mv, later_mv))


def _times_better(
    interchange: Interchange, earlier_mv: NDArray[np.float64], later_mv: NDArray[np.float64]
) -> float:
    """How many times less the changed leads differ once the interchange is allowed for."""
    rows = interchange.rows
    as_recorded = interchange.matrix[rows] @ earlier_mv
    plain = np.mean((later_mv[rows] - earlier_mv[rows]) ** 2)
    allowed_for = np.mean((later_mv[rows] - as_recorded) ** 2)
    return float(plain / (allowed_for + NOISE_MV**2))


def _share(one_mv: NDArray[np.float64], other_mv: NDArray[np.float64]) -> float:
    """Root mean square difference of leads, as a share of their own."""
    power = (np.sum(one_mv**2) + np.sum(other_mv**2)) / 2
    return float(np.sqrt(np.sum((one_mv - other_mv) ** 2) / max(float(power), 1e-12)))
