from __future__ import annotations

import pytest

from app.state.bench_state import BenchState
from app.views.chest_panel import NOTE, ChestPanel
from core.recordings.leads import CHEST_LEADS
from tests.app.drawing.readback import drawn_on, pixels, words


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def panel(qtbot, light, state) -> ChestPanel:
    made = ChestPanel(state)
    qtbot.addWidget(made)
    made.resize(405, 357)
    return made


def test_without_a_result_it_is_blank(panel):
    assert drawn_on(panel) == []


def test_it_shows_the_six_electrodes_and_explains_its_signs(panel, state, raised):
    state.finish(raised)
    drawn = drawn_on(panel)
    texts = [piece.text for piece in drawn]
    assert texts[0] == "Chest map"
    assert set(CHEST_LEADS) <= set(texts)
    assert NOTE in words(drawn)


def test_it_names_the_distances_of_the_electrodes_that_moved(panel, state, raised):
    state.finish(raised)
    distances = [piece.text for piece in drawn_on(panel) if piece.text.endswith(" mm")]
    shifts = raised.placement.electrodes
    named = [lead for lead in CHEST_LEADS if shifts[lead].worth_naming()]
    assert named == ["V1", "V2"]
    # Besides the scale bar's.
    assert len(distances) == 1 + len(named)


def test_the_ring_follows_the_selection(panel, state, raised):
    state.finish(raised)
    pictures = []
    for lead in ("V2", "V5", "aVF"):
        state.select_lead(lead)
        pictures.append(pixels(panel.grab().toImage()))
    assert (pictures[0] != pictures[1]).any()
    assert (pictures[1] != pictures[2]).any()
