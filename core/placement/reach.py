"""The placement reach: the range of change that electrode shifts alone can produce."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.special import ndtri

from core.measures.lead_values import COMPARED
from core.measures.report import RecordingReport
from core.placement.foretell import Displacements, foretell_measures
from core.placement.moved import FARTHEST_MM
from core.placement.person import Person
from core.recordings.leads import CHEST_LEADS, TWELVE_LEADS
from core.settings import Settings


@dataclass(frozen=True, slots=True, eq=False)
class Reach:
    """Range of each measure's change by placement and repeat noise.

    Attributes
    ----------
    low, high : dict of measure to ndarray, shape (12,)
    gain : dict of chest lead to ndarray, shape (n_draws, 8)
        Gains of the drawn shifts.
    """

    low: dict[str, NDArray[np.float64]]
    high: dict[str, NDArray[np.float64]]
    gain: dict[str, NDArray[np.float64]]


def draw_shifts(person: Person, settings: Settings, rng: np.random.Generator) -> Displacements:
    """Displacements between two recordings, each placed with the stated spread.

    Two placements differ by twice the variance of one.
    """
    n = settings.draws
    between = np.sqrt(2.0)
    left = rng.normal(0.0, between * settings.spread_mm.left, n)
    up = rng.normal(0.0, between * settings.spread_mm.up, n)
    return Displacements(
        variant=rng.choice(len(person.variants), size=n, p=person.weights),
        left_mm=np.clip(left, -FARTHEST_MM, FARTHEST_MM),
        up_mm=np.clip(up, -FARTHEST_MM, FARTHEST_MM),
    )


def placement_reach(
    person: Person,
    report: RecordingReport,
    noise: dict[str, NDArray[np.float64]],
    settings: Settings,
    rng: np.random.Generator,
) -> Reach:
    """The reach of every measure of every lead.

    Chest shifts cannot change a limb lead, so there the reach is the repeat noise itself.

    Parameters
    ----------
    report : RecordingReport
        Of the recording that the shifts start from.
    noise : dict of measure to ndarray, shape (12,)
        Half-width of the repeat noise.
    """
    z = float(ndtri(0.5 + settings.confidence / 2))
    low = {name: -noise[name] for name in COMPARED}
    high = {name: noise[name].copy() for name in COMPARED}
    tail = (1.0 - settings.confidence) / 2
    gain = {}
    for electrode, lead in enumerate(CHEST_LEADS):
        draws = draw_shifts(person, settings, rng)
        foretold = foretell_measures(person, report, electrode, draws)
        gain[lead] = foretold.gain
        row = TWELVE_LEADS.index(lead)
        for name in COMPARED:
            sd = np.hypot(foretold.model_sd[name], noise[name][row] / z)
            change = foretold.change[name] + sd * rng.normal(size=settings.draws)
            known = change[~np.isnan(change)]
            if known.size < settings.draws // 2:
                low[name][row] = high[name][row] = np.nan
                continue
            bounds = np.quantile(known, [tail, 1.0 - tail])
            low[name][row] = min(low[name][row], bounds[0])
            high[name][row] = max(high[name][row], bounds[1])
    return Reach(low, high, gain)
