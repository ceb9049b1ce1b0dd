from __future__ import annotations

import pytest

from app.state.bench_state import BenchState, weightiest_lead


@pytest.fixture
def state() -> BenchState:
    return BenchState()


def test_a_further_lead_of_the_pair_can_be_looked_at(state, further, qtbot):
    state.finish(further)
    with qtbot.waitSignal(state.lead_changed):
        state.select_lead("V7")
    assert state.lead == "V7"
    state.select_lead("Z")  # neither recording holds it
    assert state.lead == "V7"


def test_without_a_pair_there_is_no_further_lead(state):
    state.select_lead("V7")
    assert state.lead == "V2"


def test_views_never_see_a_lead_that_the_pair_does_not_hold(state, further, raised):
    state.finish(further)
    state.select_lead("V7")
    state.begin()
    seen = []
    state.phase_changed.connect(lambda: seen.append(state.lead))
    state.finish(raised)
    assert seen == [weightiest_lead(raised)]


def test_a_further_lead_is_never_the_weightiest(further, raised):
    assert weightiest_lead(further) == weightiest_lead(raised)
