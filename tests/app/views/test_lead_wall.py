from __future__ import annotations

import pytest
from PySide6.QtCore import QEvent, QPoint, QPointF, Qt
from PySide6.QtGui import QMouseEvent
from PySide6.QtWidgets import QApplication, QToolTip

from app.state.bench_state import BenchState
from app.views.lead_wall import BY_WALL, GAP, LeadWall
from core.recordings.leads import TWELVE_LEADS
from core.wording.judgements import WORDS
from tests.app.drawing.readback import drawn_on, pixels
from tests.app.views.showing import show

NAMES = ["raised", "inferior", "steady", "medial", "four_flat"]


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def wall(qtbot, light, state) -> LeadWall:
    made = LeadWall(state)
    qtbot.addWidget(made)
    made.resize(470, 560)
    made.show()
    qtbot.waitExposed(made)
    return made


def test_an_empty_wall_is_blank(wall):
    assert drawn_on(wall) == []


@pytest.mark.parametrize("name", NAMES)
def test_every_cell_names_its_lead_and_its_judgement(wall, state, request, name):
    comparison = request.getfixturevalue(name)
    state.finish(comparison)
    drawn = drawn_on(wall)
    for row, leads in enumerate(BY_WALL):
        for column, lead in enumerate(leads):
            cell = wall.cell(row, column)
            texts = [p.text for p in drawn if cell.contains(p.left, p.baseline)]
            assert texts[:2] == [lead, WORDS[comparison.leads[lead].judgement]]


def test_cells_fill_the_wall_and_never_meet(wall):
    cells = [wall.cell(row, column) for row in range(4) for column in range(3)]
    for place, one in enumerate(cells):
        assert wall.rect().contains(one.toRect())
        for other in cells[place + 1 :]:
            assert not one.adjusted(-1, -1, 1, 1).intersects(other)
    gap = wall.cell(0, 1).left() - wall.cell(0, 0).right()
    assert gap == pytest.approx(GAP)


def test_between_the_cells_there_is_no_lead(wall):
    cell = wall.cell(0, 0)
    assert wall.lead_at(cell.right() + GAP / 2, cell.top() + 5) is None
    assert wall.lead_at(wall.width() - 1, wall.height() - 1) is None
    assert {wall.lead_at(*_middle(wall, lead)) for lead in TWELVE_LEADS} == set(TWELVE_LEADS)


def _middle(wall, lead) -> tuple[float, float]:
    for row, leads in enumerate(BY_WALL):
        if lead in leads:
            at = wall.cell(row, leads.index(lead)).center()
            return at.x(), at.y()
    raise AssertionError(lead)


def test_a_click_between_cells_selects_nothing(wall, state, raised, qtbot):
    state.finish(raised)
    cell, before = wall.cell(1, 1), state.lead
    at = QPoint(round(cell.right() + GAP / 2), round(cell.center().y()))
    qtbot.mouseClick(wall, Qt.MouseButton.LeftButton, pos=at)
    assert state.lead == before


def test_the_selection_is_seen_and_only_there(wall, state, raised):
    state.finish(raised)
    state.select_lead("I")
    before = pixels(wall.grab().toImage())
    state.select_lead("V5")
    changed = (pixels(wall.grab().toImage()) != before).any(axis=-1)
    for row, leads in enumerate(BY_WALL):
        for column, lead in enumerate(leads):
            cell = wall.cell(row, column).toRect()
            inside = changed[cell.top() : cell.bottom(), cell.left() : cell.right()]
            assert inside.any() == (lead in ("I", "V5")), lead


def test_other_keys_are_left_to_the_window(wall, state, raised, qtbot):
    state.finish(raised)
    before = state.lead
    qtbot.keyClick(wall, Qt.Key.Key_A)
    qtbot.keyClick(wall, Qt.Key.Key_PageDown)
    assert state.lead == before


def test_it_can_be_reached_with_the_tab_key(wall):
    assert wall.focusPolicy() & Qt.FocusPolicy.TabFocus


def test_the_reason_is_told_under_the_mouse(wall, state, raised, monkeypatch):
    told = []
    monkeypatch.setattr(QToolTip, "showText", lambda at, text, widget: told.append(text))
    state.finish(raised)
    none, plain = Qt.MouseButton.NoButton, Qt.KeyboardModifier.NoModifier
    for lead in TWELVE_LEADS:
        at = QPointF(*_middle(wall, lead))
        moved = QMouseEvent(QEvent.Type.MouseMove, at, wall.mapToGlobal(at), none, none, plain)
        QApplication.sendEvent(wall, moved)
    assert told == [raised.leads[lead].reason for lead in TWELVE_LEADS]


@pytest.mark.parametrize("name", NAMES)
def test_a_screen_reader_is_told_the_lead_that_comes_into_view(wall, state, request, name):
    comparison = request.getfixturevalue(name)
    state.finish(comparison)
    result = comparison.leads[state.lead]
    said = wall.accessibleDescription()
    assert said == f"{state.lead}, {WORDS[result.judgement]}. {result.reason}"


def test_a_screen_reader_is_told_nothing_of_a_result_that_is_gone(bench, raised):
    show(bench, raised)
    bench.state.select_lead("V1")
    bench.state.choose(None, None)
    assert raised.leads["V1"].reason not in bench.wall.accessibleDescription()
