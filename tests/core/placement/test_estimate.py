"""Finding a shift again from the QRS."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from scipy.stats import binomtest

from core import Settings, Spread
from core.placement.estimate import estimate_shifts
from core.placement.moved import ventricular_beat_mv
from core.placement.person import shift_electrode, weigh_ensemble
from core.recordings.leads import CHEST_LEADS
from core.torso.ensemble import load_ensemble

ALL = np.ones(8, dtype=bool)


@pytest.fixture(scope="module")
def case(request):
    return case_of(request.getfixturevalue("steady").earlier)


def case_of(report):
    """A person, and the QRS of a recording."""
    beat = ventricular_beat_mv(report)
    f = report.points.fiducials
    return (
        weigh_ensemble(load_ensemble(), [beat], ALL),
        beat[:, : f.qrs_offset - f.qrs_onset + 1],
    )


def later_qrs(
    case, rng, shifts_mm: np.ndarray, *, repeat: float = 0.05, unknown_share: float = 1.0
) -> np.ndarray:
    """The QRS as one of the person's variants foretells it, the heart a few per cent changed.

    ``unknown_share`` says how much of what the variant does not know of the new lead is added.
    """
    person, qrs = case
    variant = person.variants[rng.choice(len(person.variants), p=person.weights)]
    moved = qrs.copy()
    for electrode, (left, up) in enumerate(shifts_mm):
        shift = shift_electrode(
            person, variant, electrode, left_mm=np.array([left]), up_mm=np.array([up])
        )
        scale = person.source_scale(variant, qrs)
        unknown = unknown_share * scale * np.sqrt(shift.variance[0]) * rng.normal()
        shape = rng.normal(size=8) @ qrs
        shape /= np.sqrt(np.mean(shape**2))
        moved[2 + electrode] += shift.gain[0] @ qrs + unknown * shape
    return moved * (1 + repeat * rng.normal(size=(8, 1)))


def test_the_posterior_is_a_distribution(case):
    for posterior in estimate_shifts(*case, case[1], Settings()).values():
        assert posterior.probability.sum() == pytest.approx(1.0)
        assert (posterior.probability >= 0).all()


def test_an_unchanged_qrs_points_to_no_shift(case):
    for posterior in estimate_shifts(*case, case[1], Settings()).values():
        assert not posterior.points_to_a_shift
        for direction in (posterior.left_mm, posterior.up_mm):
            estimate, low, high = posterior.range_of(direction, 0.95)
            assert low < 0 < high
            assert abs(estimate) < 8.0  # one cell of the grid


def test_shifts_drawn_from_the_prior_are_held_by_their_ranges(case):
    """Simulate, then recover: 95 % ranges over the spread that shifts are drawn from."""
    rng = np.random.default_rng(10)
    trials, held, total = 12, 0, 0
    for _ in range(trials):
        shifts = np.clip(rng.normal(0, 22 * np.sqrt(2), (6, 2)), -80, 80)
        found = estimate_shifts(*case, later_qrs(case, rng, shifts), Settings())
        for (left, up), name in zip(shifts, CHEST_LEADS, strict=True):
            posterior = found[name]
            for truth, direction in ((left, posterior.left_mm), (up, posterior.up_mm)):
                _, low, high = posterior.range_of(direction, 0.95)
                held += low <= truth <= high
                total += 1
    # Ranges may be cautious; they must not be narrow.
    assert binomtest(held, total, 0.93, alternative="less").pvalue > 1e-3


def test_a_raised_v2_is_found_and_its_neighbours_stay(raised):
    case = case_of(raised.earlier)
    rng = np.random.default_rng(3)
    shifts = np.zeros((6, 2))
    shifts[1] = (0.0, 58.0)
    errors = []
    for _ in range(8):
        later = later_qrs(case, rng, shifts, repeat=0.02, unknown_share=0.2)
        found = estimate_shifts(*case, later, Settings())
        assert found["V2"].points_to_a_shift
        up = {name: p.range_of(p.up_mm, 0.95)[0] for name, p in found.items()}
        errors.append(up["V2"] - 58.0)
        assert all(abs(up[name]) < 16.0 for name in ("V4", "V5", "V6"))  # two cells of the grid
    assert abs(np.median(errors)) < 15.0  # as the prior of 31 mm pulls it towards 0


def test_no_spread_allows_no_shift(case):
    rng = np.random.default_rng(5)
    later = later_qrs(case, rng, np.array([[0.0, 58.0]] * 6))
    found = estimate_shifts(*case, later, replace(Settings(), spread_mm=Spread(0.0, 0.0)))
    for posterior in found.values():
        assert abs(posterior.range_of(posterior.up_mm, 0.95)[0]) < 8.0


def test_draws_follow_the_posterior(case):
    rng = np.random.default_rng(2)
    later = later_qrs(case, rng, np.array([[10.0, 40.0]] * 6))
    posterior = estimate_shifts(*case, later, Settings())["V2"]
    draws = posterior.draw(20000, rng)
    mean = posterior.range_of(posterior.up_mm, 0.95)[0]
    # Standard deviations reach 15 mm, so the mean of 20,000 draws is good to 0.1 mm.
    assert np.mean(draws.up_mm) == pytest.approx(mean, abs=0.5)
