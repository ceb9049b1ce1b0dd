from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from PySide6.QtCore import QRectF

from app.drawing.chest_map import SCALE_BAR_MM, draw_chest_map
from app.drawing.palette import LIGHT
from app.drawing.pen import Style
from core.comparison.results import ElectrodeShift, ShiftRange
from core.recordings.leads import CHEST_LEADS
from tests.app.drawing.readback import Piece, drawn_by, picture

MAP = QRectF(20, 20, 360, 260)


@pytest.fixture
def style(qapp) -> Style:
    return Style(LIGHT, 1.0, qapp.font().family(), caption=12, body=13, heading=16)


def read(comparison, style) -> dict[str, Piece]:
    drawn = drawn_by(400, 300, lambda p: draw_chest_map(p, MAP, comparison, style))
    return {piece.text: piece for piece in drawn}


def seen(comparison, style, selected=None) -> np.ndarray:
    return picture(400, 300, lambda p: draw_chest_map(p, MAP, comparison, style, selected=selected))


def middle(piece: Piece) -> float:
    return (piece.left + piece.right) / 2


def with_shift(comparison, electrode, shift):
    electrodes = dict(comparison.placement.electrodes) | {electrode: shift}
    return replace(comparison, placement=replace(comparison.placement, electrodes=electrodes))


def shift(up: float, left: float, *, half: float = 10.0, points: bool = True) -> ElectrodeShift:
    ranges = (ShiftRange(value, value - half, value + half) for value in (up, left))
    return ElectrodeShift(*ranges, qrs_points_to_shift=points)


def test_every_chest_electrode_is_named_where_it_belongs(steady, style):
    drawn, sites = read(steady, style), steady.placement.sites_mm
    lefts = np.array([sites[lead][0] for lead in CHEST_LEADS])
    across = np.array([middle(drawn[lead]) for lead in CHEST_LEADS])
    mm_per_px = (lefts[-1] - lefts[0]) / (across[-1] - across[0])
    # The patient faces the reader: the patient's left is on the right, true to scale.
    assert mm_per_px > 0
    # px: names are centred to the rounding of their advances.
    assert across == pytest.approx(across[0] + (lefts - lefts[0]) / mm_per_px, abs=1.5)
    up = np.array([sites[lead][1] for lead in CHEST_LEADS])
    down = np.array([drawn[lead].baseline for lead in CHEST_LEADS])
    assert down == pytest.approx(down[0] - (up - up[0]) / mm_per_px, abs=1.5)


def test_the_scale_bar_is_as_long_as_it_says(steady, style):
    drawn, sites = read(steady, style), steady.placement.sites_mm
    px_per_mm = (middle(drawn["V6"]) - middle(drawn["V1"])) / (sites["V6"][0] - sites["V1"][0])
    # The bar lies just above the bottom of the map; ribs are paler.
    bar = (seen(steady, style)[272:278, 20:170] < 180).all(axis=-1).any(axis=0)
    bar = bar[: int(drawn[f"{SCALE_BAR_MM:g} mm"].left) - 22]
    # px: square ends of half the line's width, and the rounding of the names' places.
    assert bar.sum() == pytest.approx(SCALE_BAR_MM * px_per_mm, abs=4.0)


def test_an_unmoved_electrode_has_no_distance(steady, style):
    distances = [text for text in read(steady, style) if text.endswith(" mm")]
    assert distances == [f"{SCALE_BAR_MM:g} mm"]


def test_a_raised_electrode_is_drawn_higher_and_its_distance_named(steady, style):
    drawn = read(with_shift(steady, "V2", shift(40.0, 0.0)), style)
    assert drawn["40 mm"].baseline < drawn["V2"].baseline - 20
    assert middle(drawn["40 mm"]) == pytest.approx(middle(drawn["V2"]), abs=1.5)  # px, rounding


def test_an_electrode_too_far_to_the_left_is_drawn_on_the_right(steady, style):
    drawn = read(with_shift(steady, "V4", shift(0.0, 30.0)), style)
    assert middle(drawn["30 mm"]) > middle(drawn["V4"]) + 10


@pytest.mark.parametrize(
    "vague",
    [shift(40.0, 0.0, half=50.0), shift(40.0, 0.0, points=False), shift(5.0, 0.0, half=2.0)],
    ids=["wide range", "QRS points to none", "small"],
)
def test_a_shift_that_is_not_certain_or_not_large_is_not_drawn(steady, style, vague):
    moved = with_shift(steady, "V2", vague)
    assert (seen(moved, style) == seen(with_shift(steady, "V2", None), style)).all()


def test_an_electrode_that_is_not_judged_keeps_its_site(raised, style):
    drawn = read(with_shift(raised, "V2", None), style)
    assert "V2" in drawn


@pytest.mark.parametrize("lead", CHEST_LEADS)
def test_the_selected_leads_electrode_is_ringed(steady, style, lead):
    assert (seen(steady, style, selected=lead) != seen(steady, style)).any()


def test_a_selected_limb_lead_rings_no_electrode(steady, style):
    assert (seen(steady, style, selected="aVF") == seen(steady, style)).all()


def test_two_distances_never_lie_on_each_other(steady, style):
    crowded = steady
    for electrode in ("V3", "V4", "V5"):
        crowded = with_shift(crowded, electrode, shift(30.0, 0.0))
    drawn = drawn_by(400, 300, lambda p: draw_chest_map(p, MAP, crowded, style))
    boxes = [piece.box for piece in drawn if piece.text == "30 mm"]
    assert len(boxes) == 3
    assert not any(a.intersects(b) for i, a in enumerate(boxes) for b in boxes[i + 1 :])


def disc_of(drawn: dict[str, Piece], comparison, electrode: str) -> tuple[float, float]:
    """Where the disc of a shift lies, by where the names of the sites stand."""
    sites, moved = comparison.placement.sites_mm, comparison.placement.electrodes[electrode]
    px_per_mm = (middle(drawn["V6"]) - middle(drawn["V1"])) / (sites["V6"][0] - sites["V1"][0])
    # A name's baseline lies under the middle of its ring: radius, gap, and the line's ascent.
    ring = drawn[electrode].baseline - 5.5 - 2.0 - 12 * 1.05
    return (
        middle(drawn[electrode]) + moved.left_mm.estimate * px_per_mm,
        ring - moved.up_mm.estimate * px_per_mm,
    )


def gap_between(at: tuple[float, float], piece: Piece) -> float:
    """How far a point lies outside the ink of a run of text."""
    box = piece.box
    across = max(box.left() - at[0], 0.0, at[0] - box.right())
    down = max(box.top() - at[1], 0.0, at[1] - box.bottom())
    return float(np.hypot(across, down))


CROWDED = {
    "side by side": {"V5": shift(-1.0, -17.0), "V6": shift(-2.0, -40.0)},
    "on each other": {"V4": shift(0.0, 20.0), "V5": shift(0.0, -21.0)},
    "five in a row": {lead: shift(30.0 + place, 0.0) for place, lead in enumerate(CHEST_LEADS[1:])},
    "at the edges": {"V1": shift(95.0, -60.0), "V6": shift(-80.0, 30.0)},
}


@pytest.mark.parametrize("shifts", CROWDED.values(), ids=CROWDED)
def test_every_distance_stands_beside_its_own_disc(steady, style, shifts):
    moved = steady
    for electrode, one in shifts.items():
        moved = with_shift(moved, electrode, one)
    drawn = read(moved, style)
    discs = {electrode: disc_of(drawn, moved, electrode) for electrode in shifts}
    labels = {}
    for electrode, one in shifts.items():
        label = drawn[f"{np.hypot(one.left_mm.estimate, one.up_mm.estimate):.0f} mm"]
        labels[electrode] = label
        # px: disc and gap take 8, the line around the ink 4 more, places are known to 2.
        assert gap_between(discs[electrode], label) <= 14.0, electrode
        assert label.left >= MAP.left()
        assert label.right <= MAP.right()
    boxes = [label.box for label in labels.values()]
    assert not any(a.intersects(b) for i, a in enumerate(boxes) for b in boxes[i + 1 :])


def test_the_distances_of_the_medial_sample_stay_with_their_electrodes(medial, style):
    drawn = read(medial, style)
    for electrode in ("V5", "V6"):
        moved = medial.placement.electrodes[electrode]
        label = drawn[f"{abs(moved.left_mm.estimate):.0f} mm"]
        assert gap_between(disc_of(drawn, medial, electrode), label) <= 14.0


@pytest.mark.parametrize("far", [0.0, 150.0])
def test_nothing_is_drawn_outside_the_map(raised, style, far):
    inside = np.zeros((300, 400), bool)
    inside[20:280, 20:380] = True
    drawn = seen(with_shift(raised, "V6", shift(far, far)), style, selected="V6")
    assert (drawn[~inside] == 255).all()
    assert (drawn[inside] != 255).any()


def test_where_nothing_is_in_the_way_the_distance_stands_over_its_disc(raised, style):
    drawn = read(raised, style)
    for electrode in ("V1", "V2"):
        moved = raised.placement.electrodes[electrode]
        far = math.hypot(*(size.estimate for size in moved.worth_naming().values()))
        label = drawn[f"{far:.0f} mm"]
        disc = disc_of(drawn, raised, electrode)
        assert label.baseline < disc[1]
        assert middle(label) == pytest.approx(disc[0], abs=2.0)  # px, rounding
