from __future__ import annotations

import numpy as np
import pytest

from core import NotComparable, compare, measure
from core.quality.right_leg import right_leg_interchange
from core.recordings.leads import independent_from_twelve, twelve_from_independent
from tests.helpers.synthetic import as_recording, synthetic

# Potentials of RA, LA and LL against their mean, from leads I and II.
LIMBS = np.array([[-1.0, -1.0], [2.0, -1.0], [-1.0, 2.0]]) / 3.0


def with_cable_on_the_right_leg(arm: int):
    """The arm's cable reads the leg, whose potential is the left leg's; chest leads follow."""
    made = synthetic().recording
    leads = independent_from_twelve(made.signal_mv.T)
    limbs = LIMBS @ leads[:2]
    wrong = limbs.copy()
    wrong[arm] = limbs[2]
    wrong[arm] += np.random.default_rng(1).normal(0, 0.002, wrong.shape[1])
    chest = leads[2:] - wrong.mean(axis=0)
    recorded = np.concatenate([[wrong[1] - wrong[0]], [wrong[2] - wrong[0]], chest])
    return as_recording(twelve_from_independent(recorded).T, made.sampling_rate_hz)


@pytest.mark.parametrize(("arm", "lead", "name"), [(0, "II", "RA"), (1, "III", "LA")])
def test_the_flat_lead_tells_which_arm(arm, lead, name):
    notices = {n.code: n for n in measure(with_cable_on_the_right_leg(arm)).notices}
    notice = notices["right-leg-interchanged"]
    assert notice.severity == "stop"
    assert f"Lead {lead} alone is flat" in notice.text
    assert f"{name} and RL" in notice.text


def test_such_a_recording_is_not_compared():
    with pytest.raises(NotComparable, match="RL cables"):
        compare(synthetic().recording, with_cable_on_the_right_leg(0))


def test_a_recording_as_it_should_be_names_nothing():
    codes = [notice.code for notice in measure(synthetic().recording).notices]
    assert "right-leg-interchanged" not in codes


@pytest.mark.parametrize(
    ("sizes", "found"),
    [
        ((0.8, 0.05, 0.8), ("II", "RA")),
        ((0.8, 0.8, 0.05), ("III", "LA")),
        ((0.05, 0.8, 0.8), None),  # leads of the arms alone: no sign of the leg
        ((0.08, 0.05, 0.08), None),  # low voltage everywhere
        ((0.8, 0.2, 0.8), None),
    ],
)
def test_only_one_flat_lead_among_large_ones_counts(sizes, found):
    wave = np.sin(np.linspace(0, 2 * np.pi, 100)) / 2
    assert right_leg_interchange(np.array(sizes)[:, None] * wave) == found
