from __future__ import annotations

from pathlib import Path

import pytest
from PySide6.QtCore import QRect, Qt

from app.drawing.palette import LIGHT
from app.state.bench_state import BenchState
from app.views.verdict_panel import VerdictPanel
from tests.app.drawing.readback import drawn_on, pixels, words

EARLIER, LATER = Path("earlier.hea"), Path("later.hea")


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def panel(qtbot, light, state) -> VerdictPanel:
    made = VerdictPanel(state)
    qtbot.addWidget(made)
    made.resize(1256, 84)
    made.show()
    return made


def mark_of(panel) -> object:
    """The corner where the judgement's mark stands, without the border."""
    return pixels(panel.grab(QRect(10, 8, 32, 40)).toImage())


@pytest.mark.parametrize("name", ["raised", "inferior", "steady", "medial"])
def test_it_says_what_was_found_and_what_to_do_next(panel, state, request, name):
    comparison = request.getfixturevalue(name)
    state.finish(comparison)
    said = words(drawn_on(panel))
    assert " ".join(comparison.overall.sentence.split()) in said
    assert comparison.overall.next_step in said


@pytest.mark.parametrize("name", ["raised", "inferior", "steady"])
def test_a_judgement_has_its_mark_in_its_colour(panel, state, request, name):
    comparison = request.getfixturevalue(name)
    state.finish(comparison)
    colour = LIGHT.judgement(comparison.overall.judgement).getRgb()[:3]
    assert (mark_of(panel) == colour).all(axis=-1).sum() > 50  # px of a mark of 15 px


def test_a_refusal_has_no_mark_of_a_judgement(panel, state, inferior):
    state.finish(inferior)
    state.refuse("3 recordings were dropped; a comparison takes two.")
    assert (mark_of(panel) == 255).all()


def test_progress_is_shown_in_words_and_as_a_bar(panel, state):
    state.choose(EARLIER, LATER)
    state.begin()
    state.advance(0.6, "drawing electrode shifts")
    assert "drawing electrode shifts" in words(drawn_on(panel))
    assert (panel.bar.isVisible(), panel.bar.value()) == (True, 60)
    assert panel.cancel.isVisible()


def test_the_work_can_be_stopped_by_a_click(panel, state, qtbot):
    state.choose(EARLIER, LATER)
    state.begin()
    with qtbot.waitSignal(panel.cancelled):
        qtbot.mouseClick(panel.cancel, Qt.MouseButton.LeftButton)


def test_a_stop_can_be_lifted_by_a_click(panel, state, qtbot):
    state.choose(EARLIER, LATER)
    state.refuse("The two files state different identifiers.", ("identifiers-differ",))
    with qtbot.waitSignal(panel.lift_wanted):
        qtbot.mouseClick(panel.lift, Qt.MouseButton.LeftButton)


@pytest.mark.parametrize("pair", [(EARLIER, None), (None, LATER)])
def test_with_one_recording_it_asks_for_the_other(panel, state, pair):
    state.choose(*pair)
    assert "One recording is chosen" in words(drawn_on(panel))


def test_after_a_stop_it_does_not_say_that_a_recording_is_missing(panel, state):
    state.choose(EARLIER, LATER)
    state.begin()
    state.stop()
    said = words(drawn_on(panel))
    assert "One recording is chosen" not in said
    assert "Drop two recordings" not in said


def test_a_sentence_of_any_length_stands_whole(panel, state, qtbot):
    state.choose(EARLIER, LATER)
    reason = "A file that cannot be read has a long story to tell. " * 6
    state.refuse(reason)
    qtbot.wait(1)
    panel.resize(1256, panel.sizeHint().height())
    qtbot.wait(1)
    drawn = drawn_on(panel)
    assert reason.strip() in words(drawn)
    assert max(piece.baseline for piece in drawn) < panel.height()
