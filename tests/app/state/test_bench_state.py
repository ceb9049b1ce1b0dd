from __future__ import annotations

from pathlib import Path

import pytest

from app.state.bench_state import BenchState, Phase, weightiest_lead

EARLIER, LATER = Path("earlier.hea"), Path("later.hea")


@pytest.fixture
def state() -> BenchState:
    return BenchState()


def test_it_starts_empty(state):
    assert (state.phase, state.has_pair, state.has_comparison) == (Phase.EMPTY, False, False)


def test_a_pair_is_compared_and_judged(state, raised, qtbot):
    state.choose(EARLIER, LATER)
    assert state.has_pair
    state.begin()
    assert state.phase is Phase.WORKING
    with qtbot.waitSignal(state.progress_changed):
        state.advance(0.4, "laying the beats")
    assert (state.progress, state.progress_words) == (0.4, "laying the beats")
    with qtbot.waitSignal(state.phase_changed):
        state.finish(raised)
    assert state.has_comparison


def test_an_old_result_never_stands_under_a_new_pair(state, raised):
    for act in (
        lambda: state.choose(EARLIER, LATER),
        state.begin,
        lambda: state.refuse("No."),
        state.stop,
    ):
        state.choose(EARLIER, LATER)
        state.begin()
        state.finish(raised)
        act()
        assert not state.has_comparison


def test_a_refusal_is_kept_until_another_pair_is_chosen(state):
    state.choose(EARLIER, LATER)
    state.refuse("Two persons.", ("identifiers-differ",))
    assert (state.phase, state.refusal) == (Phase.REFUSED, "Two persons.")
    assert state.liftable_stops == ("identifiers-differ",)
    state.choose(LATER, EARLIER)
    assert (state.refusal, state.liftable_stops) == ("", ())


def test_the_weightiest_lead_comes_into_view(state, raised, inferior, steady):
    assert weightiest_lead(raised) == "V2"
    assert weightiest_lead(inferior) in ("II", "III", "aVF")
    assert weightiest_lead(steady) == "V2"
    state.finish(inferior)
    assert state.lead == weightiest_lead(inferior)


def test_selecting_the_selected_lead_says_nothing(state, qtbot):
    with qtbot.assertNotEmitted(state.lead_changed):
        state.select_lead(state.lead)
        state.select_lead("no lead")
    with qtbot.waitSignal(state.lead_changed):
        state.select_lead("aVL")
