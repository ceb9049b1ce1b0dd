"""What interchanged electrodes do to the leads.

A limb interchange permutes the potentials of the right arm, the left arm and the left leg; their
mean, Wilson's terminal, stays, and so do the chest leads. A chest interchange swaps two chest
leads. Each is a fixed 8 x 8 matrix on leads I, II, V1 to V6.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from functools import cache
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from core.recordings.leads import (
    CHEST_LEADS,
    INDEPENDENT_LEADS,
    LIMB_LEADS,
    TWELVE_LEADS,
    independent_from_twelve,
    twelve_from_independent,
)
from core.recordings.recording import Recording

LIMB_ELECTRODES = ("RA", "LA", "LL")
# Potentials of RA, LA and LL against their mean, from leads I and II.
_POTENTIALS = np.array([[-1.0, -1.0], [2.0, -1.0], [-1.0, 2.0]]) / 3.0
_FIRST_CHEST = INDEPENDENT_LEADS.index("V1")


@dataclass(frozen=True, slots=True, eq=False)
class Interchange:
    """Electrodes that took each other's places.

    Attributes
    ----------
    electrodes : tuple of str
        Two, or all three limb electrodes where they went round.
    matrix : ndarray, shape (8, 8)
        Leads as recorded = matrix @ leads as they should be.
    """

    electrodes: tuple[str, ...]
    matrix: NDArray[np.float64]

    @property
    def of_limbs(self) -> bool:
        """Whether limb electrodes are interchanged, rather than chest electrodes."""
        return self.electrodes[0] in LIMB_ELECTRODES

    @property
    def rows(self) -> NDArray[np.intp]:
        """Which of the eight leads it changes."""
        return np.flatnonzero(np.abs(self.matrix - np.eye(8)).sum(axis=1) > 0)

    @property
    def leads(self) -> tuple[str, ...]:
        """Which of the twelve leads it changes."""
        if self.of_limbs:
            return LIMB_LEADS
        return tuple(INDEPENDENT_LEADS[row] for row in self.rows)

    @property
    def reversed(self) -> Interchange:
        """The interchange that takes the leads back."""
        return Interchange(
            self.electrodes, np.asarray(np.linalg.inv(self.matrix), dtype=np.float64)
        )

    def undone(self, leads_mv: NDArray[np.float64]) -> NDArray[np.float64]:
        """Leads as they should be, shape (8, n), from leads as recorded."""
        return np.asarray(np.linalg.inv(self.matrix) @ leads_mv)


def with_interchange_undone(recording: Recording, one: Interchange) -> Recording:
    """A recording with its leads put right, and marked so."""
    leads = one.undone(independent_from_twelve(recording.signal_mv.T))
    signal_mv = recording.signal_mv.copy()
    columns = [TWELVE_LEADS.index(lead) for lead in one.leads]
    signal_mv[:, columns] = twelve_from_independent(leads).T[:, columns]
    signal_mv.setflags(write=False)
    return replace(recording, signal_mv=signal_mv, interchange_undone=one.electrodes)


@cache
def limb_interchanges() -> tuple[Interchange, ...]:
    """The three swaps and the two rounds of the limb electrodes."""
    made = []
    for order in ((1, 0, 2), (2, 1, 0), (0, 2, 1), (1, 2, 0), (2, 0, 1)):
        right, left, leg = _POTENTIALS[list(order)]
        matrix = np.eye(8)
        matrix[0, :2], matrix[1, :2] = left - right, leg - right
        moved = [position for position in range(3) if order[position] != position]
        made.append(Interchange(tuple(LIMB_ELECTRODES[p] for p in moved), matrix))
    return tuple(made)


@cache
def chest_interchanges() -> tuple[Interchange, ...]:
    """All swaps of two chest electrodes."""
    made = []
    for one, other in combinations(range(len(CHEST_LEADS)), 2):
        rows = [_FIRST_CHEST + one, _FIRST_CHEST + other]
        matrix = np.eye(8)
        matrix[rows] = matrix[rows[::-1]]
        made.append(Interchange((CHEST_LEADS[one], CHEST_LEADS[other]), matrix))
    return tuple(made)
