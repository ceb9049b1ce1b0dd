from __future__ import annotations

import numpy as np
import pytest

from core.quality.interchange import chest_interchanges, limb_interchanges
from core.recordings.leads import TWELVE_LEADS, twelve_from_independent

ROW = {lead: row for row, lead in enumerate(TWELVE_LEADS)}


@pytest.fixture
def leads() -> np.ndarray:
    return np.random.default_rng(2).normal(size=(8, 50))


def limb(*electrodes: str):
    return next(one for one in limb_interchanges() if one.electrodes == electrodes)


@pytest.mark.parametrize(
    ("electrodes", "becomes"),
    [
        # Algebra of the three electrodes: what each lead shows instead, with its sign.
        (
            ("RA", "LA"),
            {"I": "-I", "II": "III", "III": "II", "aVR": "aVL", "aVL": "aVR", "aVF": "aVF"},
        ),
        (
            ("RA", "LL"),
            {"I": "-III", "II": "-II", "III": "-I", "aVR": "aVF", "aVL": "aVL", "aVF": "aVR"},
        ),
        (
            ("LA", "LL"),
            {"I": "II", "II": "I", "III": "-III", "aVR": "aVR", "aVL": "aVF", "aVF": "aVL"},
        ),
    ],
)
def test_a_limb_interchange_rearranges_the_limb_leads(leads, electrodes, becomes):
    right = twelve_from_independent(leads)
    wrong = twelve_from_independent(limb(*electrodes).matrix @ leads)
    for lead, shown in becomes.items():
        sign = -1.0 if shown.startswith("-") else 1.0
        np.testing.assert_allclose(wrong[ROW[lead]], sign * right[ROW[shown.lstrip("-")]])


@pytest.mark.parametrize("axis", [60.0, -30.0, 100.0])
@pytest.mark.parametrize(
    ("electrodes", "turned"),
    [
        # Ho 2006, as digested in the project's published facts.
        (("RA", "LA"), lambda n: 180 - n),
        (("RA", "LL"), lambda n: 300 - n),
        (("LA", "LL"), lambda n: 60 - n),
    ],
)
def test_the_axis_turns_as_published(axis, electrodes, turned):
    lead_i, avf = np.cos(np.radians(axis)), np.sin(np.radians(axis))
    # Leads of unit vectors of Einthoven's triangle: I at 0, II at 60, aVF at 90 degrees.
    dipole = np.array([[lead_i], [0.5 * lead_i + np.sqrt(3) / 2 * avf], *[[0.0]] * 6])
    wrong = twelve_from_independent(limb(*electrodes).matrix @ dipole)
    # aVF of the triangle is shorter than I by 2 / sqrt(3).
    found = np.degrees(np.arctan2(wrong[ROW["aVF"], 0] * 2 / np.sqrt(3), wrong[0, 0]))
    assert (found - turned(axis) + 180) % 360 - 180 == pytest.approx(0.0, abs=1e-9)


def test_a_limb_interchange_leaves_the_chest_leads(leads):
    for one in limb_interchanges():
        np.testing.assert_array_equal((one.matrix @ leads)[2:], leads[2:])


def test_a_chest_interchange_changes_its_two_leads_alone(leads):
    for one in chest_interchanges():
        wrong = twelve_from_independent(one.matrix @ leads)
        right = twelve_from_independent(leads)
        first, second = (ROW[lead] for lead in one.leads)
        np.testing.assert_array_equal(wrong[[first, second]], right[[second, first]])
        others = np.setdiff1d(np.arange(12), [first, second])
        np.testing.assert_array_equal(wrong[others], right[others])


def test_every_interchange_can_be_undone(leads):
    for one in (*limb_interchanges(), *chest_interchanges()):
        np.testing.assert_allclose(one.undone(one.matrix @ leads), leads, atol=1e-12)
