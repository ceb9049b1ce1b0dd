"""Tables whose unit and rate the reader stated, in the thread that reads them."""

from __future__ import annotations

import pytest

from app.jobs.compare_job import CompareRequest, CompareRunner, compare_files, in_order
from app.state.stated import Stated
from core import Settings, TableIncomplete
from core.shipped_files import samples_folder
from tests.helpers.tables import RATE_HZ, bare_table

ANSWER = Stated("mV", RATE_HZ)


@pytest.fixture
def table(tmp_path):
    return bare_table(tmp_path, "steady-earlier")


def test_a_table_is_read_by_what_was_stated_of_it(table):
    other = samples_folder() / "steady-later.hea"
    asked = CompareRequest(table, other, Settings(), stated={table: ANSWER})
    made = compare_files(asked, lambda share, words: None, lambda: False)
    assert made.earlier.recording.sampling_rate_hz == RATE_HZ
    assert [notice.code for notice in made.notices].count("stated-by-user") == 1


def test_the_order_by_time_is_told_with_what_was_stated(table):
    other = samples_folder() / "steady-later.hea"
    asked = CompareRequest(other, table, Settings(), stated={table: ANSWER})
    assert in_order(asked).earlier == other  # the table states no time


@pytest.mark.parametrize("order_by_time", [False, True])
def test_what_a_table_lacks_comes_as_more_than_a_sentence(table, qtbot, order_by_time):
    runner, refusals = CompareRunner(), []
    runner.failed.connect(lambda *said: refusals.append(said))
    asked = CompareRequest(samples_folder() / "steady-later.hea", table, Settings(), order_by_time)
    with qtbot.waitSignal(runner.unstated) as came:
        runner.start(asked)
    (error,) = came.args
    assert isinstance(error, TableIncomplete)
    assert (error.path, error.missing) == (table, ("unit", "rate"))
    runner.shut_down()
    assert refusals == []
