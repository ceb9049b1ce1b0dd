"""Persons drawn from the prior of one trunk with one heart: what the model holds to be true."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from core.placement.estimate import LEAST_QRS_REPEAT_MV, LEAST_QRS_REPEAT_SHARE
from core.placement.person import (
    MODEL_NOISE,
    OWN_PART_LENGTH_MM,
    Person,
    Variant,
    weigh_ensemble,
)
from core.torso.ensemble import load_ensemble


@dataclass(frozen=True)
class OneVariant:
    """An ensemble of one variant; ``rng`` draws the hearts' sources."""

    person: Person
    rng: np.random.Generator

    @property
    def variant(self) -> Variant:
        return self.person.variants[0]

    def leads(self, n: int) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
        """Sources, and the eight leads that they give, each with a part that no source gives."""
        factors = self.variant.factors
        sources = self.rng.normal(size=(factors.shape[1], n))
        return sources, factors @ sources + MODEL_NOISE * self.rng.normal(size=(8, n))

    def field_change(
        self, sources: NDArray[np.float64], electrode: int, left_mm: float, up_mm: float
    ) -> NDArray[np.float64]:
        """What the sources alone give at the new site, less what they give at the old."""
        ensemble = self.person.ensemble
        site = ensemble.sites_mm[0, electrode]
        here, there = ensemble.chest_factors(
            0, site[0] + np.array([0.0, left_mm]), site[1] + np.array([0.0, up_mm])
        )
        return (there - here) / self.variant.size @ sources

    def change(
        self, sources: NDArray[np.float64], electrode: int, left_mm: float, up_mm: float
    ) -> NDArray[np.float64]:
        """What the move really does to the lead: the sources' part and the lead's own."""
        likeness = np.exp(-0.5 * (left_mm**2 + up_mm**2) / OWN_PART_LENGTH_MM**2)
        own = MODEL_NOISE * np.sqrt(2 * (1 - likeness)) * self.rng.normal(size=sources.shape[1])
        return self.field_change(sources, electrode, left_mm, up_mm) + own

    def repeat(self, leads: NDArray[np.float64]) -> NDArray[np.float64]:
        """What another day does to every lead, as little as the estimate allows for."""
        size = np.sqrt(np.mean(leads**2, axis=1, keepdims=True))
        spread = np.hypot(LEAST_QRS_REPEAT_SHARE * size, LEAST_QRS_REPEAT_MV)
        return spread * self.rng.normal(size=leads.shape)


def one_variant(index: int, seed: int, usable: NDArray[np.bool_] | None = None) -> OneVariant:
    whole = load_ensemble()
    ensemble = replace(
        whole,
        limb=whole.limb[[index]],
        chart=whole.chart[[index]],
        sites_mm=whole.sites_mm[[index]],
    )
    rng = np.random.default_rng(seed)
    usable = np.ones(8, dtype=bool) if usable is None else usable
    # With one variant the leads weigh nothing; any will do.
    person = weigh_ensemble(ensemble, [rng.normal(size=(8, 9))], usable)
    return OneVariant(person, rng)
