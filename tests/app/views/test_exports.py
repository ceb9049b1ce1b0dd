from __future__ import annotations

import csv
import io
import json

import pytest

from app.views.exports import write_csv, write_json, write_pdf
from core.recordings.leads import TWELVE_LEADS
from core.wording.caution import CAUTION, CAUTIONS, PLACEMENT_CAVEAT
from tests.app.report.pages import texts
from tests.helpers.schemas import validate


@pytest.fixture
def folder(qapp, tmp_path):
    return tmp_path


def test_the_json_is_the_contracts_and_cautions(folder, raised):
    write_json(folder / "a.json", raised)
    content = json.loads((folder / "a.json").read_text(encoding="utf-8"))
    validate("comparison", content)
    assert content == json.loads(json.dumps(raised.to_dict()))
    assert content["caveat"] == PLACEMENT_CAVEAT
    assert content["cautions"] == list(CAUTIONS)


def test_the_table_has_a_row_for_each_measure_of_each_lead(folder, raised):
    write_csv(folder / "a.csv", raised)
    rows = list(csv.DictReader(io.StringIO((folder / "a.csv").read_text(encoding="utf-8"))))
    assert {row["lead"] for row in rows} == set(TWELVE_LEADS)
    for row in rows:
        result = raised.leads[row["lead"]]
        assert row["judgement"] == result.judgement
        change = result.measures[row["measure"]].change
        # Text of a float and back is exact in Python.
        assert (float(row["change"]) if row["change"] else None) == change


def test_the_pdf_cautions_on_every_page(folder, raised):
    write_pdf(folder / "a.pdf", raised)
    for page in texts((folder / "a.pdf").read_bytes()):
        assert CAUTION in page


@pytest.mark.parametrize("write", [write_json, write_csv, write_pdf])
def test_an_older_file_is_replaced_and_nothing_else_is_left(folder, raised, write):
    (folder / "a").write_text("older")
    write(folder / "a", raised)
    assert [path.name for path in folder.iterdir()] == ["a"]
    assert (folder / "a").read_bytes() != b"older"
