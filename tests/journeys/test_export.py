from __future__ import annotations

import csv
import errno
import io
import json
import os

import pytest

from app.state.bench_state import Phase
from core import compare, read_recording
from core.recordings.leads import TWELVE_LEADS
from core.wording.caution import CAUTION, PLACEMENT_CAVEAT
from tests.app.report.pages import texts
from tests.helpers.schemas import validate
from tests.journeys.stories import pair

KINDS = pytest.mark.parametrize("kind", ["pdf", "json", "csv"])


@pytest.fixture
def judged(bench, raised):
    """The engine has no part in these journeys: its result is put in."""
    bench.state.choose(*pair("raised"))
    bench.state.finish(raised)
    return bench


def export(bench, kind: str) -> None:
    bench.actions_list.by_id[f"export.{kind}"].trigger()


def test_the_report_says_what_the_bench_says(judged, choose_file, tmp_path):
    choose_file(tmp_path / "report.pdf")
    judged.report_button.click()
    pages = texts((tmp_path / "report.pdf").read_bytes())
    overall = judged.state.comparison.overall
    assert " ".join(overall.sentence.split()) in pages[0]
    for page in pages:
        assert CAUTION in page
        assert PLACEMENT_CAVEAT in page
    assert judged.statusBar().currentMessage() == "Wrote report.pdf."


def test_the_json_holds_what_python_would_have_given(judged, choose_file, tmp_path):
    choose_file(tmp_path / "result.json")
    export(judged, "json")
    content = json.loads((tmp_path / "result.json").read_text(encoding="utf-8"))
    validate("comparison", content)
    again = compare(*map(read_recording, pair("raised"))).to_dict()
    for given in (content, again):
        del given["made_at"]
    assert content == json.loads(json.dumps(again))


def test_the_table_holds_every_lead_and_its_judgement(judged, choose_file, tmp_path):
    choose_file(tmp_path / "table.csv")
    export(judged, "csv")
    rows = list(csv.DictReader(io.StringIO((tmp_path / "table.csv").read_text(encoding="utf-8"))))
    held = {row["lead"]: row["judgement"] for row in rows}
    leads = judged.state.comparison.leads
    assert held == {lead: leads[lead].judgement for lead in TWELVE_LEADS}


@KINDS
def test_no_folder_is_written_into_an_export(judged, choose_file, tmp_path, kind):
    choose_file(tmp_path / "out")
    export(judged, kind)
    content = (tmp_path / "out").read_bytes()
    for folder in (tmp_path, pair("raised")[0].parent):
        assert str(folder).encode() not in content


@KINDS
def test_an_older_file_is_kept_when_writing_fails(judged, choose_file, tmp_path, monkeypatch, kind):
    def disk_full(handle: int) -> None:
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))

    target = tmp_path / f"older.{kind}"
    target.write_text("what was written last year")
    choose_file(target)
    monkeypatch.setattr("core.files.os.fsync", disk_full)
    export(judged, kind)
    assert target.read_text() == "what was written last year"
    assert [path.name for path in tmp_path.iterdir()] == [target.name]
    told = judged.statusBar().currentMessage()
    assert target.name in told
    assert os.strerror(errno.ENOSPC) in told
    assert str(tmp_path) not in told


@KINDS
def test_a_folder_that_is_gone_is_told_in_a_sentence(judged, choose_file, tmp_path, kind):
    choose_file(tmp_path / "gone" / "out")
    export(judged, kind)
    told = judged.statusBar().currentMessage()
    assert told.startswith("out could not be written: ")
    assert judged.state.phase is Phase.JUDGED


def test_an_export_can_be_done_again_after_it_failed(judged, choose_file, tmp_path):
    choose_file(tmp_path / "gone" / "out.json")
    export(judged, "json")
    choose_file(tmp_path / "out.json")
    export(judged, "json")
    assert (tmp_path / "out.json").is_file()
