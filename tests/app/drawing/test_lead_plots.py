from __future__ import annotations

import numpy as np
import pytest
from PySide6.QtCore import QRectF

from app.drawing.lead_cell import GRID_OF_CELLS
from app.drawing.lead_curves import shown_times_ms
from app.drawing.lead_plots import (
    CELL_EVERY,
    axis_room,
    draw_axes,
    draw_difference,
    draw_fiducials,
    draw_grid,
    draw_overlay,
)
from app.drawing.palette import LIGHT
from app.drawing.pen import Style
from app.drawing.scale import Scale
from core.recordings.leads import TWELVE_LEADS
from tests.app.drawing.changed import with_all_beats, with_later, without_later
from tests.app.drawing.readback import drawn_by, lying_on_each_other, picture

PLOT = QRectF(80, 30, 400, 300)


@pytest.fixture
def style(qapp) -> Style:
    return Style(LIGHT, 1.0, qapp.font().family(), caption=12, body=13, heading=16)


def grid_lines(style, scale, every) -> tuple[np.ndarray, np.ndarray]:
    """Middles of the upright and of the level grid lines, in pixels."""
    drawn = picture(560, 400, lambda p: draw_grid(p, scale, style, every=every))
    coloured = (drawn != 255).any(axis=-1)
    inside = coloured[int(scale.rect.top()) : int(scale.rect.bottom())]
    inside = inside[:, int(scale.rect.left()) : int(scale.rect.right())]
    return tuple(_middles(inside.all(axis=axis)) for axis in (0, 1))  # type: ignore[return-value]


def _middles(inked: np.ndarray) -> np.ndarray:
    at = np.flatnonzero(inked)
    return np.array([run.mean() + 0.5 for run in np.split(at, np.flatnonzero(np.diff(at) > 1) + 1)])


@pytest.mark.parametrize("every", [1, CELL_EVERY])
def test_grid_lines_lie_40_ms_and_a_tenth_of_a_millivolt_apart(style, every):
    # 10 px for 40 ms and 20 px for 0.1 mV; the ranges end between two lines.
    scale = Scale(PLOT, -410.0, 1190.0, -0.55, 0.95)
    upright, level = grid_lines(style, scale, every)
    # px: a line is a pixel wide or lies on two of them.
    assert np.diff(upright) == pytest.approx(np.full(upright.size - 1, 10.0 * every), abs=1.0)
    assert np.diff(level) == pytest.approx(np.full(level.size - 1, 20.0 * every), abs=1.0)
    assert np.abs(upright - (float(scale.x(0.0)) - PLOT.left())).min() <= 1.0
    assert np.abs(level - (float(scale.y(0.0)) - PLOT.top())).min() <= 1.0


def test_the_note_of_the_grid_says_what_the_cells_have():
    assert f"grid {40 * CELL_EVERY / 1000:g} s × {0.1 * CELL_EVERY:g} mV" == GRID_OF_CELLS


@pytest.mark.parametrize("name", ["raised", "inferior", "steady", "medial"])
def test_the_stretch_shown_holds_p_qrs_and_t(request, name):
    comparison = request.getfixturevalue(name)
    first, last = shown_times_ms(comparison)
    points, time = comparison.earlier.points.fiducials, comparison.laid.time_ms
    assert time[0] <= first < time[points.qrs_onset]
    assert time[points.t_offset] < last <= time[-1]
    if points.p_onset is not None:
        assert first < time[points.p_onset]


@pytest.mark.parametrize("draw", [draw_overlay, draw_difference])
def test_a_plot_shows_another_later_beat(raised, style, draw):
    def seen(comparison):
        options = {"every": 1} if draw is draw_overlay else {}
        return picture(560, 400, lambda p: draw(p, PLOT, comparison, "V5", style, **options))

    assert (seen(with_later(raised, "V5", times=1.5)) != seen(raised)).any()
    assert (seen(raised) == seen(raised)).all()


@pytest.mark.parametrize("lead", TWELVE_LEADS)
@pytest.mark.parametrize("times", [1.0, 30.0])
def test_the_scale_holds_both_beats_and_the_reach(raised, style, lead, times):
    comparison, scales = with_all_beats(raised, times), []
    picture(
        560,
        400,
        lambda p: scales.append(draw_overlay(p, PLOT, comparison, lead, style, every=CELL_EVERY)),
    )
    (scale,), row = scales, TWELVE_LEADS.index(lead)
    laid = comparison.laid
    shown = (laid.time_ms >= scale.first_ms) & (laid.time_ms <= scale.last_ms)
    for beat in (laid.earlier_mv, laid.later_mv):
        at = scale.y(beat[row, shown])
        assert PLOT.top() < np.nanmin(at)
        assert np.nanmax(at) < PLOT.bottom()


def test_nothing_is_drawn_outside_the_plot(raised, style):
    drawn = picture(560, 400, lambda p: draw_overlay(p, PLOT, raised, "V2", style, every=1))
    inside = np.zeros((400, 560), bool)
    inside[30:330, 80:480] = True
    assert (drawn[~inside] == 255).all()
    assert (drawn[inside] != 255).any()


def test_a_lead_without_samples_can_be_drawn(raised, style):
    empty = without_later(raised, "V1")
    drawn = picture(560, 400, lambda p: draw_difference(p, PLOT, empty, "V1", style))
    assert (drawn != 255).any()


# From a quiet difference to a lead whose file states a gain a thousand times too small.
@pytest.mark.parametrize("range_mv", [0.3, 0.9, 2.0, 5.0, 14.0, 60.0, 300.0, 2000.0])
@pytest.mark.parametrize("height", [55.0, 75.0, 120.0, 300.0])
def test_a_few_numbers_stand_beside_the_axis_and_clear_of_each_other(style, range_mv, height):
    plot = QRectF(PLOT.left(), PLOT.top(), PLOT.width(), height)
    scale = Scale(plot, -300.0, 500.0, -0.4 * range_mv, 0.6 * range_mv)
    drawn = drawn_by(560, 400, lambda p: draw_axes(p, scale, style))
    levels = [piece for piece in drawn if piece.text.endswith("mV")]
    assert 2 <= len(levels) <= 7
    assert lying_on_each_other(drawn) == []


def test_a_number_stands_at_its_own_level(style):
    scale = Scale(PLOT, -300.0, 500.0, -0.8, 1.4)
    drawn = drawn_by(560, 400, lambda p: draw_axes(p, scale, style))
    for piece in drawn:
        if piece.text.endswith("mV"):
            level = float(piece.text.removesuffix(" mV").replace("−", "-"))
            # px: digits reach from the baseline to 0.72 of the size, give or take a pixel.
            middle = piece.baseline - 0.36 * piece.size
            assert middle == pytest.approx(float(scale.y(level)), abs=1.5)


def test_the_numbers_have_the_room_that_is_kept_for_them(style):
    across, below = axis_room(style)
    scale = Scale(PLOT, -300.0, 500.0, -0.8, 1.4)
    for piece in drawn_by(560, 400, lambda p: draw_axes(p, scale, style)):
        if piece.text.endswith("mV"):
            assert PLOT.left() - across <= piece.left
            assert piece.right <= PLOT.left()
        else:
            assert PLOT.bottom() < piece.baseline <= PLOT.bottom() + below


def test_the_upright_lines_are_named_and_the_names_stand_apart(raised, style):
    first, last = shown_times_ms(raised)
    scale, row = Scale(PLOT, first, last, -1.0, 1.0), QRectF(80, 10, 400, 18)
    drawn = drawn_by(560, 400, lambda p: draw_fiducials(p, scale, raised, style, row))
    assert [piece.text for piece in drawn] == ["QRS on", "J", "J+60", "T end"]
    assert lying_on_each_other(drawn) == []
    assert min(piece.left for piece in drawn) >= row.left()
    assert max(piece.right for piece in drawn) <= row.right() + 1.0  # px: rounded advances
