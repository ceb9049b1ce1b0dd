from __future__ import annotations

from dataclasses import replace

import pytest

from app.state.bench_state import BenchState
from app.views.caution_bar import CautionBar
from core.settings import Settings, Spread
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT
from tests.app.drawing.readback import drawn_on, words


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def bar(qtbot, light, state) -> CautionBar:
    made = CautionBar(state)
    qtbot.addWidget(made)
    made.resize(1256, 90)
    made.show()
    return made


def test_before_there_is_a_result_it_cautions(bar):
    said = words(drawn_on(bar))
    assert CAUTION in said
    assert PLACEMENT_CAVEAT not in said


def test_with_a_result_it_adds_the_caveat(bar, state, raised):
    state.finish(raised)
    said = words(drawn_on(bar))
    assert CAUTION in said
    assert PLACEMENT_CAVEAT in said


def test_it_names_the_settings_that_shaped_the_result(bar, state, raised):
    settings = Settings(st_point_ms=40.0, spread_mm=Spread(left=11.0, up=33.0))
    state.finish(replace(raised, settings=settings))
    said = words(drawn_on(bar))
    for part in ("33 mm up", "11 mm left", "J+40 ms", raised.placement.model_name):
        assert part in said


def test_nothing_of_an_old_result_stays(bar, state, raised):
    state.finish(raised)
    state.choose(None, None)
    assert raised.placement.model_name not in words(drawn_on(bar))


def test_its_words_can_be_selected_and_copied(bar):
    for one in (bar.caution, bar.caveat, bar.made_with):
        assert one.hasSelectedText() is False
        one.setSelection(0, 5)
        assert one.selectedText() == one.text()[:5]
