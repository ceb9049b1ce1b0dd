"""The change that the estimated shift would make, and what remains of the recorded one."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.special import ndtri

from core.measures.lead_values import COMPARED
from core.measures.report import RecordingReport
from core.placement.estimate import ShiftPosterior
from core.placement.foretell import foretell_measures
from core.placement.person import Person
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.settings import Settings


@dataclass(frozen=True, slots=True, eq=False)
class Expected:
    """What the QRS's shift estimate foretells for every measure.

    Attributes
    ----------
    change : dict of measure to ndarray, shape (12,)
        Mean foretold change; 0 in limb leads.
    draws : dict of measure to ndarray, shape (12, n_draws)
        Foretold changes with all that is uncertain in them, the repeat noise included.
    gain : dict of chest lead to ndarray, shape (8,)
        Mean gain of the drawn shifts.
    """

    change: dict[str, NDArray[np.float64]]
    draws: dict[str, NDArray[np.float64]]
    gain: dict[str, NDArray[np.float64]]


def expected_changes(
    person: Person,
    report: RecordingReport,
    shifts: dict[str, ShiftPosterior],
    noise: dict[str, NDArray[np.float64]],
    settings: Settings,
    rng: np.random.Generator,
) -> Expected:
    """Foretell every measure's change from the posterior of the shifts.

    Parameters
    ----------
    report : RecordingReport
        Of the earlier recording, from which the shifts start.
    noise : dict of measure to ndarray, shape (12,)
        Half-width of the repeat noise.
    """
    z = float(ndtri(0.5 + settings.confidence / 2))
    n = settings.draws
    change = {name: np.zeros(12) for name in COMPARED}
    draws = {
        name: np.nan_to_num(noise[name] / z)[:, None] * rng.normal(size=(12, n))
        for name in COMPARED
    }
    gain = {}
    for electrode, lead in enumerate(CHEST_LEADS):
        row = TWELVE_LEADS.index(lead)
        foretold = foretell_measures(person, report, electrode, shifts[lead].draw(n, rng))
        gain[lead] = foretold.gain.mean(axis=0)
        for name in COMPARED:
            known = foretold.change[name]
            known = known[~np.isnan(known)]
            change[name][row] = known.mean() if known.size else np.nan
            draws[name][row] += foretold.change[name]
            draws[name][row] += foretold.model_sd[name] * rng.normal(size=n)
    return Expected(change, draws, gain)


def tail_probability(
    expected: Expected,
    recorded: dict[str, NDArray[np.float64]],
    measures: tuple[str, ...],
    rows: list[int],
) -> float | None:
    """How rarely placement and repeat noise give changes at least this unlike the expected.

    The distance of the recorded changes from the mean of the draws, in the draws' own
    covariance, is ranked among the draws' distances.

    Parameters
    ----------
    recorded : dict of measure to ndarray, shape (12,)
    measures : tuple of str
        That count.
    rows : list of int
        Leads that count; they must be independent of one another.

    Returns
    -------
    float or None
        Above 0 and at most 1; None where nothing can be compared.
    """
    drawn = np.concatenate([expected.draws[name][rows] for name in measures])
    seen = np.concatenate([recorded[name][rows] for name in measures])
    known = ~np.isnan(seen) & ~np.isnan(drawn).any(axis=1)
    if not known.any():
        return None
    drawn, seen = drawn[known], seen[known]
    centre = drawn.mean(axis=1, keepdims=True)
    precision = np.linalg.inv(np.cov(drawn).reshape(seen.size, seen.size))
    away = drawn - centre
    distance = np.einsum("an,ab,bn->n", away, precision, away, optimize=True)
    off = seen - centre[:, 0]
    return float((1 + np.sum(distance >= off @ precision @ off)) / (1 + distance.size))
