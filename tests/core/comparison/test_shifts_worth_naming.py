from __future__ import annotations

import pytest

from core.comparison.results import SMALLEST_NAMED_MM, ElectrodeShift, ShiftRange

NONE = ShiftRange(0.0, -10.0, 10.0)
UP = ShiftRange(27.0, 14.0, 37.0)
DOWN = ShiftRange(-27.0, -37.0, -14.0)
UNSURE = ShiftRange(27.0, -1.0, 50.0)
SMALL = ShiftRange(SMALLEST_NAMED_MM - 1.0, 5.0, 17.0)


@pytest.mark.parametrize(
    ("up", "left", "named"),
    [
        (NONE, NONE, set()),
        (UP, NONE, {"up"}),
        (NONE, DOWN, {"left"}),
        (UP, DOWN, {"up", "left"}),
        (UNSURE, NONE, set()),
        (ShiftRange(27.0, 0.0, 50.0), NONE, set()),
        (ShiftRange(27.0, 0.1, 50.0), NONE, {"up"}),
        (ShiftRange(-27.0, -50.0, -0.1), NONE, {"up"}),
        (SMALL, NONE, set()),
        (ShiftRange(SMALLEST_NAMED_MM, 1.0, 23.0), NONE, {"up"}),
    ],
)
def test_a_shift_is_named_where_it_is_sure_and_large(up, left, named):
    shift = ElectrodeShift(up, left, qrs_points_to_shift=True)
    assert set(shift.worth_naming()) == named


def test_a_shift_that_the_qrs_does_not_point_to_is_not_named():
    assert ElectrodeShift(UP, DOWN, qrs_points_to_shift=False).worth_naming() == {}


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_the_sentence_names_the_shifts_worth_naming_and_no_other(request, pair):
    comparison = request.getfixturevalue(pair)
    for electrode, shift in comparison.placement.electrodes.items():
        named = f"{electrode} about" in comparison.overall.sentence
        assert named == bool(shift.worth_naming())


@pytest.mark.parametrize("pair", ["raised", "inferior", "steady", "medial"])
def test_every_estimate_lies_in_its_range(request, pair):
    for shift in request.getfixturevalue(pair).placement.electrodes.values():
        for size in (shift.up_mm, shift.left_mm):
            assert size.low < size.estimate < size.high
