from __future__ import annotations

import pytest
from PySide6.QtCore import Qt

from app.samples import SAMPLE_PAIRS
from app.views.start_view import StartView
from core import read_recording
from tests.app.drawing.readback import drawn_on, words


@pytest.fixture
def view(qtbot, light) -> StartView:
    made = StartView()
    qtbot.addWidget(made)
    made.resize(1256, 480)
    made.show()
    return made


@pytest.mark.parametrize("pair", SAMPLE_PAIRS, ids=lambda pair: pair.earlier_name)
def test_the_pairs_that_it_offers_can_be_read_and_are_in_order(pair):
    earlier, later = read_recording(pair.earlier), read_recording(pair.later)
    assert earlier.subject.id == later.subject.id
    assert earlier.recorded_at < later.recorded_at


@pytest.mark.parametrize("place", range(len(SAMPLE_PAIRS)))
def test_a_click_asks_for_the_pair_that_is_named(view, qtbot, place):
    pair = SAMPLE_PAIRS[place]
    assert view.buttons[place].text() == pair.title
    with qtbot.waitSignal(view.pair_wanted) as asked:
        qtbot.mouseClick(view.buttons[place], Qt.MouseButton.LeftButton)
    assert asked.args == [pair.earlier, pair.later]


@pytest.mark.parametrize("place", range(len(SAMPLE_PAIRS)))
def test_the_space_key_does_what_a_click_does(view, qtbot, place):
    view.buttons[place].setFocus()
    with qtbot.waitSignal(view.pair_wanted):
        qtbot.keyClick(view.buttons[place], Qt.Key.Key_Space)


def test_every_pair_has_its_title_and_its_story(view):
    said = words(drawn_on(view))
    for pair in SAMPLE_PAIRS:
        assert pair.title in said
        assert pair.story in said
