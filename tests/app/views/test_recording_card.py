from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest
from PySide6 import QtGui

from app.state.bench_state import BenchState
from app.views.recording_card import RecordingCard
from core.recordings.recording import Subject
from core.wording.recordings import when
from tests.app.drawing.readback import drawn_on, words
from tests.app.report.subjects import of_person

# Widths of a card in a window of 1280 and of 1440 px.
WIDTHS = pytest.mark.parametrize("width", [477, 557])


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def card(qtbot, light, state) -> RecordingCard:
    made = RecordingCard(state, "later")
    qtbot.addWidget(made)
    made.resize(477, made.sizeHint().height())
    return made


def test_without_a_recording_it_says_so(card):
    assert "no recording yet" in words(drawn_on(card))


def test_a_chosen_file_is_named_before_it_is_read(card, state):
    state.choose(None, Path("ward") / "tracing-of-monday.dcm")
    said = words(drawn_on(card))
    assert "tracing-of-monday.dcm" in said
    assert "ward" not in said


@pytest.mark.parametrize("name", ["raised", "inferior", "steady", "medial"])
@WIDTHS
def test_the_file_says_when_and_who(card, state, request, name, width):
    comparison = request.getfixturevalue(name)
    card.resize(width, card.height())
    state.finish(comparison)
    recording, said = comparison.later.recording, words(drawn_on(card))
    for part in (recording.subject.name, recording.subject.id, recording.subject.sex):
        assert part in said
    assert when(recording.recorded_at) in said


@WIDTHS
def test_the_time_stands_whole_whatever_limits_the_recording(card, state, four_flat, width):
    card.resize(width, card.height())
    state.finish(four_flat)
    said = words(drawn_on(card))
    assert when(four_flat.later.recording.recorded_at) in said
    assert "V1 flat" in said


def test_the_two_cards_show_their_own_recording(qtbot, light, state, raised):
    earlier, later = RecordingCard(state, "earlier"), RecordingCard(state, "later")
    for one in (earlier, later):
        qtbot.addWidget(one)
        one.resize(557, 78)
    state.finish(raised)
    assert when(raised.earlier.recording.recorded_at) in words(drawn_on(earlier))
    assert when(raised.later.recording.recorded_at) in words(drawn_on(later))


def test_a_long_name_is_shortened_and_whole_in_the_tool_tip(card, state, raised):
    name, identifier = "Invented " + "Longname" * 6 + "Ash", "INVENTED-0123456789"
    state.finish(of_person(raised, Subject(identifier, name, "female", 61.0)))
    shown = [piece for piece in drawn_on(card) if piece.text.startswith("Invented Long")]
    assert len(shown) == 1
    assert shown[0].text.endswith("…")
    assert shown[0].right <= card.width()
    for told in (card.toolTip(), card.accessibleDescription()):
        assert name in told
        assert identifier in told


def test_a_file_without_identification_is_called_so(card, state, raised):
    state.finish(of_person(raised, Subject()))
    said = words(drawn_on(card))
    assert "no identification in the file" in said
    assert "time not stated" in said
    assert "None" not in said


def test_nothing_of_the_old_recording_stays_under_a_new_pair(card, state, raised):
    state.finish(raised)
    state.choose(Path("other-earlier.hea"), Path("other-later.hea"))
    said = words(drawn_on(card)) + card.toolTip() + card.accessibleDescription()
    assert "other-later.hea" in said
    assert raised.later.recording.subject.name not in said
    assert "beats used" not in said


def test_a_file_name_is_never_taken_for_markup(card, state):
    name = "<b>tracing <img src='x'>.hea"
    state.choose(None, Path(name))
    assert name in words(drawn_on(card))
    # A tool tip is rich text wherever it looks like it.
    told = card.toolTip()
    assert name not in told or not QtGui.Qt.mightBeRichText(told)


def test_a_recording_whose_every_beat_is_used_says_how_many(card, state, steady):
    state.finish(replace(steady, later=steady.earlier))
    assert card.limits() == "10 of 10 beats used"
    assert card.limits() in words(drawn_on(card))
