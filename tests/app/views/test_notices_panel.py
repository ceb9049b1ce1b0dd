from __future__ import annotations

from dataclasses import replace

import pytest
from PySide6.QtWidgets import QLabel

from app.state.bench_state import BenchState
from app.views.notices_panel import NoticesPanel
from core.notices import Notice
from tests.app.drawing.readback import drawn_on, lying_on_each_other, words


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def panel(qtbot, light, state) -> NoticesPanel:
    made = NoticesPanel(state)
    qtbot.addWidget(made)
    made.resize(405, 237)
    made.show()
    return made


def shown(panel) -> list[str]:
    return [one.text() for one in panel.findChildren(QLabel) if one.isVisible()][1:]


@pytest.mark.parametrize("name", ["raised", "inferior", "steady", "medial", "four_flat"])
def test_every_notice_is_shown_in_its_order(panel, state, request, qtbot, name):
    comparison = request.getfixturevalue(name)
    state.finish(comparison)
    qtbot.wait(1)
    texts = shown(panel)
    assert len(texts) == len(comparison.notices)
    for text, notice in zip(texts, comparison.notices, strict=True):
        assert text.endswith(f": {notice.text}")


def test_how_grave_a_notice_is_stands_before_it_in_a_word(panel, state, raised):
    notices = tuple(
        Notice(f"invented-{severity}", severity, "An invented sentence.")
        for severity in ("stop", "caution", "info")
    )
    state.finish(replace(raised, notices=notices))
    assert panel.texts() == [
        f"{word}: An invented sentence." for word in ("Stop", "Caution", "Note")
    ]


def test_where_there_is_nothing_to_say_it_says_that(panel, state, raised):
    state.finish(replace(raised, notices=()))
    (text,) = panel.texts()
    assert "Nothing" in text


def test_notices_of_an_old_pair_go(panel, state, raised, qtbot):
    state.finish(raised)
    qtbot.wait(1)
    state.choose(None, None)
    qtbot.wait(1)
    assert shown(panel) == []
    assert raised.notices[0].text not in words(drawn_on(panel))


def test_notices_of_the_next_pair_take_their_place(panel, state, raised, steady, qtbot):
    state.finish(raised)
    qtbot.wait(1)
    state.finish(steady)
    qtbot.wait(1)
    assert len(shown(panel)) == len(steady.notices)
    assert lying_on_each_other(drawn_on(panel)) == []


def test_markup_in_a_notice_stays_text(panel, state, raised, qtbot):
    state.finish(replace(raised, notices=(Notice("invented", "info", "A <b>bold</b> file."),)))
    qtbot.wait(1)
    assert "A <b>bold</b> file." in words(drawn_on(panel))
