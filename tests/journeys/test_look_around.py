from __future__ import annotations

import pytest
from PySide6.QtCore import Qt

from app.views.lead_wall import BY_WALL
from tests.app.drawing.readback import drawn_on
from tests.journeys.stories import pair


@pytest.fixture
def judged(bench, inferior):
    """The engine has no part in these journeys: its result is put in."""
    bench.state.choose(*pair("inferior"))
    bench.state.finish(inferior)
    return bench


def heading(bench) -> str:
    return drawn_on(bench.lead_depth)[0].text


def test_the_lead_that_changed_most_is_in_view_at_first(judged):
    assert heading(judged) in ("II in depth", "III in depth", "aVF in depth")


def test_a_lead_clicked_on_the_wall_is_the_lead_in_depth(judged, qtbot):
    for row, leads in enumerate(BY_WALL):
        at = judged.wall.cell(row, 1).center().toPoint()
        qtbot.mouseClick(judged.wall, Qt.MouseButton.LeftButton, pos=at)
        assert heading(judged) == f"{leads[1]} in depth"


def test_arrow_keys_take_the_lead_in_depth_along(judged, qtbot):
    judged.state.select_lead("V2")
    judged.wall.setFocus()
    qtbot.keyClick(judged.wall, Qt.Key.Key_Right)
    assert heading(judged) == "V3 in depth"
    qtbot.keyClick(judged.wall, Qt.Key.Key_Down)
    assert heading(judged) == "aVR in depth"


def test_the_wall_is_reached_from_the_button_before_it_with_the_tab_key(judged, qtbot):
    judged.report_button.setFocus()
    for _ in range(3):
        if judged.wall.hasFocus():
            break
        qtbot.keyClick(judged.focusWidget(), Qt.Key.Key_Tab)
    assert judged.wall.hasFocus()
