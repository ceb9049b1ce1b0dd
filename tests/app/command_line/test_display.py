from __future__ import annotations

from app.command_line import display


def test_a_window_system_that_does_not_answer_is_none(monkeypatch):
    monkeypatch.setenv("QT_QPA_PLATFORM", "no-such-platform")
    assert display.display_named()
    assert not display.display_answers()


def test_the_offscreen_platform_answers(monkeypatch):
    monkeypatch.setenv("QT_QPA_PLATFORM", "offscreen")
    assert display.display_answers()
