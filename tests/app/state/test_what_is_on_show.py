from __future__ import annotations

from dataclasses import replace
from pathlib import Path

import pytest

from app.state.bench_state import BenchState, Phase, weightiest_lead
from core.comparison.results import NOTHING

EARLIER, LATER, OTHER = Path("earlier.hea"), Path("later.hea"), Path("other.hea")


@pytest.fixture
def state() -> BenchState:
    made = BenchState()
    made.choose(EARLIER, LATER)
    return made


@pytest.fixture
def judged(state, raised) -> BenchState:
    state.begin()
    state.finish(raised)
    return state


def test_one_recording_is_no_pair(state):
    for earlier, later in ((EARLIER, None), (None, LATER)):
        state.choose(earlier, later)
        assert not state.has_pair
        assert state.phase is Phase.EMPTY


def test_swapping_exchanges_the_two_and_puts_the_result_away(judged):
    judged.choose(judged.later, judged.earlier)
    assert (judged.earlier, judged.later) == (LATER, EARLIER)
    assert judged.comparison is None
    assert judged.phase is Phase.EMPTY


@pytest.mark.parametrize(
    "act",
    [
        lambda state: state.choose(EARLIER, OTHER),
        lambda state: state.choose(None, None),
        lambda state: state.begin(),
        lambda state: state.refuse("other.hea: the file is empty."),
    ],
    ids=["another pair", "no pair", "a new comparison", "a refusal"],
)
def test_a_result_goes_when_something_else_takes_its_place(judged, act):
    act(judged)
    assert judged.comparison is None
    assert not judged.has_comparison


def test_views_hear_of_a_phase_when_the_state_is_already_in_it(state, raised):
    seen = []
    state.phase_changed.connect(lambda: seen.append((state.phase, state.comparison is not None)))
    state.begin()
    state.finish(raised)
    state.refuse("No.")
    assert [phase for phase, _ in seen] == [Phase.WORKING, Phase.JUDGED, Phase.REFUSED]
    assert seen[0][1] is False
    assert seen[1][1] is True


def test_progress_starts_anew_with_every_comparison(state, raised):
    state.begin()
    state.advance(0.9, "judging")
    state.finish(raised)
    state.begin()
    assert state.progress == 0.0
    assert state.progress_words != "judging"


def test_a_stopped_comparison_leaves_the_pair_chosen_and_nothing_judged(state):
    state.begin()
    state.stop()
    assert (state.earlier, state.later) == (EARLIER, LATER)
    assert state.phase is not Phase.WORKING
    assert not state.has_comparison


def test_a_refusal_that_cannot_be_lifted_forgets_the_stops_of_the_one_before(state):
    state.refuse("Two persons.", ("identifiers-differ",))
    state.refuse("The file is empty.")
    assert state.liftable_stops == ()


def test_a_lead_that_was_picked_stays_while_nothing_new_is_judged(judged):
    judged.select_lead("aVL")
    judged.refuse("No.")
    assert judged.lead == "aVL"


def test_leads_without_numbers_can_be_ranked(raised):
    nothing = {
        lead: replace(one, measures=dict.fromkeys(one.measures, NOTHING), judgement="not-judged")
        for lead, one in raised.leads.items()
    }
    assert weightiest_lead(replace(raised, leads=nothing)) in raised.leads


@pytest.mark.parametrize(
    ("graver", "lighter"),
    [
        ("beyond-reach", "in-reach-unbacked"),
        ("in-reach-unbacked", "in-reach-backed"),
        ("in-reach-backed", "steady"),
        ("steady", "not-judged"),
    ],
)
def test_the_graver_judgement_comes_into_view_before_the_larger_change(raised, graver, lighter):
    # V2 changed most; V6 hardly.
    leads = {lead: replace(one, judgement=lighter) for lead, one in raised.leads.items()}
    leads["V6"] = replace(leads["V6"], judgement=graver)
    expected = "V6" if graver != "steady" else "V2"  # where all is steady the view rests on V2
    assert weightiest_lead(replace(raised, leads=leads)) == expected
