"""The bench asks for what a table lacks, and remembers the answer."""

from __future__ import annotations

from pathlib import Path

import pytest

from app.state.bench_state import Phase
from app.state.stated import Stated
from app.views import dialogs
from core import TableIncomplete

A, B, C = Path("/invented/a.csv"), Path("/invented/b.csv"), Path("/invented/c.csv")
IN_UV, AT_250 = Stated(unit="µV"), Stated(sampling_rate_hz=250.0)


@pytest.fixture
def requests(bench, monkeypatch):
    """What the bench wants compared."""
    asked = []
    monkeypatch.setattr(bench.runner, "start", asked.append)
    return asked


@pytest.fixture
def answers(monkeypatch):
    """What the reader answers for each file, and which files were asked about."""
    given: dict[Path, Stated | None] = {A: IN_UV, B: AT_250}
    asked: list[Path] = []

    def answer(parent, error):
        asked.append(error.path)
        return given[error.path]

    monkeypatch.setattr(dialogs, "ask_unstated", answer)
    return given, asked


def lacks(bench, path: Path) -> None:
    bench.runner.unstated.emit(
        TableIncomplete(path, ("unit",), "does not say in which unit lead I is", "write it")
    )


def test_an_answer_has_the_pair_compared_with_it(bench, requests, answers):
    bench.open_pair(A, B)
    lacks(bench, A)
    lacks(bench, B)
    assert [dict(request.stated) for request in requests] == [
        {},
        {A: IN_UV},
        {A: IN_UV, B: AT_250},
    ]
    assert bench.state.phase is Phase.WORKING


def test_without_an_answer_the_refusal_stands(bench, requests, answers):
    answers[0][A] = None
    bench.open_pair(A, B)
    lacks(bench, A)
    assert len(requests) == 1
    assert bench.state.phase is Phase.REFUSED
    assert bench.verdict.sentence.text().startswith("a.csv: the file does not say in which unit")
    assert (bench.state.earlier, bench.state.later, bench.state.stated) == (A, B, {})


def test_another_later_file_a_swap_and_a_lifted_stop_do_not_ask_again(bench, requests, answers):
    bench.open_pair(A, B)
    lacks(bench, A)
    bench.open_dropped([C])
    assert (requests[-1].later, requests[-1].stated) == (C, {A: IN_UV})
    bench.swap()
    assert (requests[-1].later, requests[-1].stated) == (A, {A: IN_UV})
    bench.state.refuse("Two persons.", ("identifiers-differ",))
    bench.verdict.lift.click()
    assert requests[-1].stated == {A: IN_UV}
    assert answers[1] == [A]


def test_an_answer_keeps_the_order_by_time_and_the_lifted_stops(bench, requests, answers):
    bench.open_dropped([A, B])
    bench.state.refuse("Two persons.", ("identifiers-differ",))
    bench.verdict.lift.click()
    lacks(bench, B)
    assert requests[-1].order_by_time
    assert requests[-1].settings.lifted_stops == ("identifiers-differ",)


@pytest.mark.parametrize(
    "again",
    [
        lambda bench, monkeypatch: bench.open_pair(A, B),
        lambda bench, monkeypatch: (
            monkeypatch.setattr(dialogs, "ask_recording", lambda parent, title: A),
            bench.choose_recording("earlier"),
        ),
    ],
    ids=["as a pair", "alone"],
)
def test_a_wrong_answer_is_mended_by_opening_the_file_again(
    bench, requests, answers, monkeypatch, again
):
    bench.open_pair(A, B)
    lacks(bench, A)
    again(bench, monkeypatch)
    assert A not in requests[-1].stated


def test_a_request_under_way_is_not_touched_by_later_answers(bench, requests, answers):
    bench.open_pair(A, B)
    lacks(bench, A)
    lacks(bench, B)
    assert requests[1].stated == {A: IN_UV}
