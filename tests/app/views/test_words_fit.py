from __future__ import annotations

import pytest
from PySide6.QtCore import QPoint, QRect, Qt
from PySide6.QtWidgets import QLabel, QPushButton

from core.wording.caution import CAUTION, PLACEMENT_CAVEAT
from tests.app.drawing.readback import drawn_on, words
from tests.app.views.showing import PHASES

SIZES = pytest.mark.parametrize("size", [(1280, 720), (1440, 900)], ids=str)


@SIZES
@pytest.mark.parametrize("phase", PHASES)
def test_the_cautions_are_drawn_whole_in_every_phase(bench, raised, qtbot, phase, size):
    bench.resize(*size)
    phase(bench, raised)
    qtbot.wait(1)
    assert (bench.width(), bench.height()) == size
    drawn = [piece for piece in drawn_on(bench) if piece.baseline <= bench.height()]
    assert CAUTION in words(drawn)
    if bench.state.comparison is not None:
        assert PLACEMENT_CAVEAT in words(drawn)


@SIZES
@pytest.mark.parametrize("phase", PHASES)
def test_no_label_is_clipped(bench, raised, qtbot, phase, size):
    bench.resize(*size)
    phase(bench, raised)
    qtbot.wait(1)
    shown = [one for one in bench.findChildren(QLabel) if one.isVisible() and one.text()]
    assert shown
    for one in shown:
        flags = int(Qt.TextFlag.TextWordWrap) if one.wordWrap() else 0
        room = QRect(0, 0, one.width(), 10_000)
        needed = one.fontMetrics().boundingRect(room, flags, one.text())
        assert needed.width() <= one.width(), one.text()
        assert needed.height() <= one.height(), one.text()


@SIZES
@pytest.mark.parametrize("phase", PHASES)
def test_every_button_has_room_for_its_words_and_lies_in_the_window(
    bench, raised, qtbot, phase, size
):
    bench.resize(*size)
    phase(bench, raised)
    qtbot.wait(1)
    for button in bench.findChildren(QPushButton):
        if button.isVisible():
            assert button.fontMetrics().horizontalAdvance(button.text()) <= button.width()
            corner = button.mapTo(bench, QPoint(button.width(), button.height()))
            assert corner.x() <= bench.width()
            assert corner.y() <= bench.height()
