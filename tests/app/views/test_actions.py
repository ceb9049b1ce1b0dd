from __future__ import annotations

from collections import Counter
from pathlib import Path

import pytest
from PySide6.QtCore import Qt
from PySide6.QtGui import QAction
from PySide6.QtWidgets import QPushButton, QWidget

from app.views import dialogs
from app.views.actions import ENTRIES
from core.wording.caution import CAUTION, KNOWN_LIMITS
from core.wording.judgements import MARKS, MEANINGS, WORDS
from tests.app.views.showing import PHASES, refused, show


def test_no_two_actions_of_the_window_answer_one_key(bench):
    keys = Counter(
        key.toString()
        for action in bench.findChildren(QAction)
        for key in action.shortcuts()
        if not key.isEmpty()
    )
    assert len(keys) >= 3
    assert keys.most_common(1)[0][1] == 1


def test_every_entry_is_in_a_menu(bench):
    texts = {
        action.text()
        for menu in bench.menuBar().actions()
        for action in menu.menu().actions()  # type: ignore[union-attr]
    }
    assert texts == {entry.text for entry in ENTRIES}


@pytest.mark.parametrize("phase", PHASES)
def test_only_a_result_can_be_exported(bench, raised, phase):
    phase(bench, raised)
    for name in ("export.pdf", "export.json", "export.csv"):
        assert bench.actions_list.by_id[name].isEnabled() == (phase is show)
    assert bench.report_button.isEnabled() == (phase is show)


@pytest.mark.parametrize("phase", PHASES)
def test_only_a_pair_can_be_swapped(bench, raised, phase):
    phase(bench, raised)
    pair = None not in (bench.state.earlier, bench.state.later)
    assert bench.actions_list.by_id["pair.swap"].isEnabled() == pair
    assert bench.swap_button.isEnabled() == pair


@pytest.mark.parametrize(("entry", "role"), [("open.earlier", "earlier"), ("open.later", "later")])
def test_a_recording_is_chosen_for_its_own_place(bench, monkeypatch, entry, role):
    titles = []

    def answer(parent: QWidget, title: str) -> Path:
        titles.append(title)
        return Path("chosen.hea")

    monkeypatch.setattr(dialogs, "ask_recording", answer)
    bench.actions_list.by_id[entry].trigger()
    assert getattr(bench.state, role) == Path("chosen.hea")
    assert role in titles[0]
    assert not bench.state.has_pair


def test_a_dialog_that_is_left_changes_nothing(bench, monkeypatch, raised):
    show(bench, raised)
    monkeypatch.setattr(dialogs, "ask_recording", lambda parent, title: None)
    monkeypatch.setattr(dialogs, "ask_file_to_write", lambda *asked: None)
    for name in ("open.earlier", "open.later", "export.pdf", "export.csv", "export.json"):
        bench.actions_list.by_id[name].trigger()
    assert bench.state.comparison is raised


def test_help_says_what_every_judgement_means_with_cautions(bench, monkeypatch):
    told = []
    monkeypatch.setattr(dialogs, "tell", lambda parent, title, text: told.append(text))
    bench.actions_list.by_id["help.judgements"].trigger()
    (text,) = told
    for code, meaning in MEANINGS.items():
        assert f"{MARKS[code]}  {WORDS[code]}: {meaning}" in text
    assert KNOWN_LIMITS in text
    assert CAUTION in text


def test_about_cautions_too(bench, monkeypatch):
    told = []
    monkeypatch.setattr(dialogs, "tell", lambda parent, title, text: told.append(text))
    bench.actions_list.by_id["help.about"].trigger()
    assert CAUTION in told[0]


def test_a_stop_is_lifted_by_its_name_and_for_this_pair_alone(bench, monkeypatch, raised):
    asked = []
    monkeypatch.setattr(bench.runner, "start", asked.append)
    refused(bench, raised)
    bench.verdict.lift.click()
    assert asked[-1].settings.lifted_stops == ("identifiers-differ",)
    bench.open_pair(Path("c.hea"), Path("d.hea"))
    assert asked[-1].settings.lifted_stops == ()


def test_lifting_a_stop_keeps_the_order_by_time(bench, monkeypatch):
    asked = []
    monkeypatch.setattr(bench.runner, "start", asked.append)
    bench.open_dropped([Path("a.hea"), Path("b.hea")])
    bench.state.refuse("Two persons.", ("identifiers-differ",))
    bench.verdict.lift.click()
    assert [request.order_by_time for request in asked] == [True, True]


def test_all_that_can_be_pressed_can_be_reached_with_the_tab_key(bench, raised):
    show(bench, raised)
    for button in bench.findChildren(QPushButton):
        assert button.focusPolicy() & Qt.FocusPolicy.TabFocus
        assert len(button.accessibleName() or button.text()) > 2
