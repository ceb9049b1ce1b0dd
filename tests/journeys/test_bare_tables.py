"""Tables that say neither unit nor rate, opened in the real window."""

from __future__ import annotations

import pytest

from app.state.bench_state import Phase
from app.state.stated import Stated
from app.views import dialogs
from tests.helpers.tables import RATE_HZ, bare_table
from tests.journeys.stories import names, on_show, pair


@pytest.fixture
def asked(monkeypatch) -> list[tuple[str, tuple[str, ...]]]:
    """Every file that was asked about, and for what; the true answer is given."""
    heard = []

    def answer(parent, error):
        heard.append((error.path.name, error.missing))
        return Stated(
            "mV" if "unit" in error.missing else None,
            RATE_HZ if "rate" in error.missing else None,
        )

    monkeypatch.setattr(dialogs, "ask_unstated", answer)
    return heard


def test_two_bare_tables_are_judged_as_the_records_are(bench, until, tmp_path, asked, raised):
    earlier = bare_table(tmp_path, "raised-earlier")
    later = bare_table(tmp_path, "raised-later", unit_stated=True)
    bench.open_pair(earlier, later)
    until(Phase.JUDGED)
    assert asked == [("raised-earlier.csv", ("unit", "rate")), ("raised-later.csv", ("rate",))]
    judged = {lead: one.judgement for lead, one in bench.state.comparison.leads.items()}
    assert judged == {lead: one.judgement for lead, one in raised.leads.items()}
    assert "stated by the user: the unit mV and 500 samples a second" in on_show(bench)
    bench.swap()
    until(Phase.JUDGED)
    assert names(bench) == ("raised-later.csv", "raised-earlier.csv")
    assert len(asked) == 2


def test_dropped_together_a_table_is_asked_about_too(bench, until, tmp_path, asked):
    bench.open_dropped([pair("raised")[0], bare_table(tmp_path, "raised-later")])
    until(Phase.JUDGED)
    assert asked == [("raised-later.csv", ("unit", "rate"))]


def test_a_question_that_is_not_answered_leaves_the_refusal(bench, until, tmp_path, monkeypatch):
    monkeypatch.setattr(dialogs, "ask_unstated", lambda parent, error: None)
    bench.open_pair(pair("raised")[0], bare_table(tmp_path, "raised-later"))
    until(Phase.REFUSED)
    said = on_show(bench)
    assert "raised-later.csv: the file does not say in which unit lead I is" in said
    assert "--" not in said  # no option of a command
