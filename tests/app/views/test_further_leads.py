"""The wall and the lead in depth of a pair with further leads."""

from __future__ import annotations

import pytest
from PySide6.QtCore import QEvent, QPoint, QPointF, QRect, Qt
from PySide6.QtGui import QMouseEvent
from PySide6.QtWidgets import QApplication, QToolTip

from app.views.lead_wall import BY_WALL
from app.views.wall_scroll import WallScroll
from core.wording.further import HEADING, VALUES
from tests.app.drawing.readback import drawn_on, lying_on_each_other, words
from tests.app.views.showing import show

SIZES = pytest.mark.parametrize("size", [(1060, 680), (1280, 720), (1440, 900)], ids=str)
LEADS = ("V3R", "V4R", "V7", "V9", "X")


@pytest.fixture
def shown(bench, further, qtbot, request):
    bench.resize(*getattr(request, "param", (1440, 900)))
    show(bench, further)
    qtbot.wait(1)
    return bench


def in_view(bench) -> QRect:
    """The part of the wall that is seen."""
    scroll = bench.findChild(WallScroll)
    return QRect(QPoint(0, scroll.verticalScrollBar().value()), scroll.viewport().size())


@SIZES
def test_their_cells_follow_the_twelve_and_are_as_large(bench, further, qtbot, size):
    bench.resize(*size)
    show(bench, further)
    qtbot.wait(1)
    wall = bench.wall
    assert wall.rows() == [*BY_WALL, LEADS[:3], LEADS[3:]]
    cells = {lead: wall.cell_of(lead) for row in wall.rows() for lead in row}
    lowest = max(cells[lead].bottom() for row in BY_WALL for lead in row)
    for lead in LEADS:
        assert cells[lead].size() == cells["V1"].size()
        assert cells[lead].top() > lowest
        assert wall.rect().contains(cells[lead].toRect())
    for one in cells.values():
        assert sum(one.intersects(other) for other in cells.values()) == 1


@SIZES
def test_every_word_of_the_wall_has_its_place(bench, further, qtbot, size):
    bench.resize(*size)
    show(bench, further)
    qtbot.wait(1)
    drawn = drawn_on(bench.wall)
    assert HEADING in words(drawn)
    assert VALUES in words(drawn)
    assert "…" not in words(drawn)
    assert lying_on_each_other(drawn) == []
    for lead in LEADS:
        cell = bench.wall.cell_of(lead)
        texts = [piece.text for piece in drawn if cell.contains(piece.left, piece.baseline)]
        assert texts[:2] == [lead, "not judged"]
        assert len(texts) == 4


def test_the_twelve_are_in_view_at_first_and_the_heading_tells_that_there_is_more(shown):
    view = in_view(shown)
    for row in BY_WALL:
        for lead in row:
            assert view.contains(shown.wall.cell_of(lead).toRect())
    heading = next(piece for piece in drawn_on(shown.wall) if piece.text == HEADING)
    assert heading.baseline < view.bottom()
    assert not view.contains(shown.wall.cell_of("X").toRect())


def test_without_further_leads_the_wall_never_scrolls(bench, further, raised, qtbot):
    for comparison in (raised, further, raised):
        show(bench, comparison)
        qtbot.wait(1)
    assert bench.wall.height() == in_view(bench).height()
    assert HEADING not in words(drawn_on(bench.wall))


def test_a_lead_that_is_selected_comes_into_view(shown, qtbot):
    for lead in ("X", "II"):
        shown.state.select_lead(lead)
        qtbot.wait(1)
        assert in_view(shown).contains(shown.wall.cell_of(lead).toRect())


@pytest.mark.parametrize("lead", LEADS)
def test_a_click_shows_it_in_depth(shown, qtbot, lead):
    at = shown.wall.cell_of(lead).center().toPoint()
    qtbot.mouseClick(shown.wall, Qt.MouseButton.LeftButton, pos=at)
    drawn = [piece.text for piece in drawn_on(shown.lead_depth)]
    assert drawn[:2] == [f"{lead} in depth", "not judged"]
    said = " ".join(drawn)
    assert " ".join(shown.state.comparison.reason_of(lead).split()) in said
    for band in ("repeat noise", "expected"):
        assert band not in said


@pytest.mark.parametrize(
    ("lead", "legends"),
    [
        ("V7", ["earlier", "later", "change: later less earlier"]),
        ("V3R", ["later"]),
        ("X", ["earlier"]),
    ],
)
def test_the_legend_in_depth_names_what_is_drawn(shown, lead, legends):
    shown.state.select_lead(lead)
    drawn = [piece.text for piece in drawn_on(shown.lead_depth)]
    named = ("earlier", "later", "repeat noise", "reach", "change: later less earlier", "expected")
    assert [text for text in drawn if text in named] == legends
    assert drawn.count("R") == (2 if lead == "V7" else 1)  # one or two plots


def test_arrow_keys_walk_into_the_further_leads_and_out_again(shown, qtbot):
    shown.state.select_lead("aVR")  # the last column
    visited = []
    for key in (Qt.Key.Key_Down, Qt.Key.Key_Down, Qt.Key.Key_Right, Qt.Key.Key_Up, Qt.Key.Key_Up):
        qtbot.keyClick(shown.wall, key)
        visited.append(shown.state.lead)
    assert visited == ["V7", "X", "V9", "V3R", "V4"]


def test_a_screen_reader_and_the_mouse_are_told_their_reason(shown, further, monkeypatch):
    told = []
    monkeypatch.setattr(QToolTip, "showText", lambda at, text, widget: told.append(text))
    shown.state.select_lead("V7")
    reason = further.further["V7"].reason
    assert shown.wall.accessibleDescription() == f"V7, not judged. {reason}"
    at, none = QPointF(shown.wall.cell_of("V7").center()), Qt.MouseButton.NoButton
    plain = Qt.KeyboardModifier.NoModifier
    moved = QMouseEvent(QEvent.Type.MouseMove, at, shown.wall.mapToGlobal(at), none, none, plain)
    QApplication.sendEvent(shown.wall, moved)
    assert told == [reason]


def test_another_pair_without_them_can_follow(shown, raised, qtbot):
    shown.state.select_lead("X")
    show(shown, raised)
    qtbot.wait(1)
    assert shown.state.lead == "V2"
    assert drawn_on(shown.lead_depth)[0].text == "V2 in depth"
