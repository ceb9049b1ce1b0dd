"""The torso ensemble weighed by one person's own leads.

Eight leads are eight samples of one potential field on the skin. A variant of the ensemble says
how that field varies between the electrodes: covariance K = F F' of the leads, plus what no
variant carries, a noise of a fixed share of the leads' root mean square. How well a variant's K
describes the leads over the beat (its evidence) is its weight.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from core.torso.ensemble import TorsoEnsemble

# What no variant carries, as a share of the root mean square lead. Chosen with the temper on
# LUDB records 1-50 by the error of left-out chest leads, which is flat around both.
MODEL_NOISE = 0.13
# Samples of a beat are not independent, so each counts for little; the evidence per sample is
# raised to this power.
TEMPER = 3.0
# Variants of less weight than this share of the heaviest are left out.
SMALLEST_SHARE = 0.01
# Over this distance a lead's own part, that no variant carries, becomes another's.
OWN_PART_LENGTH_MM = 40.0


@dataclass(frozen=True, slots=True, eq=False)
class Variant:
    """One trunk with a heart, prepared for one person.

    Attributes
    ----------
    index : int
        In the ensemble.
    weight : float
        Share of this variant; all kept variants' weights sum to 1.
    size : float
        By which the ensemble's factors are divided, so that this person's usable leads have a
        mean prior variance of 1.
    factors : ndarray, shape (8, rank)
        Of the leads' own sites; rows of leads that cannot be used are 0.
    precision : ndarray, shape (8, 8)
        Inverse covariance of the usable leads, 0 elsewhere.
    to_gain : ndarray, shape (rank, 8)
        Factor of a site times this is the site's gain from the eight leads.
    """

    index: int
    weight: float
    size: float
    factors: NDArray[np.float64]
    precision: NDArray[np.float64]
    to_gain: NDArray[np.float64]


@dataclass(frozen=True, slots=True, eq=False)
class Person:
    """The ensemble as one person's leads weigh it."""

    ensemble: TorsoEnsemble
    variants: tuple[Variant, ...]
    usable: NDArray[np.bool_]

    @property
    def weights(self) -> NDArray[np.float64]:
        """Weights of the kept variants."""
        return np.array([variant.weight for variant in self.variants])

    def source_scale(self, variant: Variant, leads_mv: NDArray[np.float64]) -> float:
        """Scale of a variant's prior that leads (shape (8,) or (8, n)) call for, in mV."""
        leads_mv = leads_mv.reshape(8, -1)
        power = np.einsum("an,ab,bn->", leads_mv, variant.precision, leads_mv)
        return float(np.sqrt(power / (self.usable.sum() * leads_mv.shape[1])))


@dataclass(frozen=True, slots=True, eq=False)
class Shift:
    """What moving one chest electrode by many displacements does, in one variant.

    Attributes
    ----------
    gain : ndarray, shape (n, 8)
        Change of the electrode's lead = gain @ the eight leads, at every instant.
    variance : ndarray, shape (n,)
        Of that change, for a prior of scale 1 mV.
    """

    gain: NDArray[np.float64]
    variance: NDArray[np.float64]


def weigh_ensemble(
    ensemble: TorsoEnsemble, beats_mv: list[NDArray[np.float64]], usable: NDArray[np.bool_]
) -> Person:
    """Weigh the variants of an ensemble by the leads of one person.

    Parameters
    ----------
    ensemble : TorsoEnsemble
    beats_mv : list of ndarray, shape (8, n)
        QRS to T of this person's representative beats, leads I, II, V1 to V6.
    usable : ndarray of bool, shape (8,)
        Leads that hold a tracing in every beat.
    """
    scatter = np.zeros((8, 8))
    for beat in beats_mv:
        second = beat @ beat.T / beat.shape[1]
        scatter += second / max(float(np.trace(second[np.ix_(usable, usable)])), 1e-12)
    scatter *= usable.sum() / len(beats_mv)

    prepared = [_prepare(ensemble, index, usable) for index in range(ensemble.n_variants)]
    evidence = np.array([_evidence(variant, scatter, usable) for variant in prepared])
    weights = np.exp(TEMPER * (evidence - evidence.max()))
    kept = np.flatnonzero(weights >= SMALLEST_SHARE)
    shares = weights[kept] / weights[kept].sum()
    variants = tuple(
        replace(prepared[index], weight=float(share))
        for index, share in zip(kept, shares, strict=True)
    )
    return Person(ensemble, variants, usable)


def _evidence(variant: Variant, scatter: NDArray[np.float64], usable: NDArray[np.bool_]) -> float:
    """Log marginal likelihood of one sample of the leads, the prior's scale at its best."""
    n = int(usable.sum())
    misfit = float(np.sum(variant.precision * scatter)) / n
    log_determinant = -float(np.linalg.slogdet(variant.precision[np.ix_(usable, usable)])[1])
    return -0.5 * (log_determinant + n * float(np.log(misfit)))


def _prepare(ensemble: TorsoEnsemble, index: int, usable: NDArray[np.bool_]) -> Variant:
    sites = ensemble.sites_mm[index]
    chest = ensemble.chest_factors(index, sites[:, 0], sites[:, 1])
    factors = np.concatenate([ensemble.limb[index].astype(np.float64), chest])
    factors[~usable] = 0.0
    n = int(usable.sum())
    size = float(np.sqrt(np.sum(factors**2) / n))
    factors /= size
    covariance = factors[usable] @ factors[usable].T + MODEL_NOISE**2 * np.eye(n)
    precision = np.zeros((8, 8))
    precision[np.ix_(usable, usable)] = np.linalg.inv(covariance)
    return Variant(index, 0.0, size, factors, precision, factors.T @ precision)


def shift_electrode(
    person: Person,
    variant: Variant,
    electrode: int,
    *,
    left_mm: NDArray[np.float64],
    up_mm: NDArray[np.float64],
) -> Shift:
    """Foretell the change of one chest lead for many displacements of its electrode.

    Kriging with a physical covariance, of the *change* from the recorded to the new site: no
    displacement is exactly no change, and what the model does not carry stays in the lead.

    Parameters
    ----------
    electrode : int
        0 for V1 to 5 for V6.
    left_mm, up_mm : ndarray, shape (n,)
        Along the skin, to the patient's left and to the head.
    """
    site = person.ensemble.sites_mm[variant.index][electrode]
    n = left_mm.size
    factors = person.ensemble.chest_factors(
        variant.index,
        site[0] + np.concatenate([[0.0], left_mm]),
        site[1] + np.concatenate([[0.0], up_mm]),
    )
    change = (factors[1:] - factors[0]) / variant.size
    gain = change @ variant.to_gain
    explained = np.einsum("nr,br,nb->n", change, variant.factors, gain)
    distance = np.hypot(left_mm, up_mm)
    own = 2 * MODEL_NOISE**2 * (1.0 - np.exp(-0.5 * (distance / OWN_PART_LENGTH_MM) ** 2))
    variance = np.maximum((change**2).sum(axis=1) - explained, 0.0) + own
    return Shift(gain.reshape(n, 8), variance)
