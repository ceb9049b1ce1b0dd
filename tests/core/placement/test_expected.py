"""The expected change and how rarely placement gives what is left."""

from __future__ import annotations

import numpy as np
import pytest

from core.placement.expected import Expected, tail_probability


@pytest.fixture
def expected() -> Expected:
    rng = np.random.default_rng(1)
    draws = {name: rng.normal(0.02, 0.05, (12, 3000)) for name in ("st_mv", "t_mv")}
    change = {name: np.full(12, 0.02) for name in draws}
    return Expected(change, draws, {})


ROWS = [0, 1, 6, 7]


def probability(expected, change) -> float:
    recorded = {name: np.full(12, change) for name in ("st_mv", "t_mv")}
    return tail_probability(expected, recorded, ("st_mv", "t_mv"), ROWS)


def test_what_is_expected_is_not_rare(expected):
    assert probability(expected, 0.02) == pytest.approx(1.0, abs=0.01)


def test_what_is_far_from_expected_is_rare_but_never_impossible(expected):
    assert probability(expected, 2.0) == 1 / 3001


def test_the_farther_the_rarer(expected):
    found = [probability(expected, change) for change in (0.02, 0.06, 0.10, 0.15)]
    assert (np.diff(found) < 0).all()


def test_draws_of_the_same_kind_have_every_probability_alike(expected):
    """Uniform, as a p-value must be: a Kolmogorov-Smirnov distance over 400 fresh draws."""
    rng = np.random.default_rng(9)
    found = []
    for _ in range(400):
        recorded = {name: rng.normal(0.02, 0.05, 12) for name in ("st_mv", "t_mv")}
        found.append(tail_probability(expected, recorded, ("st_mv", "t_mv"), ROWS))
    ranked = np.sort(found)
    distance = np.abs(ranked - (np.arange(400) + 0.5) / 400).max()
    assert distance < 1.95 / np.sqrt(400)  # 0.1 % point of the Kolmogorov distribution


def test_what_was_not_measured_is_left_aside(expected):
    recorded = {"st_mv": np.full(12, np.nan), "t_mv": np.full(12, 0.02)}
    assert tail_probability(expected, recorded, ("st_mv", "t_mv"), ROWS) == pytest.approx(
        1, abs=0.02
    )
    nothing = {name: np.full(12, np.nan) for name in ("st_mv", "t_mv")}
    assert tail_probability(expected, nothing, ("st_mv", "t_mv"), ROWS) is None


def test_limb_leads_expect_nothing_of_a_chest_shift(raised):
    for lead in ("I", "II", "III", "aVR", "aVL", "aVF"):
        for measure in raised.leads[lead].measures.values():
            assert measure.expected in (0.0, None)
