from __future__ import annotations

from pathlib import Path

import pytest

from app.state.bench_state import BenchState
from app.state.stated import UNITS, Stated, rate_of_text
from core.recordings.csv_header import millivolts_per

A, B, C = Path("a.csv"), Path("b.csv"), Path("c.csv")
IN_UV, AT_250 = Stated(unit="µV"), Stated(sampling_rate_hz=250.0)


@pytest.fixture
def state() -> BenchState:
    made = BenchState()
    made.choose(A, B)
    made.remember(A, IN_UV)
    made.remember(B, AT_250)
    return made


def test_every_unit_that_is_offered_can_be_read():
    assert [millivolts_per(unit) for unit in UNITS] == [1.0, 1e-3, 1e3, 1e-6]


@pytest.mark.parametrize(
    ("text", "rate_hz"),
    [("500", 500.0), (" 250 ", 250.0), ("257,5", 257.5), ("257.5", 257.5), ("100", 100.0)],
)
def test_a_rate_is_taken_with_either_decimal_mark(text, rate_hz):
    assert rate_of_text(text) == rate_hz


@pytest.mark.parametrize("text", ["", "fast", "99.9", "8001", "nan", "inf", "-500", "1,000", "5e9"])
def test_what_is_no_rate_of_an_ecg_is_none(text):
    assert rate_of_text(text) is None


def test_an_answer_holds_while_its_table_is_one_of_the_two(state):
    state.choose(B, A)
    assert state.stated == {A: IN_UV, B: AT_250}
    state.begin()
    state.refuse("Two persons.", ("identifiers-differ",))
    state.begin()
    state.set_order(A, B)
    assert state.stated == {A: IN_UV, B: AT_250}
    state.choose(A, C)
    assert state.stated == {A: IN_UV}
    state.choose(C, None)
    assert state.stated == {}


def test_a_table_that_is_opened_anew_is_asked_anew(state):
    state.forget(A, C)
    assert state.stated == {B: AT_250}
