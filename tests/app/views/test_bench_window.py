"""The bench with made results: what it shows in every phase."""

from __future__ import annotations

from collections import Counter
from dataclasses import replace
from pathlib import Path

import pytest
from PySide6.QtCore import QPoint, Qt
from PySide6.QtWidgets import QLabel, QPushButton

from app.jobs.compare_job import CompareRunner
from app.state.bench_state import Phase
from app.views.actions import ENTRIES
from app.views.bench_window import BenchWindow
from app.views.labels import WrappedLabel
from app.views.lead_wall import BY_WALL
from app.views.recording_card import RecordingCard
from app.views.theme import dress, use_scheme
from core.recordings.leads import TWELVE_LEADS
from core.wording.caution import CAUTION
from core.wording.judgements import WORDS

SIZES = [(1280, 720), (1440, 900), (1060, 680)]


@pytest.fixture
def window(qtbot, qapp) -> BenchWindow:
    """No work is ever done: results are put into the state."""
    dress(qapp)
    made = BenchWindow(CompareRunner(lambda request, report, stop: None))
    qtbot.addWidget(made)
    made.resize(1280, 720)
    made.show()
    qtbot.waitExposed(made)
    return made


def show(window, comparison) -> None:
    window.state.choose(Path("earlier.hea"), Path("later.hea"))
    window.state.begin()
    window.state.finish(comparison)


PHASES = {
    "empty": lambda window, comparison: None,
    "working": lambda window, comparison: (
        window.state.choose(Path("a.hea"), Path("b.hea")),
        window.state.begin(),
    ),
    "refused": lambda window, comparison: (
        window.state.choose(Path("a.hea"), Path("b.hea")),
        window.state.refuse("b.hea: the file is empty. Export the recording again."),
    ),
    "judged": show,
}


def labels(window) -> list[QLabel]:
    return [one for one in window.findChildren(QLabel) if one.isVisible() and one.text()]


@pytest.mark.parametrize("size", SIZES, ids=str)
@pytest.mark.parametrize("phase", PHASES)
def test_no_text_is_clipped_and_the_caution_is_in_view(window, qtbot, raised, phase, size):
    PHASES[phase](window, raised)
    window.resize(*size)
    qtbot.wait(30)
    assert (window.width(), window.height()) == size
    for one in labels(window):
        if isinstance(one, WrappedLabel):
            assert one.height() >= one.heightForWidth(one.width()), one.text()
        else:
            assert one.width() >= one.sizeHint().width() - 1, one.text()
    cautions = [one for one in labels(window) if one.text() == CAUTION]
    assert len(cautions) == 1
    bottom = cautions[0].mapTo(window, QPoint(0, cautions[0].height())).y()
    assert bottom <= window.height()


def test_the_sentence_follows_the_phase(window, raised):
    sentence = window.verdict.sentence
    assert "did the electrodes move" in sentence.text()
    PHASES["working"](window, raised)
    assert sentence.text() == "Comparing the two recordings"
    assert window.verdict.bar.isVisible()
    PHASES["refused"](window, raised)
    assert "the file is empty" in sentence.text()
    show(window, raised)
    assert sentence.text() == raised.overall.sentence
    assert window.verdict.next_step.text() == raised.overall.next_step
    assert not window.verdict.bar.isVisible()


def test_what_can_be_done_follows_the_phase(window, raised):
    actions = window.actions_list.by_id
    assert not actions["export.pdf"].isEnabled()
    assert not window.report_button.isEnabled()
    assert not window.swap_button.isEnabled()
    show(window, raised)
    assert actions["export.pdf"].isEnabled()
    assert window.report_button.isEnabled()
    assert window.swap_button.isEnabled()
    window.state.refuse("No.")
    assert not actions["export.json"].isEnabled()


def test_a_stop_can_be_lifted_and_a_refusal_cannot(window):
    window.state.choose(Path("a.hea"), Path("b.hea"))
    window.state.refuse("The file is empty.")
    assert not window.verdict.lift.isVisible()
    window.state.refuse("Two persons.", ("identifiers-differ",))
    assert window.verdict.lift.isVisible()


def test_the_cards_say_who_when_and_how_good(window, raised):
    show(window, raised)
    earlier, later = window.findChildren(RecordingCard)
    assert "14 October 2031" in earlier.lines()[0]
    assert "Invented Ash" in later.lines()[1]
    assert "Fridericia" in later.lines()[2]
    assert earlier.limits() == "9 of 11 beats used"
    assert earlier.limits() in earlier.toolTip()


def test_the_wall_has_every_lead_once():
    assert sorted(lead for row in BY_WALL for lead in row) == sorted(TWELVE_LEADS)


def test_a_click_selects_a_lead(window, qtbot, raised):
    show(window, raised)
    for row, leads in enumerate(BY_WALL):
        for column, lead in enumerate(leads):
            at = window.wall.cell(row, column).center().toPoint()
            qtbot.mouseClick(window.wall, Qt.MouseButton.LeftButton, pos=at)
            assert window.state.lead == lead


def test_arrow_keys_walk_the_wall_and_come_back(window, qtbot, raised):
    show(window, raised)
    start = window.state.lead
    visited = []
    for key in [Qt.Key.Key_Right] * 3 + [Qt.Key.Key_Down] * 4:
        qtbot.keyClick(window.wall, key)
        visited.append(window.state.lead)
    assert visited[2] == visited[6] == start
    assert len(set(visited)) == 6


def test_the_wall_tells_a_screen_reader_what_is_selected(window, raised):
    show(window, raised)
    window.state.select_lead("V1")
    said = window.wall.accessibleDescription()
    assert said.startswith(f"V1, {WORDS['in-reach-backed']}")
    assert raised.leads["V1"].reason in said


def test_the_notices_are_in_words_gravest_first(window, raised):
    show(window, raised)
    panel = [one for one in window.findChildren(QLabel) if one.text().startswith("Note: ")]
    assert len(panel) == len(raised.notices)


def test_every_button_has_words_for_a_screen_reader(window):
    for button in window.findChildren(QPushButton):
        assert len(button.accessibleName() or button.text()) > 2


def test_no_two_actions_share_a_shortcut_or_a_name():
    shortcuts = Counter(str(entry.shortcut) for entry in ENTRIES if entry.shortcut is not None)
    assert max(shortcuts.values()) == 1
    assert len({entry.id for entry in ENTRIES}) == len(ENTRIES)
    for menu in {entry.menu for entry in ENTRIES}:
        keys = [e.text[e.text.index("&") + 1].lower() for e in ENTRIES if e.menu == menu]
        assert len(set(keys)) == len(keys)


def test_long_names_shorten_and_stay_in_the_tool_tip(window, raised):
    long = "A very long invented name " * 8

    def renamed(report):
        subject = replace(report.recording.subject, name=long)
        return replace(report, recording=replace(report.recording, subject=subject))

    width = window.width()
    show(window, replace(raised, earlier=renamed(raised.earlier), later=renamed(raised.later)))
    assert window.width() == width
    card = window.findChildren(RecordingCard)[0]
    assert long.strip() in card.toolTip()


def test_dark_and_light_are_drawn_in_their_own_colours(window, qtbot, qapp, raised):
    show(window, raised)
    grounds = []
    try:
        for scheme in (Qt.ColorScheme.Light, Qt.ColorScheme.Dark):
            use_scheme(scheme)
            dress(qapp)
            qtbot.wait(20)
            grounds.append(window.grab().toImage().pixelColor(3, 300).lightness())
    finally:
        use_scheme(None)
        dress(qapp)
    assert grounds[0] > 200 > 60 > grounds[1]
    assert window.state.phase is Phase.JUDGED
