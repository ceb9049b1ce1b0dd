from __future__ import annotations

from itertools import combinations

import numpy as np
import pytest

from core.recordings.leads import (
    LIMB_LEADS,
    TWELVE_LEADS,
    complete_limb_leads,
    independent_from_twelve,
    lead_in_sentence,
    lead_of_label,
    twelve_from_independent,
)


@pytest.fixture
def twelve() -> np.ndarray:
    return twelve_from_independent(np.random.default_rng(1).normal(size=(8, 50)))


@pytest.mark.parametrize(
    ("label", "expected"),
    [
        ("i", ("I", 1.0)),
        ("MLII", ("II", 1.0)),
        ("Lead aVL", ("aVL", 1.0)),
        ("AVR", ("aVR", 1.0)),
        ("-aVR", ("aVR", -1.0)),
        ("ECG V1", ("V1", 1.0)),
        ("v6", ("V6", 1.0)),
        ("vx", ("X", 1.0)),
        ("V10", None),
        ("pleth", None),
    ],
)
def test_labels_of_real_files_are_understood(label, expected):
    assert lead_of_label(label) == expected


def test_a_lead_is_found_inside_the_meaning_of_a_code():
    assert lead_in_sentence("Lead I (Einthoven)") == ("I", 1.0)
    assert lead_in_sentence("Augmented limb lead aVF") == ("aVF", 1.0)
    assert lead_in_sentence("Noise channel") is None


def test_limb_lead_algebra_holds_at_every_instant(twelve):
    lead = dict(zip(TWELVE_LEADS, twelve, strict=True))
    rounding = 4 * np.finfo(float).eps * np.abs(twelve).max()  # a sum of three doubles
    np.testing.assert_allclose(lead["I"] + lead["III"], lead["II"], atol=rounding)
    np.testing.assert_allclose(lead["aVR"] + lead["aVL"] + lead["aVF"], 0, atol=rounding)


def test_published_example_of_the_limb_algebra():
    # I = 0.5 and II = 1.0 mV give III 0.5, aVR -0.75, aVL 0, aVF 0.75 (from the definitions).
    eight = np.zeros((8, 1))
    eight[:2, 0] = 0.5, 1.0
    assert twelve_from_independent(eight)[:6, 0].tolist() == [0.5, 1.0, 0.5, -0.75, 0.0, 0.75]


@pytest.mark.parametrize("given", list(combinations(LIMB_LEADS, 2)))
def test_any_two_limb_leads_give_the_other_four(given, twelve):
    lead = dict(zip(TWELVE_LEADS, twelve, strict=True))
    completed = complete_limb_leads({name: lead[name] for name in given})
    for name in LIMB_LEADS:
        # A solved 2 x 2 system loses a few units in the last place.
        np.testing.assert_allclose(completed[name], lead[name], atol=1e-13)
    for name in given:
        assert completed[name] is lead[name]


def test_one_limb_lead_is_not_enough():
    with pytest.raises(ValueError, match="two limb leads"):
        complete_limb_leads({"II": np.zeros(3)})


def test_the_independent_leads_are_picked_back_out(twelve):
    again = twelve_from_independent(independent_from_twelve(twelve))
    np.testing.assert_array_equal(again, twelve)
