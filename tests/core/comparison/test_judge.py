"""The rules of the five judgements, branch by branch."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as hypothesis

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


def mirrored(m: MeasureChange) -> MeasureChange:
    """The same change with its sign turned."""
    return MeasureChange(
        *(-value for value in (m.earlier, m.later, m.change)),
        *(-value for value in (m.noise_high, m.noise_low, m.reach_high, m.reach_low)),
        *(-value for value in (m.expected, m.remainder, m.remainder_high, m.remainder_low)),
    )


sizes = hypothesis.floats(-0.4, 0.4)
ranges = hypothesis.tuples(sizes, sizes).map(lambda ends: tuple(sorted(ends)))
changes = hypothesis.builds(
    lambda size, remainder, ends: change(size, remainder=remainder, remainder_range=ends),
    sizes,
    sizes,
    ranges,
)


@given(changes, changes, hypothesis.booleans())
def test_rises_and_falls_are_judged_alike(st, t, points_to_shift):
    one, other = (
        judge_lead(measures, qrs_points_to_shift=points_to_shift)
        for measures in (
            {"st_mv": st, "t_mv": t},
            {"st_mv": mirrored(st), "t_mv": mirrored(t)},
        )
    )
    assert one == other


@given(changes, changes, hypothesis.booleans())
def test_a_lead_is_never_judged_lighter_than_st_or_t_alone(st, t, points_to_shift):
    together, *alone = (
        BY_WEIGHT.index(judge_lead(measures, qrs_points_to_shift=points_to_shift))
        for measures in (
            {"st_mv": st, "t_mv": t},
            {"st_mv": st, "t_mv": NOTHING},
            {"st_mv": NOTHING, "t_mv": t},
        )
    )
    assert together == min(alone)


@pytest.mark.parametrize("position", range(len(BY_WEIGHT)))
def test_a_pair_is_what_its_weightiest_lead_is(position):
    codes = BY_WEIGHT[position:]
    assert judge_pair(codes) == judge_pair(reversed(codes)) == BY_WEIGHT[position]


def test_what_may_be_the_heart_weighs_most():
    assert BY_WEIGHT == (
        "beyond-reach",
        "in-reach-unbacked",
        "in-reach-backed",
        "steady",
        "not-judged",
    )
