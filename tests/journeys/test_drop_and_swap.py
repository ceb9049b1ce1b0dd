from __future__ import annotations

import pytest

from app.state.bench_state import Phase
from tests.journeys.stories import names, on_show, pair


def test_swapping_turns_the_pair_round(bench, until, raised):
    bench.state.choose(*pair("raised"))
    bench.state.finish(raised)
    before = raised.leads["V2"].measures["t_mv"].change
    bench.swap_button.click()
    assert bench.state.comparison is None
    until(Phase.JUDGED)
    assert names(bench) == ("raised-later", "raised-earlier")
    after = bench.state.comparison.leads["V2"].measures["t_mv"].change
    # T is measured in each recording by itself; only the place where it is read may differ.
    assert after == pytest.approx(-before, rel=0.1)
    assert "given as later is the older one" in on_show(bench)


def test_a_pair_that_was_ordered_by_its_times_can_be_swapped(bench, until):
    bench.open_dropped(list(pair("raised")[::-1]))
    until(Phase.JUDGED)
    assert names(bench) == ("raised-earlier", "raised-later")
    bench.swap()
    until(Phase.JUDGED)
    assert names(bench) == ("raised-later", "raised-earlier")


def test_a_third_recording_takes_the_place_of_the_later_whichever_was_dropped_first(bench, until):
    bench.open_dropped(list(pair("raised")[::-1]))
    until(Phase.JUDGED)
    bench.open_dropped([pair("medial")[1]])
    until(Phase.JUDGED)
    assert names(bench) == ("raised-earlier", "medial-later.dcm")
