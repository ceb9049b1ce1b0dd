from __future__ import annotations

import pytest

from app.state.bench_state import BenchState
from app.views.lead_depth import LeadDepth
from core.recordings.leads import TWELVE_LEADS
from core.wording.judgements import WORDS
from tests.app.drawing.readback import drawn_on, pixels, words


@pytest.fixture
def state() -> BenchState:
    return BenchState()


@pytest.fixture
def depth(qtbot, light, state) -> LeadDepth:
    made = LeadDepth(state)
    qtbot.addWidget(made)
    made.resize(518, 603)
    return made


def test_without_a_result_it_is_blank(depth):
    assert drawn_on(depth) == []


@pytest.mark.parametrize("lead", TWELVE_LEADS)
def test_it_follows_the_selection(depth, state, inferior, lead):
    state.finish(inferior)
    state.select_lead(lead)
    drawn = [piece.text for piece in drawn_on(depth)]
    assert drawn[:2] == [f"{lead} in depth", WORDS[inferior.leads[lead].judgement]]


def test_another_lead_is_another_picture(depth, state, raised):
    state.finish(raised)
    state.select_lead("V1")
    first = pixels(depth.grab().toImage())
    state.select_lead("V6")
    assert (pixels(depth.grab().toImage()) != first).any()


def test_another_pair_is_another_picture(depth, state, raised, medial):
    state.finish(raised)
    state.select_lead("V3")
    first = pixels(depth.grab().toImage())
    state.finish(medial)
    state.select_lead("V3")
    assert (pixels(depth.grab().toImage()) != first).any()


def test_both_plots_have_numbers_with_their_units(depth, state, raised):
    state.finish(raised)
    texts = [piece.text for piece in drawn_on(depth)]
    assert texts.count("0 mV") == 2
    assert texts.count("R") == 2
    assert texts.count("+200 ms") == 2


def test_every_curve_and_band_is_named(depth, state, raised):
    state.finish(raised)
    said = words(drawn_on(depth))
    for name in ("earlier", "later", "repeat noise", "reach", "change: later less earlier"):
        assert name in said
    assert "expected" in said


def test_the_point_where_st_is_read_is_marked(depth, state, raised):
    state.finish(raised)
    assert f"J+{raised.settings.st_point_ms:g}" in words(drawn_on(depth))


def test_a_lead_that_is_not_judged_says_why(depth, state, four_flat):
    state.finish(four_flat)
    state.select_lead("V1")
    said = words(drawn_on(depth))
    assert "not judged" in said
    assert "later tracing flat" in said
