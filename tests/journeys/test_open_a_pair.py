from __future__ import annotations

import pytest

from app.state.bench_state import Phase
from core import read_recording
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT
from core.wording.judgements import WORDS
from core.wording.recordings import when
from tests.journeys.stories import on_show, pair

# What sample_records/README.md tells of each pair.
STORIES = {
    "raised": ("in-reach-backed", ("V1", "V2")),
    "inferior": ("beyond-reach", ("II", "III", "aVF")),
    "steady": ("steady", ()),
    "medial": ("in-reach-backed", ("V6",)),
}


@pytest.mark.parametrize("story", STORIES)
def test_the_bench_tells_the_story_of_the_pair_with_its_cautions(bench, until, story):
    judgement, leads = STORIES[story]
    bench.open_pair(*pair(story))
    until(Phase.JUDGED)
    comparison = bench.state.comparison
    assert comparison.overall.judgement == judgement
    assert all(comparison.leads[lead].judgement == judgement for lead in leads)
    said = on_show(bench)
    for part in (WORDS[judgement], comparison.overall.next_step, CAUTION, PLACEMENT_CAVEAT):
        assert part in said
    for path in pair(story):
        recording = read_recording(path)
        assert recording.subject.name in said
        assert when(recording.recorded_at) in said


def test_two_recordings_chosen_in_dialogs_are_compared(bench, until, choose_file):
    earlier, later = pair("raised")
    choose_file(earlier)
    bench.actions_list.by_id["open.earlier"].trigger()
    assert bench.state.phase is Phase.EMPTY
    choose_file(later)
    bench.actions_list.by_id["open.later"].trigger()
    until(Phase.JUDGED)
    assert bench.state.comparison.overall.judgement == "in-reach-backed"


def test_the_next_pair_takes_the_place_of_the_one_before(bench, until, inferior):
    bench.state.finish(inferior)
    bench.open_pair(*pair("steady"))
    assert bench.state.phase is Phase.WORKING
    assert "beyond reach" not in on_show(bench)
    until(Phase.JUDGED)
    assert "Invented Birch" not in on_show(bench)
    assert bench.state.comparison.overall.judgement == "steady"


def test_the_pair_that_is_asked_for_last_is_the_one_that_is_shown(bench, until, qtbot):
    for story in ("inferior", "medial", "steady", "raised"):
        bench.open_pair(*pair(story))
        qtbot.wait(20)
    until(Phase.JUDGED)
    qtbot.wait(50)
    assert bench.state.comparison.earlier.recording.source.name == "raised-earlier"
