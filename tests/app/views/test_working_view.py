from __future__ import annotations

from pathlib import Path

import pytest

from app.state.bench_state import BenchState
from app.views.working_view import WorkingView
from tests.app.drawing.readback import drawn_on, lying_on_each_other, words
from tests.app.views.showing import PHASES, show, working

STEPS = [
    "reading the recordings",
    *(f"measuring the {which} recording" for which in ("earlier", "later")),
    *(f"invented step {number}" for number in range(7)),
]


@pytest.fixture
def state() -> BenchState:
    made = BenchState()
    made.choose(Path("day-1.hea"), Path("day-30.dcm"))
    made.begin()
    return made


@pytest.fixture
def view(qtbot, light, state) -> WorkingView:
    made = WorkingView(state)
    qtbot.addWidget(made)
    made.resize(1256, 440)
    return made


def test_it_names_both_files_and_the_step(view, state):
    state.advance(0.4, "laying the beats on each other")
    assert [piece.text for piece in drawn_on(view)] == [
        *("Earlier", "day-1.hea", "Later", "day-30.dcm"),
        "reading the recordings",
        "laying the beats on each other …",
    ]


def test_the_present_step_stands_out(view, state):
    state.advance(0.4, "laying the beats on each other")
    *_, before, present = drawn_on(view)
    assert present.baseline > before.baseline
    assert "Bold" in present.font
    assert "Bold" not in before.font


def test_it_follows_an_order_told_by_time(view, state):
    state.set_order(Path("day-30.dcm"), Path("day-1.hea"))
    assert words(drawn_on(view)).startswith("Earlier day-30.dcm Later day-1.hea")


def test_a_step_that_is_told_again_stands_once(view, state):
    for share in (0.1, 0.2, 0.3):
        state.advance(share, "measuring the earlier recording")
    assert state.steps == ["reading the recordings", "measuring the earlier recording"]
    state.begin()
    assert state.steps == ["reading the recordings"]


@pytest.mark.parametrize("height", [160, 300, 440])
def test_where_not_all_steps_have_room_the_latest_stand(view, state, height):
    view.resize(700, height)
    for number, step in enumerate(STEPS):
        state.advance(number / len(STEPS), step)
    drawn = drawn_on(view)
    assert drawn[-1].text == f"{STEPS[-1]} …"
    assert max(piece.baseline for piece in drawn) < height
    assert lying_on_each_other(drawn) == []


def test_a_long_name_keeps_its_end_and_the_place(view, state):
    state.choose(Path("n" * 200 + "-day-1.hea"), Path("b.hea"))
    state.begin()
    name = drawn_on(view)[1]
    assert name.text.endswith("-day-1.hea")
    assert "…" in name.text
    assert name.right <= view.width()


def test_a_screen_reader_is_told(view, state):
    state.advance(0.4, "laying the beats")
    assert view.accessibleDescription() == "earlier day-1.hea, later day-30.dcm: laying the beats"


@pytest.mark.parametrize("phase", PHASES)
def test_it_is_on_show_while_a_pair_is_worked_out_and_only_then(bench, raised, phase):
    phase(bench, raised)
    (view,) = bench.findChildren(WorkingView)
    assert view.isVisible() == (phase is working)
    assert bench.wall.isVisible() == (phase is show)
    assert bench.start_view.isVisible() == (phase not in (working, show))
