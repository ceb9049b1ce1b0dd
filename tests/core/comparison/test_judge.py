"""The rules of the five judgements, branch by branch."""

from __future__ import annotations

import pytest

from core.comparison.judge import BY_WEIGHT, judge_lead, judge_pair
from core.comparison.results import NOTHING, MeasureChange


def left(size: float, low: float, high: float) -> MeasureChange:
    """A change of 0.10 of which the expected change leaves so much."""
    return change(0.10, remainder=size, remainder_range=(low, high))


def change(
    size: float, *, noise=0.05, reach=0.20, remainder=0.0, remainder_range=(-0.1, 0.1)
) -> MeasureChange:
    return MeasureChange(
        earlier=0.0,
        later=size,
        change=size,
        noise_low=-noise,
        noise_high=noise,
        reach_low=-reach,
        reach_high=reach,
        expected=size - remainder,
        remainder=remainder,
        remainder_low=remainder_range[0],
        remainder_high=remainder_range[1],
    )


QUIET = change(0.01)


@pytest.mark.parametrize(
    ("st", "t", "points_to_shift", "judgement"),
    [
        (QUIET, QUIET, False, "steady"),
        (QUIET, QUIET, True, "steady"),
        (change(0.05), change(-0.05), False, "steady"),  # the limits belong to the noise
        (change(0.10), QUIET, True, "in-reach-backed"),
        (QUIET, change(-0.10), True, "in-reach-backed"),
        (change(0.10), QUIET, False, "in-reach-unbacked"),
        # The expected change leaves more than noise, and surely so.
        (left(0.09, 0.02, 0.16), QUIET, True, "in-reach-unbacked"),
        # It leaves more than noise, but its range holds 0.
        (
            change(0.10, remainder=0.09, remainder_range=(-0.01, 0.19)),
            QUIET,
            True,
            "in-reach-backed",
        ),
        # Its range leaves out 0, but it lies inside the noise.
        (
            change(0.10, remainder=0.04, remainder_range=(0.01, 0.07)),
            QUIET,
            True,
            "in-reach-backed",
        ),
        (change(0.20), QUIET, True, "in-reach-backed"),  # the limit belongs to the reach
        (change(0.21), QUIET, True, "beyond-reach"),
        (QUIET, change(-0.30), True, "beyond-reach"),
        (change(0.10), change(-0.30), True, "beyond-reach"),
        (NOTHING, change(-0.30), False, "beyond-reach"),
        (NOTHING, QUIET, False, "steady"),
        (NOTHING, NOTHING, True, "not-judged"),
    ],
)
def test_a_lead(st, t, points_to_shift, judgement):
    found = judge_lead({"st_mv": st, "t_mv": t}, qrs_points_to_shift=points_to_shift)
    assert found == judgement


def test_other_measures_do_not_decide():
    measures = {"st_mv": QUIET, "t_mv": QUIET, "r_mv": change(1.0), "j_mv": change(1.0)}
    assert judge_lead(measures, qrs_points_to_shift=False) == "steady"


@pytest.mark.parametrize("position", range(len(BY_WEIGHT)))
def test_a_pair_is_what_its_weightiest_lead_is(position):
    assert judge_pair(BY_WEIGHT[position:]) == BY_WEIGHT[position]
